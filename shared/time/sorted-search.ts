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
