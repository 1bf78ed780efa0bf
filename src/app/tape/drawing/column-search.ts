/** How many of the first `count` sorted values are ≤ `at`. */
export function countUpTo(values: ArrayLike<number>, at: number, count = values.length): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (values[middle] <= at) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** How many of the first `count` sorted values are < `at`. */
export function countBefore(values: ArrayLike<number>, at: number, count = values.length): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (values[middle] < at) low = middle + 1;
    else high = middle;
  }
  return low;
}

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
