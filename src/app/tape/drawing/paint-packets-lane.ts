import { paintIncident } from './paint-incident';
import { paintNameplate } from './paint-nameplate';
import { BRACKET_PX } from './packet-marks';
import type { LaneMark, PacketMark } from './packet-marks';
import { paintPacketFlag } from './paint-packet-flag';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { laneOf, middleOf } from './sheet';
import type { LaneLayout } from './lanes';
import { countBefore } from '#shared/time/sorted-search';

const STICK_COLUMN_PX = 5;
const POST_PX = 4;

/** What lies under the stems: sticks of the survey, arrows, brackets. */
export function paintPacketGround(sheet: Sheet): void {
  const lane = laneOf(sheet, 'packets');
  if (lane === undefined) return;
  if (sheet.scaleName === 'survey') {
    paintSticks(sheet, lane);
    return;
  }
  const marks = sheet.marks();
  const arrows = marks.filter((mark) => mark.kind === 'packet' && mark.form === 'arrow');
  if (arrows.length > 0) sheet.pen.across(sheet.leftPx, sheet.rightPx, middleOf(lane), sheet.palette.rule);
  for (const mark of marks)
    if (mark.kind !== 'packet' || mark.form !== 'arrow') paintBracket(sheet, lane, mark);
  for (const mark of arrows) paintArrow(sheet, lane, mark as PacketMark);
}

/** What lies over the stems: flags, nameplates, frames of lost packets. */
export function paintPacketFlags(sheet: Sheet): void {
  for (const mark of sheet.marks()) {
    if (mark.kind === 'plate') paintNameplate(sheet, mark);
    else if (mark.kind === 'incident') paintIncident(sheet, mark);
    else if (mark.form !== 'arrow') paintPacketFlag(sheet, mark);
  }
}

/** The mean movement of each column as a stick from the centre line with a dot at its tip. */
function paintSticks(sheet: Sheet, lane: LaneLayout): void {
  const { ctx, pen, palette, scale, model, leftPx, rightPx } = sheet;
  const { dx, dy } = model.motion;
  const y = pen.snap(middleOf(lane)) + 0.5;
  pen.across(leftPx, rightPx, y, palette.ink2);
  const perCount = sheet.stick();
  const columnTicks = STICK_COLUMN_PX * scale.ticksPerPx;
  const first = Math.floor(scale.ticksAt(leftPx) / columnTicks);
  const last = Math.ceil(scale.ticksAt(rightPx) / columnTicks);
  const tips: [number, number][] = [];
  ctx.save();
  ctx.beginPath();
  ctx.rect(leftPx, lane.topPx, rightPx - leftPx, lane.heightPx);
  ctx.clip();
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 0.9;
  ctx.beginPath();
  let from = countBefore(model.packetStarts, first * columnTicks);
  for (let column = first; column < last; column++) {
    const to = countBefore(model.packetStarts, (column + 1) * columnTicks);
    const packets = to - from;
    if (packets > 0) {
      const x = scale.xOf((column + 0.5) * columnTicks);
      const tipX = x + ((dx[to] - dx[from]) / packets) * perCount;
      const tipY = y + ((dy[to] - dy[from]) / packets) * perCount;
      ctx.moveTo(x, y);
      ctx.lineTo(tipX, tipY);
      if (tipX !== x || tipY !== y) tips.push([tipX, tipY]);
    }
    from = to;
  }
  ctx.stroke();
  ctx.fillStyle = palette.ink;
  ctx.beginPath();
  for (const [x, tipY] of tips) {
    ctx.moveTo(x + 1.6, tipY);
    ctx.arc(x, tipY, 1.6, 0, 2 * Math.PI);
  }
  ctx.fill();
  ctx.restore();
}

function paintBracket(sheet: Sheet, lane: LaneLayout, mark: LaneMark): void {
  const { pen, palette, leftPx, rightPx, view } = sheet;
  if (mark.x1 < leftPx || mark.x0 > rightPx || mark.x1 - mark.x0 < 2) return;
  const y = lane.topPx + BRACKET_PX;
  const isSelected = view.selection?.kind === mark.kind && view.selection.index === mark.index;
  const colour = isSelected ? palette.primary : palette.ink2;
  const from = Math.max(mark.x0, leftPx);
  const to = Math.min(mark.x1, rightPx);
  if (mark.kind === 'incident') {
    const dashed = sheet.model.tape.incidents[mark.index].isAtEdge ? palette.ink3 : palette.violation;
    pen.dashed(from, y, to, y, [4, 3], dashed, 1.2);
    pen.down(mark.x0 + 0.5, y - POST_PX, y + POST_PX, dashed);
    pen.down(mark.x1 - 0.5, y - POST_PX, y + POST_PX, dashed);
    return;
  }
  pen.across(from, to, y, colour, isSelected ? 2 : 1);
  pen.down(mark.x0 + 0.5, y - POST_PX, y + POST_PX, colour);
  pen.down(mark.x1 - 0.5, y - POST_PX, y + POST_PX, colour);
  if (mark.kind === 'packet' && sheet.pxPerBit >= FROM.packetNumber) {
    const x = mark.x0 < leftPx ? Math.max(leftPx + 16, mark.x0 + 6) : mark.x0 + 6;
    const style = {
      face: 'sans',
      sizePx: 11,
      weight: 400,
      colour: isSelected ? palette.primary : palette.ink2,
    } as const;
    if (mark.x1 - x > 24) pen.label(`#${mark.index}`, x, y + 4, style, palette.sheet, 2);
  }
}

/** A packet too narrow for a flag: its movement alone, from the start of the packet. */
function paintArrow(sheet: Sheet, lane: LaneLayout, mark: PacketMark): void {
  const { pen, palette, model, view } = sheet;
  const { packets } = model.tape;
  const y = middleOf(lane);
  const isSelected = view.selection?.kind === 'packet' && view.selection.index === mark.index;
  const colour = isSelected ? palette.primary : palette.ink;
  if (mark.x1 - mark.x0 > 6)
    pen.across(mark.x0, mark.x1, lane.topPx + BRACKET_PX, isSelected ? palette.primary : palette.ink2);
  const perCount = sheet.stick();
  const dx = packets.dx[mark.index] * perCount;
  const dy = packets.dy[mark.index] * perCount;
  const x = (mark.x0 + mark.x1) / 2;
  const length = Math.hypot(dx, dy);
  if (length < 0.5) {
    pen.disc(x, y, 1.5, colour);
    return;
  }
  pen.line(x, y, x + dx, y + dy, colour, isSelected ? 2 : 1.1);
  pen.arrowhead(x + dx, y + dy, Math.atan2(dy, dx), colour, Math.min(7, length), 2.2);
}
