import { countBefore, countUpTo } from '#shared/time/sorted-search';
import type { Palette } from './palette';
import { Pen } from './pen';
import type { InkedText } from './pen';
import { roundStep } from './ruler-steps';
import type { TapeModel } from './tape-model';
import { textWidth } from './text-measure';
import type { TapeView } from './view';

/** The movement on paper: where the pointer would be after each packet. y grows downward, as the device's does. */
export interface MotionLayout {
  readonly model: TapeModel;
  readonly widthPx: number;
  readonly heightPx: number;
  /** Place before the first packet and after each one, px; one more than there are packets. */
  readonly x: Float32Array;
  readonly y: Float32Array;
  readonly pxPerCount: number;
  /** Counts between two major lines of the grid. */
  readonly gridCounts: number;
  /** Which lower corner the scale bar stands in. */
  readonly barCorner: 'left' | 'right';
}

/** What the sheet needs of the tape's view. */
export type MotionView = Pick<TapeView, 'window' | 'selection'> & {
  /** The packet under the pointer, here or on the tape. */
  readonly hoverPacket?: number | null;
};

const INSET_PX = 26;
const GRID_PX = 80;
const PATH_PX = 1.2;
const HELD_PX = 7;
const HELD_SHARE = 0.13;
const WINDOW_PX = 2.4;
const RING_UNDER_PX = 8;
const VIOLATION_PX = 2.2;
const REACH_PX = 10;

export function layOutMotion(model: TapeModel, widthPx: number, heightPx: number): MotionLayout {
  const { packets } = model.tape;
  const { dx, dy } = model.motion;
  const count = packets.count + 1;
  let [left, right, top, bottom] = [0, 0, 0, 0];
  for (let p = 1; p < count; p++) {
    left = Math.min(left, dx[p]);
    right = Math.max(right, dx[p]);
    top = Math.min(top, dy[p]);
    bottom = Math.max(bottom, dy[p]);
  }
  const room = (size: number): number => Math.max(20, size - 2 * INSET_PX);
  const pxPerCount = Math.min(
    room(widthPx) / Math.max(1, right - left),
    room(heightPx) / Math.max(1, bottom - top),
    4,
  );
  const originX = widthPx / 2 - ((left + right) / 2) * pxPerCount;
  const originY = heightPx / 2 - ((top + bottom) / 2) * pxPerCount;
  const x = new Float32Array(count);
  const y = new Float32Array(count);
  for (let p = 0; p < count; p++) {
    x[p] = originX + dx[p] * pxPerCount;
    y[p] = originY + dy[p] * pxPerCount;
  }
  const barCorner = emptierCorner(x, y, widthPx, heightPx);
  return {
    model,
    widthPx,
    heightPx,
    x,
    y,
    pxPerCount,
    gridCounts: roundStep(GRID_PX / pxPerCount),
    barCorner,
  };
}

/** The lower corner with fewer points of the path in it; the left one when even. */
function emptierCorner(
  x: Float32Array,
  y: Float32Array,
  widthPx: number,
  heightPx: number,
): 'left' | 'right' {
  let left = 0;
  let right = 0;
  for (let p = 0; p < x.length; p++) {
    if (y[p] < heightPx - 60) continue;
    if (x[p] < widthPx * 0.45) left += 1;
    else if (x[p] > widthPx * 0.55) right += 1;
  }
  return right < left ? 'right' : 'left';
}

export function paintMotion(
  ctx: CanvasRenderingContext2D,
  layout: MotionLayout,
  view: MotionView,
  palette: Palette,
): void {
  const pen = new Pen(ctx);
  pen.fill({ x: 0, y: 0, width: layout.widthPx, height: layout.heightPx }, palette.sheet);
  paintGrid(pen, layout, palette);
  if (layout.x.length < 2) {
    paintEmpty(pen, layout, palette);
    return;
  }
  paintHeld(pen, layout, palette);
  stroke(pen, layout, 0, layout.x.length - 1, palette.ink2, PATH_PX);
  paintViolation(pen, layout, view, palette);
  paintWindow(pen, layout, view, palette);
  paintEnds(pen, layout, palette);
  paintHovered(pen, layout, view, palette);
  paintBar(pen, layout, palette);
}

function paintGrid(pen: Pen, layout: MotionLayout, palette: Palette): void {
  const [originX, originY] = [layout.x[0], layout.y[0]];
  for (const [counts, colour] of [
    [layout.gridCounts / 5, palette.gridMinor],
    [layout.gridCounts, palette.grid],
  ] as const) {
    const step = counts * layout.pxPerCount;
    for (let x = originX % step; x < layout.widthPx; x += step) pen.down(x, 0, layout.heightPx, colour);
    for (let y = originY % step; y < layout.heightPx; y += step) pen.across(0, layout.widthPx, y, colour);
  }
}

function paintEmpty(pen: Pen, layout: MotionLayout, palette: Palette): void {
  const style: InkedText = { face: 'sans', sizePx: 12, weight: 400, colour: palette.ink2, align: 'center' };
  pen.label('No movement', layout.widthPx / 2, layout.heightPx / 2 + 4, style, palette.sheet, 6);
}

/** Strokes the path between two places. Steps under a third of a px are joined. */
function stroke(
  pen: Pen,
  layout: MotionLayout,
  first: number,
  last: number,
  colour: string,
  widthPx: number,
): void {
  const { ctx } = pen;
  const { x, y } = layout;
  ctx.save();
  ctx.strokeStyle = colour;
  ctx.lineWidth = widthPx;
  ctx.lineJoin = 'round';
  ctx.lineCap = 'round';
  ctx.beginPath();
  ctx.moveTo(x[first], y[first]);
  let [atX, atY] = [x[first], y[first]];
  for (let p = first + 1; p <= last; p++) {
    if (p < last && Math.abs(x[p] - atX) + Math.abs(y[p] - atY) < 0.33) continue;
    [atX, atY] = [x[p], y[p]];
    ctx.lineTo(atX, atY);
  }
  ctx.stroke();
  ctx.restore();
}

