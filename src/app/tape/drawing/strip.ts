import { usedUpTo } from './prefix-sums';
import type { Palette } from './palette';
import { Pen } from './pen';
import type { TapeModel } from './tape-model';
import type { TapeWindow } from './time-scale';
import { TimeScale } from './time-scale';

/** The strip of the whole tape with its fan, in CSS px of its canvas. A gutter of 0 leaves the name to the page. */
export interface StripView {
  readonly window: TapeWindow;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly gutterPx: number;
}

/** Heights of strip and fan. Source: design 6. */
export const STRIP_PX = 32;
export const FAN_PX = 14;

const BASE_PX = 26;
const COLUMN_PX = { pitch: 3, bar: 2 };
const FULL_PX = 18;
const LEAST_HANDLE_PX = 12;
const GRIP_PX = { width: 4, height: 16, reach: 10 };

/** Paints the strip; the marks of resets and findings stand over the density. */
export function paintStrip(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: StripView,
  palette: Palette,
): void {
  const pen = new Pen(ctx);
  ctx.clearRect(0, 0, view.widthPx, view.heightPx);
  pen.fill(
    { x: view.gutterPx, y: 0, width: view.widthPx - view.gutterPx, height: view.heightPx },
    palette.sheet,
  );
  paintDensity(pen, model, view, palette);
  paintFan(pen, model, view, palette);
  paintHandle(pen, model, view, palette);
  paintResets(pen, model, view, palette);
  paintMarks(pen, model, view, palette);
  paintGutter(pen, view, palette);
}

function wholeScale(model: TapeModel, view: StripView): TimeScale {
  const window = { startTicks: 0, endTicks: Math.max(1, model.tape.endTicks) };
  return new TimeScale(window, Math.max(1, view.widthPx - view.gutterPx), view.gutterPx);
}

function paintDensity(pen: Pen, model: TapeModel, view: StripView, palette: Palette): void {
  const { ctx } = pen;
  const { characters } = model.tape;
  const scale = wholeScale(model, view);
  const columnTicks = COLUMN_PX.pitch * scale.ticksPerPx;
  let before = 0;
  ctx.save();
  ctx.globalAlpha = 0.75;
  ctx.fillStyle = palette.ribbon;
  for (let x = view.gutterPx, end = columnTicks; x < view.widthPx; x += COLUMN_PX.pitch, end += columnTicks) {
    const after = usedUpTo(characters, model.usedBefore, end);
    const height = ((after - before) / columnTicks) * FULL_PX;
    before = after;
    if (height > 0) ctx.fillRect(x, BASE_PX - Math.max(1, height), COLUMN_PX.bar, Math.max(1, height));
  }
  ctx.restore();
  pen.across(view.gutterPx, view.widthPx, BASE_PX + 0.5, palette.ribbon);
}

/** Left and right edge of the handle, px; never narrower than 12 px. */
export function handleOf(model: TapeModel, view: StripView): { readonly x0: number; readonly x1: number } {
  const scale = wholeScale(model, view);
  let x0 = scale.xOf(view.window.startTicks);
  let x1 = scale.xOf(view.window.endTicks);
  if (x1 - x0 < LEAST_HANDLE_PX) {
    const middle = (x0 + x1) / 2;
    x0 = Math.min(Math.max(middle - LEAST_HANDLE_PX / 2, view.gutterPx), view.widthPx - LEAST_HANDLE_PX);
    x1 = x0 + LEAST_HANDLE_PX;
  }
  return { x0, x1 };
}

function paintHandle(pen: Pen, model: TapeModel, view: StripView, palette: Palette): void {
  const { ctx } = pen;
  const { x0, x1 } = handleOf(model, view);
  const box = { x: x0, y: 0, width: x1 - x0, height: STRIP_PX };
  ctx.save();
  ctx.globalAlpha = 0.12;
  pen.fill(box, palette.primary);
  ctx.restore();
  pen.frame(box, palette.primary, 2);
  const y = (STRIP_PX - GRIP_PX.height) / 2;
  for (const x of [x0 - GRIP_PX.width, x1]) {
    pen.fill({ x: pen.snap(x), y, width: GRIP_PX.width, height: GRIP_PX.height }, palette.primary);
  }
}

