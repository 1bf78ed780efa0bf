import type { InkedText } from './pen';
import { beamTexts, readOut } from './read-out';
import type { Sheet } from './sheet';
import { bottomOf, laneOf, middleOf } from './sheet';
import { textWidth } from './text-measure';

const BLADE_PX = { width: 17, height: 16, tip: 8 };
const TEXT_GAP_PX = 20;

/** Lines, blades and beam of the dividers. The lines pass under flags and nameplates. */
export function paintDividers(sheet: Sheet): void {
  const { a, b } = sheet.view.dividers;
  if (a !== null) paintLine(sheet, a);
  if (b !== null) paintLine(sheet, b);
  if (laneOf(sheet, 'dividers') === undefined) return;
  if (a !== null && b !== null) paintBeam(sheet, a, b);
  if (a !== null) paintBlade(sheet, 'A', a, -1);
  if (b !== null) paintBlade(sheet, 'B', b, 1);
}

function paintLine(sheet: Sheet, ticks: number): void {
  const { pen, palette, scale, lanes } = sheet;
  const x = scale.xOf(ticks);
  const time = laneOf(sheet, 'time');
  const findings = laneOf(sheet, 'findings');
  const top = time === undefined ? 0 : bottomOf(time);
  const bottom = findings?.topPx ?? (lanes.length === 0 ? 0 : bottomOf(lanes[lanes.length - 1]));
  let from = top;
  for (const hole of holesAt(sheet, x)) {
    if (hole.top > from) pen.down(x, from, hole.top, palette.primary);
    from = Math.max(from, hole.bottom);
  }
  if (bottom > from) pen.down(x, from, bottom, palette.primary);
}

/** Where a flag or a nameplate covers the line. */
function holesAt(sheet: Sheet, x: number): { top: number; bottom: number }[] {
  return sheet
    .marks()
    .filter((mark) => {
      const isDrawn = mark.kind === 'packet' ? mark.form !== 'arrow' : mark.kind === 'plate' || mark.hasFrame;
      return isDrawn && x >= mark.rect.x - 0.5 && x <= mark.rect.x + mark.rect.width;
    })
    .map((mark) => ({ top: mark.rect.y, bottom: mark.rect.y + mark.rect.height }));
}

/** A flag with its point on the line: A to the left of it, B to the right. */
function paintBlade(sheet: Sheet, name: 'A' | 'B', ticks: number, side: -1 | 1): void {
  const { pen, palette, scale } = sheet;
  const lane = laneOf(sheet, 'dividers');
  const x = pen.snap(scale.xOf(ticks)) + side * -0.5;
  if (lane === undefined || x < sheet.leftPx - 1 || x > sheet.rightPx + 1) return;
  const top = lane.topPx + 3;
  const bottom = top + BLADE_PX.height;
  pen.polygon(
    [
      [x, top],
      [x + side * BLADE_PX.width, top],
      [x + side * BLADE_PX.width, bottom],
      [x + side * 7, bottom],
      [x, bottom + BLADE_PX.tip],
    ],
    palette.primary,
  );
  pen.text(name, x + (side * BLADE_PX.width) / 2, top + 12, {
    face: 'mono',
    sizePx: 11,
    weight: 600,
    colour: palette.onPrimary,
    align: 'center',
  });
}

function paintBeam(sheet: Sheet, a: number, b: number): void {
  const { pen, palette, scale, leftPx, rightPx } = sheet;
  const lane = laneOf(sheet, 'dividers');
  if (lane === undefined) return;
  const y = middleOf(lane) - 1;
  const [x0, x1] = [scale.xOf(Math.min(a, b)), scale.xOf(Math.max(a, b))];
  const from = Math.max(x0, leftPx);
  const to = Math.min(x1, rightPx);
  const texts = beamTexts(readOut(sheet.model, { a, b }));
  const style: InkedText = { face: 'mono', sizePx: 11, weight: 500, colour: palette.primary };
  const width = texts.reduce((sum, text) => sum + textWidth(text, style), (texts.length - 1) * TEXT_GAP_PX);
  if (to > from) {
    pen.across(from, to, y, palette.primary);
    if (x0 >= leftPx && to - from > 14) pen.arrowhead(x0 + 1, y, Math.PI, palette.primary, 8, 2.2);
    if (x1 <= rightPx && to - from > 14) pen.arrowhead(x1 - 1, y, 0, palette.primary, 8, 2.2);
  }
  const fits = to - from >= width + 36;
  let x = fits ? (from + to - width) / 2 : x1 + BLADE_PX.width + 7;
  if (!fits && (x < leftPx || x + width > rightPx)) return;
  if (fits) pen.fill({ x: x - 5, y: y - 6, width: width + 10, height: 12 }, palette.sheet);
  for (const text of texts) x += pen.text(text, x, y + 4, style) + TEXT_GAP_PX;
}
