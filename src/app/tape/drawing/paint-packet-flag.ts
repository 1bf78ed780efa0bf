import { formatSigned } from './figures';
import type { PacketMark } from './packet-marks';
import type { InkedText } from './pen';
import type { Sheet } from './sheet';

/** Depth of the swallow-tail, and how far the staff reaches below the flag, px. Source: design 6. */
const TAIL_PX = 8;
const STAFF_PX = 5;
const RUNG_PX = 5;
const MOST_RUNGS = 4;

/** A packet as a flag: ring with the true movement, figures, wheel ladder. */
export function paintPacketFlag(sheet: Sheet, mark: PacketMark): void {
  const { view, palette, pen } = sheet;
  const isSelected = view.selection?.kind === 'packet' && view.selection.index === mark.index;
  const colour = isSelected ? palette.primary : palette.ink;
  paintCloth(sheet, mark, colour, isSelected ? 2 : 1.1);
  if (mark.rect.x === mark.x0) {
    const bottom = mark.rect.y + mark.rect.height;
    pen.down(mark.x0 + 0.5, mark.rect.y, bottom + STAFF_PX, colour, isSelected ? 2 : 1);
  }
  const radius = mark.rect.height / 2 - 5;
  const x = mark.rect.x + radius + 6;
  const y = mark.rect.y + mark.rect.height / 2;
  paintRing(sheet, mark.index, x, y, radius);
  if (mark.form === 'ring') return;
  const right = mark.form === 'flag' ? x + radius + 63 : mark.rect.x + mark.rect.width - TAIL_PX - 6;
  paintFigures(sheet, mark, x + radius + 14, right, y);
  if (mark.form === 'flag' && sheet.model.tape.packets.hasWheel)
    paintLadder(sheet, mark.index, mark.rect.x + mark.rect.width - 24, y);
}

function paintCloth(sheet: Sheet, { rect }: PacketMark, colour: string, widthPx: number): void {
  const { ctx, palette } = sheet;
  const right = rect.x + rect.width;
  const bottom = rect.y + rect.height;
  ctx.beginPath();
  ctx.moveTo(rect.x + 0.5, rect.y + 0.5);
  ctx.lineTo(right, rect.y + 0.5);
  ctx.lineTo(right - TAIL_PX, rect.y + rect.height / 2);
  ctx.lineTo(right, bottom - 0.5);
  ctx.lineTo(rect.x + 0.5, bottom - 0.5);
  ctx.closePath();
  ctx.fillStyle = palette.sheet;
  ctx.fill();
  ctx.strokeStyle = colour;
  ctx.lineWidth = widthPx;
  ctx.stroke();
}

function paintRing(sheet: Sheet, packet: number, x: number, y: number, radius: number): void {
  const { pen, palette, model } = sheet;
  const { packets } = model.tape;
  pen.ring(x, y, radius, palette.rule);
  pen.across(x - radius, x + radius, y, palette.grid);
  pen.down(x, y - radius, y + radius, palette.grid);
  const perCount = radius / sheet.ring();
  const tipX = x + packets.dx[packet] * perCount;
  const tipY = y + packets.dy[packet] * perCount;
  let fromX = x;
  let fromY = y;
  if (packets.firstStepDx !== undefined && packets.firstStepDy !== undefined) {
    // Two steps in one packet: the first as a thin line, the arrow goes on from there.
    fromX = x + packets.firstStepDx[packet] * perCount;
    fromY = y + packets.firstStepDy[packet] * perCount;
    pen.line(x, y, fromX, fromY, palette.ink2, 1);
    pen.disc(fromX, fromY, 1.2, palette.ink2);
  }
  const length = Math.hypot(tipX - fromX, tipY - fromY);
  if (length < 0.7) {
    pen.disc(tipX, tipY, 2, palette.ink);
    return;
  }
  const angle = Math.atan2(tipY - fromY, tipX - fromX);
  const head = Math.min(7, length);
  const stem = Math.max(0, length - head + 1);
  pen.line(fromX, fromY, fromX + stem * Math.cos(angle), fromY + stem * Math.sin(angle), palette.ink, 1.6);
  pen.arrowhead(tipX, tipY, angle, palette.ink, head, 2.8);
}

function paintFigures(sheet: Sheet, mark: PacketMark, x: number, right: number, y: number): void {
  const { pen, palette, model } = sheet;
  const { packets } = model.tape;
  const name: InkedText = { face: 'mono', sizePx: 11, weight: 400, colour: palette.ink2 };
  const figure: InkedText = { face: 'mono', sizePx: 13, weight: 600, colour: palette.ink, align: 'right' };
  const rows: [string, number, number][] = [
    ['Δx', packets.dx[mark.index], y - 10],
    ['Δy', packets.dy[mark.index], y + 10],
  ];
  for (const [text, value, middle] of rows) {
    if (mark.form === 'flag') pen.text(text, x, middle + 4, name);
    pen.text(formatSigned(value), right, middle + 4.5, figure);
  }
}

/** One heavy rung for each step of the wheel; the arrowhead points down for steps towards the user. */
function paintLadder(sheet: Sheet, packet: number, x: number, y: number): void {
  const { pen, palette, model } = sheet;
  const steps = model.tape.packets.wheel[packet];
  const shown = Math.min(MOST_RUNGS, Math.abs(steps));
  const towards = Math.sign(steps);
  const tip = y + towards * (shown * RUNG_PX + 8);
  const bottom = towards > 0 ? tip - 4 : y + MOST_RUNGS * RUNG_PX;
  const top = towards < 0 ? tip + 4 : y - MOST_RUNGS * RUNG_PX;
  pen.down(x, top, bottom, palette.ink2);
  for (let rung = -MOST_RUNGS; rung <= MOST_RUNGS; rung++) {
    const rungY = y + rung * RUNG_PX;
    const isBeyond = towards !== 0 && rung * towards > shown;
    if (isBeyond) continue;
    const isHeavy = towards !== 0 && rung * towards > 0;
    pen.across(
      x - (isHeavy ? 7.5 : 3.5),
      x + (isHeavy ? 7.5 : 3.5),
      rungY,
      isHeavy ? palette.ink : palette.ink2,
      isHeavy ? 3 : 1,
    );
  }
  if (towards === 0) return;
  pen.arrowhead(x, tip, (towards * Math.PI) / 2, palette.ink, 5, 4);
  if (Math.abs(steps) > MOST_RUNGS) {
    const style: InkedText = { face: 'mono', sizePx: 10, weight: 600, colour: palette.ink, align: 'center' };
    pen.label(formatSigned(steps), x, y - towards * 16 + 4, style, palette.sheet, 1);
  }
}
