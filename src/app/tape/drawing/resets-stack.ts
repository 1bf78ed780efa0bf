import { formatFigure, formatMs, shortPosition } from './figures';
import type { Palette } from './palette';
import { Pen } from './pen';
import type { InkedText } from './pen';
import { isRibbon, piecesOf } from './control-ribbons';
import { roundStep, rulerSteps } from './ruler-steps';
import { inkOf } from './sheet';
import type { TapeModel } from './tape-model';
import { TimeScale } from './time-scale';

/** All resets one below the other, aligned at RTS ON. */
export interface ResetStackLayout {
  readonly model: TapeModel;
  readonly order: 'time' | 'latency';
  readonly widthPx: number;
  readonly gutterPx: number;
  /** Height of all rows with the histogram on top; the canvas may scroll. */
  readonly heightPx: number;
  /** Indexes of the resets from top to bottom. */
  readonly rows: readonly number[];
  /** Ticks since RTS ON. */
  readonly scale: TimeScale;
  /** Where the column of the latencies begins. */
  readonly figuresX: number;
  /** Replies by latency. */
  readonly bins: readonly {
    readonly startTicks: number;
    readonly endTicks: number;
    readonly count: number;
  }[];
}

export const STACK_ROW_PX = 14;
export const STACK_TOP_PX = 48;
const RULER_PX = 22;
const FIGURES_PX = 96;
const BEFORE_SHARE = 0.04;
const LEAST_SPAN_S = 0.03;
const RIBBON_PX = 8;

/** Height before the first row: histogram and ruler. */
export const STACK_HEAD_PX = STACK_TOP_PX + RULER_PX;

/** @param order by time, or by latency with the slowest first and the unanswered on top */
export function layOutResetStack(
  model: TapeModel,
  order: 'time' | 'latency',
  widthPx: number,
  gutterPx: number,
): ResetStackLayout {
  const { resets, tickS } = model.tape;
  const rows = [...resets.keys()];
  const latency = (r: number): number => model.replies[r].latencyTicks ?? Infinity;
  if (order === 'latency')
    rows.sort((a, b) => (latency(b) === latency(a) ? a - b : latency(b) > latency(a) ? 1 : -1));
  const longest = Math.max(
    LEAST_SPAN_S / tickS,
    1.2 * ((model.limits.replyLimitS ?? 0) / tickS),
    ...model.replies.map((reply) => (reply.latencyTicks ?? 0) + 2.2 * model.elements * model.bitTicks),
  );
  const figuresX = widthPx - FIGURES_PX;
  const window = { startTicks: -BEFORE_SHARE * longest, endTicks: longest };
  return {
    model,
    order,
    widthPx,
    gutterPx,
    heightPx: STACK_HEAD_PX + rows.length * STACK_ROW_PX,
    rows,
    scale: new TimeScale(window, Math.max(1, figuresX - gutterPx), gutterPx),
    figuresX,
    bins: countByLatency(model),
  };
}

/** Bins of a round width, at most 24 over the latencies there are. */
function countByLatency(model: TapeModel): { startTicks: number; endTicks: number; count: number }[] {
  const { tickS } = model.tape;
  const latencies = model.replies.map((reply) => reply.latencyTicks).filter((ticks) => ticks !== null);
  if (latencies.length === 0) return [];
  const [least, most] = [Math.min(...latencies), Math.max(...latencies)];
  const widthTicks = roundStep(Math.max((most - least) * tickS, 2e-4) / 24) / tickS;
  const first = Math.floor(least / widthTicks);
  const counts = new Array<number>(Math.floor(most / widthTicks) - first + 1).fill(0);
  for (const ticks of latencies) counts[Math.floor(ticks / widthTicks) - first] += 1;
  return counts.map((count, i) => ({
    startTicks: (first + i) * widthTicks,
    endTicks: (first + i + 1) * widthTicks,
    count,
  }));
}

/** Paints the stack; `hoverRow` and `selected` are resets, null for none. */
export function paintResetStack(
  ctx: CanvasRenderingContext2D,
  layout: ResetStackLayout,
  palette: Palette,
  selected: number | null = null,
): void {
  const pen = new Pen(ctx);
  const { widthPx, heightPx, gutterPx } = layout;
  pen.fill({ x: 0, y: 0, width: widthPx, height: heightPx }, palette.sheet);
  pen.fill({ x: 0, y: 0, width: gutterPx, height: heightPx }, palette.surface);
  paintGrid(pen, layout, palette);
  layout.rows.forEach((reset, row) => paintRow(pen, layout, palette, reset, row, reset === selected));
  paintHistogram(pen, layout, palette);
  paintLimit(pen, layout, palette);
  pen.down(gutterPx - 0.5, 0, heightPx, palette.ink);
}

function paintGrid(pen: Pen, layout: ResetStackLayout, palette: Palette): void {
  const { scale, heightPx, gutterPx, figuresX, model } = layout;
  const { tickS } = model.tape;
  const { majorS, minorS } = rulerSteps(scale.ticksPerPx * tickS);
  const baseY = STACK_HEAD_PX;
  const last = Math.floor((scale.window.endTicks * tickS) / minorS);
  for (let i = Math.ceil((scale.window.startTicks * tickS) / minorS); i <= last; i++) {
    const x = scale.xOf((i * minorS) / tickS);
    const isMajor = i % 10 === 0;
    pen.down(x, baseY, heightPx, isMajor ? palette.grid : palette.gridMinor);
    pen.down(x, baseY - (isMajor ? 9 : i % 5 === 0 ? 6 : 3.5), baseY, palette.ink);
    if (!isMajor) continue;
    const ms = (i / 10) * majorS * 1e3;
    pen.text(`${formatFigure(ms, majorS < 0.001 ? 1 : 0)} ms`, x, baseY - 12, {
      face: 'mono',
      sizePx: 11,
      weight: 400,
      colour: palette.ink,
      align: 'center',
    });
  }
  pen.across(gutterPx, figuresX + FIGURES_PX, baseY - 0.5, palette.ink);
  pen.down(scale.xOf(0), baseY, heightPx, palette.ribbon);
  pen.text('Resets', gutterPx >= 96 ? 20 : 14, STACK_TOP_PX / 2 + 4, {
    face: 'sans',
    sizePx: 12,
    weight: 500,
    colour: palette.ink,
  });
}

