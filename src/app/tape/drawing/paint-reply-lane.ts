import { formatFigure, formatMs } from './figures';
import type { LaneLayout } from './lanes';
import type { Reply } from './replies';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { bottomOf, inkOf, laneOf, middleOf } from './sheet';
import { RIBBON_TOP_PX } from './paint-data-lane';
import { textWidth } from './text-measure';
import type { InkedText } from './pen';

/** The dimension line above the lane's lower edge; its limit tick. */
const LINE_ABOVE_PX = 15;
const TICK_PX = { up: 22, down: 7 };
const GLYPH_PX = 14;

/** The Reply lane: from RTS ON to the first start element as a dimension line against the limit. */
export function paintReplyLane(sheet: Sheet): void {
  const lane = laneOf(sheet, 'reply');
  if (lane === undefined) return;
  const isClose = sheet.pxPerBit >= FROM.replyDimension;
  let takenTo = -Infinity;
  for (const reply of sheet.model.replies) {
    const end = reply.replyTicks ?? reply.onTicks;
    if (end < sheet.view.window.startTicks || reply.onTicks > sheet.view.window.endTicks) continue;
    if (isClose && reply.replyTicks !== null) paintDimension(sheet, lane, reply, reply.replyTicks);
    else takenTo = paintFigure(sheet, lane, reply, takenTo);
  }
}

/** Glyph and figure, left out where the one before is in the way. */
function paintFigure(sheet: Sheet, lane: LaneLayout, reply: Reply, takenTo: number): number {
  const { pen, palette, scale, model } = sheet;
  const x = Math.max(scale.xOf(reply.replyTicks ?? reply.onTicks), sheet.leftPx + 8);
  if (x - 8 < takenTo) return takenTo;
  const colour = inkOf(palette, reply.verdict);
  const y = middleOf(lane);
  pen.glyph(reply.verdict ?? 'not-shown', x, y, 12, colour, palette.sheet);
  const text = reply.latencyTicks === null ? 'no reply' : formatMs(reply.latencyTicks * model.tape.tickS);
  const style: InkedText = {
    face: reply.latencyTicks === null ? 'sans' : 'mono',
    sizePx: 11,
    weight: reply.verdict === 'violation' ? 500 : 400,
    colour: reply.verdict === 'violation' || reply.verdict === 'inconclusive' ? colour : palette.ink,
  };
  return x + 10 + pen.label(text, x + 10, y + 4, style, palette.sheet, 1) + 10;
}

function paintDimension(sheet: Sheet, lane: LaneLayout, reply: Reply, replyTicks: number): void {
  const { palette, scale, model, leftPx, rightPx } = sheet;
  const { tickS } = model.tape;
  const y = bottomOf(lane) - LINE_ABOVE_PX;
  const limitS = model.limits.replyLimitS;
  const dimension: Dimension = {
    y,
    on: scale.xOf(reply.onTicks),
    end: scale.xOf(replyTicks),
    limit: limitS === null ? null : scale.xOf(reply.onTicks + limitS / tickS),
    latencyS: (replyTicks - reply.onTicks) * tickS,
    limitS,
    verdict: reply.verdict,
    colour: reply.verdict === 'violation' ? palette.violation : palette.ink,
    leftPx,
    rightPx,
  };
  paintExtensions(sheet, dimension);
  paintMeasure(sheet, dimension);
  if (dimension.limit !== null) paintLimit(sheet, dimension, dimension.limit);
  paintVerdict(sheet, dimension);
}

interface Dimension {
  readonly y: number;
  readonly on: number;
  readonly end: number;
  readonly limit: number | null;
  readonly latencyS: number;
  readonly limitS: number | null;
  readonly verdict: Reply['verdict'];
  readonly colour: string;
  readonly leftPx: number;
  readonly rightPx: number;
}