/** From the handle to the edges of the tape below: what is in view of the whole. */
function paintFan(pen: Pen, model: TapeModel, view: StripView, palette: Palette): void {
  const { ctx } = pen;
  const { x0, x1 } = handleOf(model, view);
  const top = STRIP_PX;
  const bottom = Math.min(view.heightPx, STRIP_PX + FAN_PX);
  ctx.save();
  ctx.globalAlpha = 0.07;
  pen.polygon(
    [
      [x0, top],
      [x1, top],
      [view.widthPx, bottom],
      [view.gutterPx, bottom],
    ],
    palette.primary,
  );
  ctx.globalAlpha = 0.55;
  pen.line(x0, top, view.gutterPx, bottom, palette.primary, 1);
  pen.line(x1, top, view.widthPx, bottom, palette.primary, 1);
  ctx.restore();
}

/** A post with a short arm to the left for each reset. */
function paintResets(pen: Pen, model: TapeModel, view: StripView, palette: Palette): void {
  const scale = wholeScale(model, view);
  let takenTo = -Infinity;
  for (const reset of model.tape.resets) {
    const x = scale.xOf(reset.onTicks);
    if (x < takenTo) continue;
    takenTo = x + 3;
    pen.down(x, 4, BASE_PX + 3, palette.ink, 1.2);
    pen.across(x - 4, x + 0.5, 4.5, palette.ink, 1.2);
  }
}

/** Violations and inconclusive findings on the base line; violations last, so that none is covered. */
function paintMarks(pen: Pen, model: TapeModel, view: StripView, palette: Palette): void {
  const { ctx } = pen;
  const y = BASE_PX + 3;
  ctx.fillStyle = palette.open;
  ctx.beginPath();
  for (const x of marksOf(model, view, 'inconclusive')) ctx.rect(x - 2.5, y - 2.5, 5, 5);
  ctx.fill();
  ctx.fillStyle = palette.violation;
  ctx.beginPath();
  for (const x of marksOf(model, view, 'violation')) {
    ctx.moveTo(x, y - 4.5);
    ctx.lineTo(x + 4.5, y);
    ctx.lineTo(x, y + 4.5);
    ctx.lineTo(x - 4.5, y);
    ctx.closePath();
  }
  ctx.fill();
}

/** Places of the marks of one verdict, at least 2 px apart. */
function marksOf(model: TapeModel, view: StripView, verdict: 'violation' | 'inconclusive'): number[] {
  const scale = wholeScale(model, view);
  const places: number[] = [];
  let takenTo = -Infinity;
  for (let i = 0; i < model.findingOrder.length; i++) {
    if (model.findings[model.findingOrder[i]].verdict !== verdict) continue;
    const x = Math.min(Math.max(scale.xOf(model.findingTicks[i]), view.gutterPx + 4), view.widthPx - 4);
    if (x < takenTo) continue;
    takenTo = x + 2;
    places.push(x);
  }
  return places;
}

function paintGutter(pen: Pen, view: StripView, palette: Palette): void {
  if (view.gutterPx <= 0) return;
  const isNarrow = view.gutterPx < 80;
  pen.fill({ x: 0, y: 0, width: view.gutterPx, height: view.heightPx }, palette.surface);
  pen.text(
    isNarrow ? 'Whole' : 'Whole tape',
    isNarrow ? 8 : view.gutterPx >= 96 ? 20 : 14,
    STRIP_PX / 2 + 4,
    {
      face: 'sans',
      sizePx: isNarrow ? 11 : 12,
      weight: 500,
      colour: palette.ink,
    },
  );
  pen.down(view.gutterPx - 0.5, 0, view.heightPx, palette.ink);
}

export type StripHit = 'left-grip' | 'right-grip' | 'handle' | 'outside';

/** What of the strip lies at x: the grips reach farther than they are drawn. */
export function hitStrip(model: TapeModel, view: StripView, xPx: number): StripHit {
  const { x0, x1 } = handleOf(model, view);
  const inside = Math.min(3, (x1 - x0) / 4);
  if (xPx >= x0 - GRIP_PX.reach && xPx <= x0 + inside) return 'left-grip';
  if (xPx >= x1 - inside && xPx <= x1 + GRIP_PX.reach) return 'right-grip';
  return xPx > x0 && xPx < x1 ? 'handle' : 'outside';
}

/** The tick of the whole tape at x of the strip. */
export function stripTicksAt(model: TapeModel, view: StripView, xPx: number): number {
  return Math.min(Math.max(wholeScale(model, view).ticksAt(xPx), 0), model.tape.endTicks);
}