function paintRow(
  pen: Pen,
  layout: ResetStackLayout,
  palette: Palette,
  reset: number,
  row: number,
  isSelected: boolean,
): void {
  const { model, scale, gutterPx, figuresX, widthPx } = layout;
  const { tape } = model;
  const top = STACK_HEAD_PX + row * STACK_ROW_PX;
  const middle = top + STACK_ROW_PX / 2;
  if (isSelected) {
    pen.fill({ x: 0, y: top, width: widthPx, height: STACK_ROW_PX }, palette.primaryContainer);
    pen.fill({ x: 0, y: top, width: 3, height: STACK_ROW_PX }, palette.primary);
  }
  const label: InkedText = { face: 'mono', sizePx: 11, weight: 400, colour: palette.ink2, align: 'right' };
  pen.text(shortPosition(tape, tape.resets[reset].onTicks), gutterPx - 8, middle + 4, label);
  paintPieces(pen, layout, palette, reset, middle);
  const reply = model.replies[reset];
  const ink = inkOf(palette, reply.verdict);
  if (reply.verdict !== null) pen.glyph(reply.verdict, figuresX + 14, middle, 11, ink, palette.sheet);
  const text = reply.latencyTicks === null ? 'no reply' : formatMs(reply.latencyTicks * tape.tickS);
  pen.text(text, widthPx - 12, middle + 4, {
    ...label,
    face: reply.latencyTicks === null ? 'sans' : 'mono',
    weight: reply.verdict === 'violation' ? 600 : 400,
    colour: reply.verdict === 'violation' ? ink : palette.ink,
  });
  if (reply.latencyTicks === null) return;
  pen.down(scale.xOf(reply.latencyTicks), top + 1, top + STACK_ROW_PX - 1, ink, 1.5);
}

/** The data line after RTS ON, as measured. */
function paintPieces(pen: Pen, layout: ResetStackLayout, palette: Palette, reset: number, y: number): void {
  const { model, scale, gutterPx, figuresX } = layout;
  const { data } = model.lines;
  const { ctx } = pen;
  if (data === undefined) return;
  const { onTicks } = model.tape.resets[reset];
  const start = Math.max(0, onTicks + scale.window.startTicks);
  const end = Math.min(model.tape.endTicks, onTicks + scale.window.endTicks);
  pen.across(
    Math.max(gutterPx, scale.xOf(start - onTicks)),
    Math.min(figuresX, scale.xOf(end - onTicks)),
    y,
    palette.ink3,
  );
  ctx.fillStyle = palette.ink;
  ctx.beginPath();
  for (const piece of piecesOf(data, start, end, 400)) {
    if (!isRibbon(piece.level, true)) continue;
    const x = scale.xOf(piece.startTicks - onTicks);
    ctx.rect(x, y - RIBBON_PX / 2, Math.max(0.75, scale.xOf(piece.endTicks - onTicks) - x), RIBBON_PX);
  }
  ctx.fill();
}

function paintHistogram(pen: Pen, layout: ResetStackLayout, palette: Palette): void {
  const { bins, scale, gutterPx, widthPx, model } = layout;
  const most = bins.reduce((max, bin) => Math.max(max, bin.count), 1);
  const limit = model.limits.replyLimitS === null ? Infinity : model.limits.replyLimitS / model.tape.tickS;
  for (const bin of bins) {
    if (bin.count === 0) continue;
    const x = scale.xOf(bin.startTicks);
    const width = Math.max(2, scale.xOf(bin.endTicks) - x - 1);
    const height = Math.max(2, (bin.count / most) * (STACK_TOP_PX - 14));
    const isOver = bin.startTicks >= limit;
    pen.fill({ x, y: STACK_TOP_PX - height, width, height }, isOver ? palette.violation : palette.ribbon);
  }
  pen.across(gutterPx, widthPx, STACK_TOP_PX - 0.5, palette.rule);
}

function paintLimit(pen: Pen, layout: ResetStackLayout, palette: Palette): void {
  const { model, scale, heightPx } = layout;
  const { replyLimitS } = model.limits;
  if (replyLimitS === null) return;
  const x = scale.xOf(replyLimitS / model.tape.tickS);
  pen.down(x, 2, STACK_TOP_PX, palette.ink, 2);
  pen.down(x, STACK_HEAD_PX, heightPx, palette.ink, 2);
  const style: InkedText = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink2 };
  pen.label(`limit ${formatFigure(replyLimitS * 1e3, 2)}`, x + 6, 13, style, palette.sheet, 2);
}

/** The reset whose row lies at a height of the stack; null above and below the rows. */
export function hitResetStack(layout: ResetStackLayout, yPx: number): number | null {
  const row = Math.floor((yPx - STACK_HEAD_PX) / STACK_ROW_PX);
  return row >= 0 && row < layout.rows.length ? layout.rows[row] : null;
}
