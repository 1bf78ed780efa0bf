import { indexesTouching } from './column-search';
import { roundStep } from './ruler-steps';
import { scaleAt } from './scales';
import type { TapeModel } from './tape-model';
import type { TapeView } from './view';

/** What the ring of a packet flag can stand for, counts; the last two for packets that hold two steps. Source: design 7. */
const RINGS = [4, 8, 16, 32, 64, 128, 256, 512] as const;

/** A packet this wide carries a flag with a ring; narrower ones are arrows only, px. */
export const FLAG_FROM_PX = 70;

/** Share of the lane's height that a vector of the usual largest length takes in the stick plot. */
const STICK_SHARE = 0.4;
/** Least length of the pin in the gutter that shows the scale of the sticks, px. */
const PIN_PX = 11;

/** Counts of the ring: the smallest that holds every vector in view. */
export function ringCounts(model: TapeModel, view: Pick<TapeView, 'window'>): number {
  const { packets } = model.tape;
  const { first, end } = indexesTouching(
    model.packetStarts,
    model.packetEnds,
    view.window.startTicks,
    view.window.endTicks,
  );
  let longest = 0;
  for (let p = first; p < end; p++) {
    longest = Math.max(longest, Math.hypot(packets.dx[p], packets.dy[p]));
  }
  return RINGS.find((ring) => ring >= longest) ?? RINGS[RINGS.length - 1];
}

/** Whether packets are wide enough for flags at this scale; else their arrows share one scale, shown by a pin. */
export function hasFlags(model: TapeModel, pxPerBit: number): boolean {
  return pxPerBit >= 1.2 && 3 * model.elements * pxPerBit >= FLAG_FROM_PX;
}

/**
 * px a count of movements drawn without a ring: in the survey the same everywhere on the tape, closer up so that the longest in
 * view fills the lane.
 */
export function stickScale(
  model: TapeModel,
  view: Pick<TapeView, 'window'>,
  pxPerBit: number,
  laneHeightPx: number,
): number {
  const counts = scaleAt(pxPerBit) === 'survey' ? model.motion.largestUsual : ringCounts(model, view);
  return (STICK_SHARE * laneHeightPx) / counts;
}

/** The pin in the gutter: a round number of counts and its length, px. */
export function stickPin(scale: number): { readonly counts: number; readonly lengthPx: number } {
  const counts = Math.max(1, roundStep(PIN_PX / scale));
  return { counts, lengthPx: counts * scale };
}
