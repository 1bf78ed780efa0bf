import { charactersIn } from './characters-in-view';
import { countBefore } from '#shared/time/sorted-search';
import { layOutHeads } from './finding-heads';
import { layOutHeldBars } from './held-bars';
import { laneAt } from './lanes';
import type { LaneId, LaneLayout } from './lanes';
import { layOutNotes } from './lane-notes';
import { layOutPackets } from './packet-marks';
import type { Rect } from './pen';
import { hasCells } from './selection-places';
import type { TapeModel } from './tape-model';
import type { TapeView } from './view';
import { timeScaleOf } from './view';

/** What lies under a point of the canvas. */
export type TapeHit =
  | { readonly kind: 'finding'; readonly index: number; readonly members: readonly number[] }
  | { readonly kind: 'packet'; readonly index: number }
  | { readonly kind: 'character'; readonly index: number }
  | { readonly kind: 'reset'; readonly index: number }
  | { readonly kind: 'divider'; readonly divider: 'a' | 'b' }
  | { readonly kind: 'ruler'; readonly ticks: number }
  /** A note at a lane's left edge that leads to something outside the window. */
  | { readonly kind: 'go-to'; readonly lane: LaneId; readonly ticks: number }
  /** The switch between measured and nominal rate in the gutter of the Edges lane. */
  | { readonly kind: 'edge-reference' }
  | { readonly kind: 'gutter'; readonly lane: LaneId }
  | { readonly kind: 'edge'; readonly ticks: number };

/** Heads and blades take a pointer this far beyond what is drawn, px. */
const REACH_PX = 6;
const BLADE_PX = 20;
const LINE_PX = 4;
/** Dividers snap to edges this near. Source: design 13. */
export const SNAP_PX = 8;

export function hitTest(
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  xPx: number,
  yPx: number,
): TapeHit | null {
  const lane = laneAt(lanes, yPx);
  if (lane === undefined) return null;
  if (xPx < view.gutterPx) return hitGutter(lane, yPx);
  const divider = hitDivider(view, lane, xPx);
  if (divider !== null) return divider;
  const note = layOutNotes(model, view, lanes).find(
    (item) => item.lane === lane.id && item.ticks !== null && holds(item.box, xPx, yPx),
  );
  if (note !== undefined && note.ticks !== null) return { kind: 'go-to', lane: lane.id, ticks: note.ticks };
  switch (lane.id) {
    case 'time':
      return { kind: 'ruler', ticks: timeScaleOf(view).ticksAt(xPx) };
    case 'findings':
      return hitHead(model, view, lane, xPx, yPx);
    case 'packets':
      return hitPacket(model, view, lane, xPx, yPx);
    case 'data':
      return hitCharacter(model, view, xPx);
    case 'reply':
      return hitReply(model, view, xPx);
    case 'held':
      return hitHeld(model, view, lane, xPx, yPx);
    default:
      return hitEdge(model, view, xPx);
  }
}

function hitGutter(lane: LaneLayout, yPx: number): TapeHit {
  const isSwitch = lane.id === 'edges' && yPx > lane.topPx + lane.heightPx / 2 + 8;
  return isSwitch ? { kind: 'edge-reference' } : { kind: 'gutter', lane: lane.id };
}

/** The blades in their lane, and the lines everywhere else but in the findings. */
function hitDivider(view: TapeView, lane: LaneLayout, xPx: number): TapeHit | null {
  if (lane.id === 'findings' || lane.id === 'time') return null;
  const scale = timeScaleOf(view);
  for (const divider of ['b', 'a'] as const) {
    const ticks = view.dividers[divider];
    if (ticks === null) continue;
    const away = (xPx - scale.xOf(ticks)) * (divider === 'a' ? -1 : 1);
    const isOnBlade = lane.id === 'dividers' && away >= -REACH_PX && away <= BLADE_PX + REACH_PX;
    if (isOnBlade || Math.abs(away) <= LINE_PX) return { kind: 'divider', divider };
  }
  return null;
}

function hitHead(
  model: TapeModel,
  view: TapeView,
  lane: LaneLayout,
  xPx: number,
  yPx: number,
): TapeHit | null {
  const heads = layOutHeads(model, view, lane);
  const head =
    heads.find((item) => holds(item.box, xPx, yPx)) ??
    heads.find((item) => holds(grown(item.box, REACH_PX), xPx, yPx));
  return head === undefined ? null : { kind: 'finding', index: head.lead, members: head.members };
}

