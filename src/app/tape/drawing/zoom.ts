import type { Tape } from '#shared/contract/tape-payload';
import type { TapeWindow } from './time-scale';
import { nominalBitTicks } from './time-scale';

/** What a window may be. */
export interface WindowLimits {
  readonly endTicks: number;
  readonly shortestTicks: number;
}

/** Smallest and largest scale, px a bit. Source: design 8. */
export const LEAST_PX_PER_BIT = 0.0004;
export const MOST_PX_PER_BIT = 120;

/** The scales of the zoom keys, px a bit: 1-2-5 from the smallest to the largest. */
export const ZOOM_STEPS: readonly number[] = stepsBetween(LEAST_PX_PER_BIT, MOST_PX_PER_BIT);

function stepsBetween(least: number, most: number): number[] {
  const steps = [least];
  for (let power = Math.floor(Math.log10(least)); power <= Math.log10(most); power++) {
    for (const digit of [1, 2, 5]) {
      const step = Number(`${digit}e${power}`);
      if (step > least && step < most) steps.push(step);
    }
  }
  return [...steps, most];
}

/** @param widthPx width of the paper, without the gutter */
export function windowLimits(
  tape: Pick<Tape, 'tickS' | 'framing' | 'endTicks'>,
  widthPx: number,
): WindowLimits {
  const shortest = (nominalBitTicks(tape) * Math.max(1, widthPx)) / MOST_PX_PER_BIT;
  const endTicks = Math.max(tape.endTicks, 1e-9);
  return { endTicks, shortestTicks: Math.min(shortest, endTicks) };
}

/** The window moved and cut so that it lies in the record and is not shorter than allowed. */
export function clampWindow(window: TapeWindow, limits: WindowLimits): TapeWindow {
  const asked = window.endTicks - window.startTicks;
  const length = Math.min(Math.max(asked, limits.shortestTicks), limits.endTicks);
  const middle = (window.startTicks + window.endTicks) / 2;
  const start = asked === length ? window.startTicks : middle - length / 2;
  const startTicks = Math.min(Math.max(start, 0), limits.endTicks - length);
  return { startTicks, endTicks: startTicks + length };
}

/** Zooms by `factor` (above 1: closer); the focus keeps its place on the screen where the limits let it. */
export function zoomAt(
  window: TapeWindow,
  factor: number,
  focusTicks: number,
  limits: WindowLimits,
): TapeWindow {
  const before = window.endTicks - window.startTicks;
  const length = Math.min(Math.max(before / factor, limits.shortestTicks), limits.endTicks);
  const share = (focusTicks - window.startTicks) / before;
  const startTicks = focusTicks - share * length;
  return clampWindow({ startTicks, endTicks: startTicks + length }, limits);
}

/** Moves the window by a share of its length; negative: towards the beginning. */
export function panBy(window: TapeWindow, share: number, limits: WindowLimits): TapeWindow {
  const shift = share * (window.endTicks - window.startTicks);
  return clampWindow({ startTicks: window.startTicks + shift, endTicks: window.endTicks + shift }, limits);
}

/** A window around a span with a margin on both sides, as a share of the span. */
export function fitWindow(
  startTicks: number,
  endTicks: number,
  limits: WindowLimits,
  margin = 0.08,
): TapeWindow {
  const extra = (endTicks - startTicks) * margin;
  return clampWindow({ startTicks: startTicks - extra, endTicks: endTicks + extra }, limits);
}

/** The factor that takes the scale to the next step: closer for `direction` +1, farther for −1. */
export function stepFactor(currentPxPerBit: number, direction: 1 | -1): number {
  const slack = 1.0001;
  const next =
    direction > 0
      ? ZOOM_STEPS.find((step) => step > currentPxPerBit * slack)
      : ZOOM_STEPS.findLast((step) => step < currentPxPerBit / slack);
  return (next ?? currentPxPerBit) / currentPxPerBit;
}

/** A window of the wanted scale around a tick. */
export function windowAtScale(
  tape: Pick<Tape, 'tickS' | 'framing' | 'endTicks'>,
  widthPx: number,
  wantedPxPerBit: number,
  middleTicks: number,
): TapeWindow {
  const half = (nominalBitTicks(tape) * widthPx) / wantedPxPerBit / 2;
  return clampWindow(
    { startTicks: middleTicks - half, endTicks: middleTicks + half },
    windowLimits(tape, widthPx),
  );
}
