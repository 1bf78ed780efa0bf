import type { Palette } from './palette';
import { Pen } from './pen';

/** A finding on a tiny tape: `at` from 0 to 1. */
export interface MiniMark {
  readonly at: number;
  readonly verdict: 'violation' | 'inconclusive';
}

const MARK_PX = 3;

/** The whole tape of a row: density on a base line, marks below it. */
export function paintMiniTape(
  ctx: CanvasRenderingContext2D,
  columns: readonly number[],
  marks: readonly MiniMark[],
  palette: Palette,
  widthPx: number,
  heightPx: number,
): void {
  const pen = new Pen(ctx);
  ctx.clearRect(0, 0, widthPx, heightPx);
  const baseY = heightPx - MARK_PX - 3;
  paintColumns(pen, columns, palette, widthPx, baseY);
  pen.across(0, widthPx, baseY + 0.5, palette.ribbon);
  for (const verdict of ['inconclusive', 'violation'] as const) {
    for (const mark of marks) if (mark.verdict === verdict) paintMark(pen, mark, palette, widthPx, baseY + 2);
  }
}

/** Bars of 2 px with a gap of 1, each the mean of the columns under it. */
function paintColumns(
  pen: Pen,
  columns: readonly number[],
  palette: Palette,
  widthPx: number,
  baseY: number,
): void {
  const { ctx } = pen;
  if (columns.length === 0) return;
  const bars = Math.floor(widthPx / 3);
  ctx.fillStyle = palette.ribbon;
  ctx.beginPath();
  for (let bar = 0; bar < bars; bar++) {
    const first = Math.floor((bar * columns.length) / bars);
    const end = Math.max(first + 1, Math.floor(((bar + 1) * columns.length) / bars));
    let sum = 0;
    for (let i = first; i < end; i++) sum += columns[i];
    const height = Math.min(1, sum / (end - first)) * (baseY - 1);
    if (height > 0) ctx.rect(bar * 3, baseY - Math.max(1, height), 2, Math.max(1, height));
  }
  ctx.fill();
}

function paintMark(pen: Pen, mark: MiniMark, palette: Palette, widthPx: number, y: number): void {
  const x = Math.min(Math.max(mark.at * widthPx, MARK_PX + 1), widthPx - MARK_PX - 1);
  if (mark.verdict === 'inconclusive') {
    pen.fill({ x: x - 2, y: y - 2, width: 4, height: 4 }, palette.open);
    return;
  }
  const r = MARK_PX + 0.5;
  pen.polygon(
    [
      [x, y - r],
      [x + r, y],
      [x, y + r],
      [x - r, y],
    ],
    palette.violation,
  );
}
