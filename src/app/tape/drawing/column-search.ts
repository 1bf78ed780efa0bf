import { countBefore, countUpTo } from '#shared/time/sorted-search';

/** Indexes of things laid out in order of time. Empty where `first` ≥ `end`. */
export interface IndexRange {
  readonly first: number;
  /** One past the last. */
  readonly end: number;
}

/** Things with sorted starts and ends that touch [startTicks, endTicks]. */
export function indexesTouching(
  starts: ArrayLike<number>,
  ends: ArrayLike<number>,
  startTicks: number,
  endTicks: number,
): IndexRange {
  return { first: countBefore(ends, startTicks), end: countUpTo(starts, endTicks) };
}