function hitPacket(
  model: TapeModel,
  view: TapeView,
  lane: LaneLayout,
  xPx: number,
  yPx: number,
): TapeHit | null {
  const marks = layOutPackets(model, view, lane);
  const onFlag = marks.find((mark) => mark.kind !== 'incident' && holds(grown(mark.rect, 2), xPx, yPx));
  const mark =
    onFlag ?? marks.find((item) => item.kind !== 'incident' && xPx >= item.x0 - 1 && xPx <= item.x1 + 1);
  if (mark !== undefined) return { kind: mark.kind === 'plate' ? 'reset' : 'packet', index: mark.index };
  if (marks.some((item) => item.kind === 'packet')) return null;
  return nearestPacket(model, view, xPx);
}

/** In the survey packets are narrower than a pointer: the nearest within a few px counts. */
function nearestPacket(model: TapeModel, view: TapeView, xPx: number): TapeHit | null {
  const scale = timeScaleOf(view);
  const next = countBefore(model.packetStarts, scale.ticksAt(xPx));
  let best: number | undefined;
  for (const packet of [next - 1, next]) {
    if (packet < 0 || packet >= model.packetStarts.length) continue;
    const away = Math.abs(scale.xOf(model.packetStarts[packet]) - xPx);
    if (
      away <= REACH_PX &&
      (best === undefined || away < Math.abs(scale.xOf(model.packetStarts[best]) - xPx))
    ) {
      best = packet;
    }
  }
  return best === undefined ? null : { kind: 'packet', index: best };
}

function hitCharacter(model: TapeModel, view: TapeView, xPx: number): TapeHit | null {
  if (!hasCells(model, view)) return hitEdge(model, view, xPx);
  const at = timeScaleOf(view).ticksAt(xPx);
  const { first, end } = charactersIn(model, at, at);
  return end > first ? { kind: 'character', index: end - 1 } : hitEdge(model, view, xPx);
}

function hitReply(model: TapeModel, view: TapeView, xPx: number): TapeHit | null {
  const scale = timeScaleOf(view);
  const reply = model.replies.find((item) => {
    const x0 = scale.xOf(item.onTicks) - REACH_PX;
    const x1 = scale.xOf(item.replyTicks ?? item.onTicks) + REACH_PX;
    return xPx >= x0 && xPx <= Math.max(x1, x0 + 24);
  });
  if (reply === undefined) return null;
  if (reply.finding >= 0) return { kind: 'finding', index: reply.finding, members: [reply.finding] };
  return { kind: 'reset', index: reply.reset };
}

function hitHeld(
  model: TapeModel,
  view: TapeView,
  lane: LaneLayout,
  xPx: number,
  yPx: number,
): TapeHit | null {
  const bar = layOutHeldBars(model, view, lane).find(
    (item) => xPx >= item.x0 - 2 && xPx <= item.x1 + 2 && Math.abs(yPx - item.y) <= 7,
  );
  return bar === undefined ? null : { kind: 'packet', index: bar.packet };
}

function hitEdge(model: TapeModel, view: TapeView, xPx: number): TapeHit | null {
  const scale = timeScaleOf(view);
  const ticks = nearestEdge(model, scale.ticksAt(xPx), SNAP_PX * scale.ticksPerPx);
  return ticks === null ? null : { kind: 'edge', ticks };
}

/** The nearest edge of data or RTS within 8 px; the given instant where there is none. */
export function snapToEdge(model: TapeModel, ticks: number, view: TapeView): number {
  return nearestEdge(model, ticks, SNAP_PX * timeScaleOf(view).ticksPerPx) ?? ticks;
}

/** The next edge of data or RTS in a direction; the given instant where there is none. */
export function stepToEdge(model: TapeModel, ticks: number, direction: 1 | -1): number {
  let best: number | null = null;
  for (const line of [model.lines.data, model.lines.rts]) {
    if (line === undefined) continue;
    const index =
      direction > 0 ? countBefore(line.ticks, ticks + 1e-6) : countBefore(line.ticks, ticks - 1e-6) - 1;
    const edge = line.ticks[index];
    if (edge === undefined || edge === ticks) continue;
    if (best === null || (edge - best) * direction < 0) best = edge;
  }
  return best ?? ticks;
}

function nearestEdge(model: TapeModel, ticks: number, reach: number): number | null {
  let best: number | null = null;
  for (const line of [model.lines.data, model.lines.rts]) {
    if (line === undefined) continue;
    const next = countBefore(line.ticks, ticks);
    for (const edge of [line.ticks[next - 1], line.ticks[next]]) {
      if (edge === undefined || Math.abs(edge - ticks) > reach) continue;
      if (best === null || Math.abs(edge - ticks) < Math.abs(best - ticks)) best = edge;
    }
  }
  return best;
}

function holds(rect: Rect, x: number, y: number): boolean {
  return x >= rect.x && x <= rect.x + rect.width && y >= rect.y && y <= rect.y + rect.height;
}

function grown(rect: Rect, by: number): Rect {
  return { x: rect.x - by, y: rect.y - by, width: rect.width + 2 * by, height: rect.height + 2 * by };
}
