import { charactersIn } from './characters-in-view';
import { edgeLimit, edgeScale, layOutEdges, samplePercent } from './edge-stems';
import type { EdgeStem } from './edge-stems';
import { formatSigned } from './figures';
import type { LaneLayout } from './lanes';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { bottomOf, inkOf, laneOf } from './sheet';
import { textWidth } from './text-measure';
import type { InkedText } from './pen';

const BAND_PX = 8;
const LEAST_SAMPLE_PX = 3;

/** The Edges lane: how far each edge is from its due place, against the limit. */
export function paintEdgesLane(sheet: Sheet): void {
  const lane = laneOf(sheet, 'edges');
  if (lane === undefined) return;
  const { pen, palette, leftPx, rightPx, model } = sheet;
  const { zeroY } = edgeScale(model, sheet.view, lane);
  paintLimits(sheet, lane);
  pen.across(leftPx, rightPx, zeroY, palette.ink2);
  if (sheet.pxPerBit >= FROM.samples) paintSamples(sheet, zeroY);
  const edges = layOutEdges(model, sheet.view);
  const taken = { above: -Infinity, below: -Infinity };
  for (const edge of edges) paintDue(sheet, lane, edge);
  for (const edge of edges) paintStem(sheet, lane, edge, taken);
  paintReferences(sheet, zeroY);
}

function paintLimits(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, leftPx, rightPx, model } = sheet;
  const limit = edgeLimit(model, sheet.view);
  if (limit === null) return;
  const { zeroY, pxPerPercent } = edgeScale(model, sheet.view, lane);
  for (const side of [-1, 1]) {
    const y = zeroY + side * limit * pxPerPercent;
    const band = { x: leftPx, y: side < 0 ? y - BAND_PX : y, width: rightPx - leftPx, height: BAND_PX };
    pen.hatch([band], palette.rule, 4, 1);
    pen.across(leftPx, rightPx, y, palette.ribbon, 1.5);
  }
}

/** Ticks at the instants the instrument sampled, where they are far enough apart to be told. */
function paintSamples(sheet: Sheet, zeroY: number): void {
  const { pen, palette, scale, model, view } = sheet;
  const step = model.tape.resolutionTicks;
  if (step / scale.ticksPerPx < LEAST_SAMPLE_PX) return;
  const first = Math.ceil(view.window.startTicks / step);
  const last = Math.floor(view.window.endTicks / step);
  for (let i = first; i <= last; i++) pen.down(scale.xOf(i * step), zeroY - 2, zeroY + 2, palette.ink3);
}

/** A faint tick at the lane's upper edge where the edge was due. */
function paintDue(sheet: Sheet, lane: LaneLayout, edge: EdgeStem): void {
  sheet.pen.down(sheet.scale.xOf(edge.dueTicks), lane.topPx - 16, lane.topPx + 3, sheet.palette.grid);
}

function paintStem(
  sheet: Sheet,
  lane: LaneLayout,
  edge: EdgeStem,
  taken: { above: number; below: number },
): void {
  const { pen, palette, scale, model } = sheet;
  const { zeroY, pxPerPercent, range } = edgeScale(model, sheet.view, lane);
  const x = scale.xOf(edge.dueTicks);
  const shown = Math.max(-range, Math.min(range, edge.displacement));
  const y = zeroY - shown * pxPerPercent;
  const colour = edge.verdict === null ? palette.ink : inkOf(palette, edge.verdict);
  if (Math.abs(y - zeroY) > 5) pen.down(x, zeroY, y, colour, edge.verdict === 'violation' ? 2 : 1);
  paintWhisker(
    sheet,
    x + 9,
    y,
    samplePercent(model) * pxPerPercent,
    edge.verdict === 'violation' ? colour : palette.ink2,
  );
  if (edge.verdict === 'pass' || edge.verdict === null) {
    pen.disc(x, y, 4, palette.sheet);
    pen.ring(x, y, 3.5, colour, 1.6);
  } else pen.glyph(edge.verdict, x, y, 13, colour, palette.sheet);
  paintValue(sheet, lane, edge, x, y, taken);
}

function paintWhisker(sheet: Sheet, x: number, y: number, halfPx: number, colour: string): void {
  const half = Math.max(1.5, halfPx);
  sheet.pen.down(x, y - half, y + half, colour);
  sheet.pen.across(x - 2.5, x + 2.5, y - half, colour);
  sheet.pen.across(x - 2.5, x + 2.5, y + half, colour);
}

function paintValue(
  sheet: Sheet,
  lane: LaneLayout,
  edge: EdgeStem,
  x: number,
  y: number,
  taken: { above: number; below: number },
): void {
  const { pen, palette } = sheet;
  const isAbove = edge.displacement > 0.05;
  const isLoud = edge.verdict === 'violation' || edge.verdict === 'inconclusive';
  const text = Math.abs(edge.displacement) < 0.05 ? '0.0' : formatSigned(edge.displacement, 1);
  const style: InkedText = {
    face: 'mono',
    sizePx: 11,
    weight: isLoud ? 600 : 400,
    colour: isLoud ? inkOf(palette, edge.verdict) : palette.ink2,
    align: 'center',
  };
  const half = textWidth(text, style) / 2;
  const side = isAbove ? 'above' : 'below';
  if (x - half < taken[side] + 3) return;
  taken[side] = x + half;
  const baseY = isAbove ? Math.max(y - 11, lane.topPx + 10) : Math.min(y + 19, bottomOf(lane) - 3);
  pen.label(text, x, baseY, style, palette.sheet, 2);
}

/** The start edge, from which the places are counted: a small open diamond. */
function paintReferences(sheet: Sheet, zeroY: number): void {
  const { pen, ctx, palette, scale, model, view } = sheet;
  const { first, end } = charactersIn(model, view.window.startTicks, view.window.endTicks);
  for (let c = first; c < end; c++) {
    const x = scale.xOf(model.tape.characters.startTicks[c]);
    const points = [
      [x, zeroY - 6],
      [x + 5, zeroY],
      [x, zeroY + 6],
      [x - 5, zeroY],
    ] as const;
    pen.polygon(points, palette.sheet);
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1.2;
    ctx.beginPath();
    points.forEach(([px, py], i) => (i === 0 ? ctx.moveTo(px, py) : ctx.lineTo(px, py)));
    ctx.closePath();
    ctx.stroke();
  }
}
