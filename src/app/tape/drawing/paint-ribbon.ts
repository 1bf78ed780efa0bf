import type { TapeLine } from '#shared/contract/tape-payload';
import { SPACE, UNKNOWN } from '#shared/line/level-trace';
import { countUpTo } from '#shared/time/sorted-search';
import { spaceUpTo } from './prefix-sums';
import type { Sheet } from './sheet';

/** Shades of a column that holds more than one edge. */
const SHADES = 6;

/** The line as measured: a hairline at mark, filled at space. Columns with more than one edge are shaded by their share of space. */
export function paintRibbon(sheet: Sheet, topY: number, heightPx: number): void {
  const { model, view, leftPx, rightPx } = sheet;
  const line = model.lines.data;
  if (line === undefined) return;
  const start = Math.max(0, view.window.startTicks);
  const end = Math.min(model.tape.endTicks, view.window.endTicks);
  if (end <= start) return;
  const first = countUpTo(line.ticks, start);
  const last = countUpTo(line.ticks, end);
  paintHairline(sheet, line, topY + heightPx / 2, start, end, first, last);
  if (last - first > rightPx - leftPx) paintColumns(sheet, line, topY, heightPx, start, end);
  else paintPieces(sheet, line, topY, heightPx, start, end, first, last);
  paintGaps(sheet, topY, heightPx);
}

function paintHairline(
  sheet: Sheet,
  line: TapeLine,
  y: number,
  start: number,
  end: number,
  first: number,
  last: number,
): void {
  const { pen, palette, scale } = sheet;
  const level = first === 0 ? line.initialLevel : line.levels[first - 1];
  if (first === last && level === UNKNOWN) return;
  pen.across(scale.xOf(start), scale.xOf(end), y, palette.ink);
}

function paintPieces(
  sheet: Sheet,
  line: TapeLine,
  topY: number,
  heightPx: number,
  start: number,
  end: number,
  first: number,
  last: number,
): void {
  const { ctx, palette, scale } = sheet;
  ctx.fillStyle = palette.ink;
  let level = first === 0 ? line.initialLevel : line.levels[first - 1];
  let from = start;
  for (let i = first; i <= last; i++) {
    const to = i < last ? line.ticks[i] : end;
    if (level === SPACE) {
      const x = scale.xOf(from);
      // One by one: rectangles are cheaper than a path of them.
      ctx.fillRect(x, topY, Math.max(0.75, scale.xOf(to) - x), heightPx);
    }
    from = to;
    if (i < last) level = line.levels[i];
  }
}

function paintColumns(
  sheet: Sheet,
  line: TapeLine,
  topY: number,
  heightPx: number,
  start: number,
  end: number,
): void {
  const { ctx, palette, scale, model, leftPx, rightPx } = sheet;
  const columns: number[][] = Array.from({ length: SHADES + 1 }, () => []);
  const left = Math.max(leftPx, Math.floor(scale.xOf(start)));
  const right = Math.min(rightPx, Math.ceil(scale.xOf(end)));
  let before = spaceUpTo(line, model.spaceBefore, scale.ticksAt(left));
  for (let x = left; x < right; x++) {
    const after = spaceUpTo(line, model.spaceBefore, Math.min(end, scale.ticksAt(x + 1)));
    const share = (after - before) / scale.ticksPerPx;
    before = after;
    if (share > 0) columns[Math.min(SHADES, Math.ceil(share * SHADES))].push(x);
  }
  ctx.save();
  ctx.fillStyle = palette.ink;
  columns.forEach((xs, shade) => {
    if (xs.length === 0) return;
    ctx.globalAlpha = 0.2 + (0.8 * shade) / SHADES;
    for (const x of xs) ctx.fillRect(x, topY, 1, heightPx);
  });
  ctx.restore();
}

/** What the record does not hold: hatched. */
function paintGaps(sheet: Sheet, topY: number, heightPx: number): void {
  const { pen, palette, scale, view, leftPx, rightPx } = sheet;
  const rects = sheet.model.tape.gaps
    .filter((gap) => gap.endTicks > view.window.startTicks && gap.startTicks < view.window.endTicks)
    .map((gap) => {
      const x = Math.max(leftPx, scale.xOf(gap.startTicks));
      return { x, y: topY, width: Math.min(rightPx, scale.xOf(gap.endTicks)) - x, height: heightPx };
    });
  for (const rect of rects) pen.fill(rect, palette.sheet);
  pen.hatch(rects, palette.ink3, 5);
}