/** A soft band along the path while any button is held. */
function paintHeld(pen: Pen, layout: MotionLayout, palette: Palette): void {
  const { ctx } = pen;
  const { buttons, count } = layout.model.tape.packets;
  ctx.save();
  ctx.globalAlpha = HELD_SHARE;
  for (let p = 0; p < count; p++) {
    if (buttons[p] === 0) continue;
    const first = p;
    while (p + 1 < count && buttons[p + 1] !== 0) p++;
    stroke(pen, layout, first, p + 1, palette.ink, HELD_PX);
  }
  ctx.restore();
}

/** Places before the first and after the last packet that begins in a span. */
function placesIn(
  layout: MotionLayout,
  startTicks: number,
  endTicks: number,
): { first: number; last: number } {
  const starts = layout.model.packetStarts;
  return { first: countBefore(starts, startTicks), last: countUpTo(starts, endTicks) };
}

function paintWindow(pen: Pen, layout: MotionLayout, view: MotionView, palette: Palette): void {
  const { first, last } = placesIn(layout, view.window.startTicks, view.window.endTicks);
  if (first === 0 && last === layout.x.length - 1) return;
  let length = 0;
  for (let p = first + 1; p <= last && length < RING_UNDER_PX; p++) {
    length += Math.hypot(layout.x[p] - layout.x[p - 1], layout.y[p] - layout.y[p - 1]);
  }
  if (length >= RING_UNDER_PX) stroke(pen, layout, first, last, palette.primary, WINDOW_PX);
  else pen.ring(layout.x[last], layout.y[last], 11, palette.primary, 1.6);
}

/** The span of the selected violation with a dot for each packet. */
function paintViolation(pen: Pen, layout: MotionLayout, view: MotionView, palette: Palette): void {
  if (view.selection?.kind !== 'finding') return;
  const finding = layout.model.findings[view.selection.index];
  if (finding?.verdict !== 'violation') return;
  const { first, last } = placesIn(layout, finding.startTicks, finding.endTicks);
  if (last <= first) return;
  stroke(pen, layout, first, last, palette.violation, VIOLATION_PX);
  const { ctx } = pen;
  ctx.fillStyle = palette.violation;
  ctx.beginPath();
  for (let p = first; p <= last; p++) {
    ctx.moveTo(layout.x[p] + 2.4, layout.y[p]);
    ctx.arc(layout.x[p], layout.y[p], 2.4, 0, 2 * Math.PI);
  }
  ctx.fill();
}

function paintEnds(pen: Pen, layout: MotionLayout, palette: Palette): void {
  const last = layout.x.length - 1;
  const style: InkedText = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink2 };
  const [startX, startY, endX, endY] = [layout.x[0], layout.y[0], layout.x[last], layout.y[last]];
  const areApart = Math.hypot(startX - endX, startY - endY) > 24;
  pen.disc(startX, startY, 4.5, palette.sheet);
  pen.ring(startX, startY, 4, palette.ink, 1.6);
  pen.label('start', within(startX + 8, 'start', layout, style), startY + 14, style, palette.sheet, 2);
  pen.fill({ x: endX - 3.5, y: endY - 3.5, width: 7, height: 7 }, palette.ink);
  if (areApart) pen.label('end', within(endX + 8, 'end', layout, style), endY + 4, style, palette.sheet, 2);
}

function within(x: number, text: string, layout: MotionLayout, style: InkedText): number {
  return Math.min(x, layout.widthPx - textWidth(text, style) - 4);
}

function paintHovered(pen: Pen, layout: MotionLayout, view: MotionView, palette: Palette): void {
  const selected = view.selection?.kind === 'packet' ? view.selection.index : null;
  for (const packet of [selected, view.hoverPacket ?? null]) {
    if (packet === null || packet < 0 || packet + 1 >= layout.x.length) continue;
    pen.disc(layout.x[packet + 1], layout.y[packet + 1], 3, palette.primary);
    pen.ring(layout.x[packet + 1], layout.y[packet + 1], 6, palette.primary, 1.6);
  }
}

/** A bar of one major of the grid with its counts. */
function paintBar(pen: Pen, layout: MotionLayout, palette: Palette): void {
  const width = layout.gridCounts * layout.pxPerCount;
  const x = layout.barCorner === 'left' ? 14 : layout.widthPx - 14 - width;
  const y = layout.heightPx - 14;
  pen.fill({ x: x - 6, y: y - 20, width: width + 12, height: 26 }, palette.sheet);
  pen.across(x, x + width, y, palette.ink, 1);
  pen.down(x + 0.5, y - 5, y, palette.ink);
  pen.down(x + width - 0.5, y - 5, y, palette.ink);
  const style: InkedText = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink2, align: 'center' };
  pen.text(`${layout.gridCounts} counts`, x + width / 2, y - 7, style);
}

/** The packet whose place is nearest to a point, within reach; null where there is none. */
export function hitMotion(layout: MotionLayout, xPx: number, yPx: number): number | null {
  let best: number | null = null;
  let least = REACH_PX * REACH_PX;
  for (let p = 1; p < layout.x.length; p++) {
    const [dx, dy] = [layout.x[p] - xPx, layout.y[p] - yPx];
    const away = dx * dx + dy * dy;
    if (away < least) {
      least = away;
      best = p - 1;
    }
  }
  return best;
}