/** From the post of RTS down to the line, and from the line down to the ribbon of the first character. */
function paintExtensions(sheet: Sheet, d: Dimension): void {
  const { pen, palette } = sheet;
  const rts = laneOf(sheet, 'rts');
  const data = laneOf(sheet, 'data');
  const top = rts === undefined ? d.y - 7 : Math.min(middleOf(rts) + 8, d.y - 7);
  pen.down(d.on + 0.5, top, d.y + 6, palette.ribbon);
  const bottom = data === undefined || data.topPx < d.y ? d.y + 7 : data.topPx + RIBBON_TOP_PX - 4;
  pen.down(d.end, d.y - 7, bottom, d.verdict === 'violation' ? palette.violation : palette.ribbon);
}

function paintMeasure(sheet: Sheet, d: Dimension): void {
  const { pen, palette } = sheet;
  const { from, to, end } = measureOf(d);
  if (to > from) pen.across(from, to, d.y, palette.ink);
  if (end - d.on > 20) {
    pen.arrowhead(d.on, d.y, Math.PI, palette.ink);
    if (end === d.end) pen.arrowhead(d.end, d.y, 0, palette.ink);
  }
  const style = figureInside(d);
  if (style === null) return;
  const text = formatMs(d.latencyS);
  pen.label(
    text,
    (from + to) / 2,
    d.y + style.sizePx * 0.36,
    { ...style, align: 'center' },
    palette.sheet,
    3,
  );
}

/** The thin part of the dimension line, as far as it is in view; `end` where it ends on the tape. */
function measureOf(d: Dimension): { from: number; to: number; end: number } {
  const end = d.verdict === 'violation' && d.limit !== null ? Math.min(d.limit, d.end) : d.end;
  return { from: Math.max(d.on, d.leftPx), to: Math.min(end, d.rightPx), end };
}

/** The figure's type, smaller where the gap is narrow; null where it does not fit at all. */
function figureInside(d: Dimension): InkedText | null {
  const { from, to } = measureOf(d);
  for (const sizePx of [14, 12]) {
    const style: InkedText = { face: 'mono', sizePx, weight: 600, colour: d.colour };
    if (to - from >= textWidth(formatMs(d.latencyS), style) + 16) return style;
  }
  return null;
}

function paintLimit(sheet: Sheet, d: Dimension, limit: number): void {
  const { pen, palette } = sheet;
  const isOver = d.verdict === 'violation' && d.end > limit;
  if (isOver) {
    pen.across(limit, Math.max(limit, d.end - 5), d.y, palette.violation, 3);
    pen.arrowhead(d.end, d.y, 0, palette.violation, 7, 3);
  }
  pen.down(limit, d.y - TICK_PX.up, d.y + TICK_PX.down, palette.ink, 2);
  const text = `limit ${formatFigure((d.limitS ?? 0) * 1e3, 2)}`;
  const style: InkedText = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink2, align: 'right' };
  const left = limit - 7 - textWidth(text, style);
  if (left > d.leftPx && left > d.on + 4) pen.label(text, limit - 7, d.y - 13, style, palette.sheet);
  else pen.label(text, limit + 7, d.y - 13, { ...style, align: 'left' }, palette.sheet);
}

/** The glyph beyond the dimension; by how much the limit is exceeded, and the figure itself where it had no room. */
function paintVerdict(sheet: Sheet, d: Dimension): void {
  const { pen, palette } = sheet;
  const isFigureInside = figureInside(d) !== null;
  const isOver = d.verdict === 'violation' && d.limitS !== null;
  const beyond = isOver ? d.end : Math.max(d.end, d.limit ?? d.end);
  let x = beyond + 15;
  if (d.verdict !== null) {
    pen.glyph(d.verdict, x, d.y, GLYPH_PX, inkOf(palette, d.verdict), palette.sheet);
    x += 14;
  }
  if (!isFigureInside) {
    const style: InkedText = { face: 'mono', sizePx: 12, weight: 600, colour: d.colour };
    x += pen.label(formatMs(d.latencyS), x, d.y + 4, style, palette.sheet) + 10;
  }
  if (!isOver) return;
  const text = `${formatFigure((d.latencyS - (d.limitS ?? 0)) * 1e3, 2)} ms over`;
  pen.label(text, x, d.y + 4, { face: 'sans', sizePx: 11, weight: 500, colour: d.colour }, palette.sheet);
}
