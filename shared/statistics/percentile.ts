/**
 * The nearest-rank percentile ⌈p·n⌉ of values already sorted ascending; undefined without values.
 * Source: rules.md 1, Percentiles; definition 1 of Hyndman and Fan 1996, from memory.
 */
export function percentile(sorted: ArrayLike<number>, p: number): number | undefined {
  if (sorted.length === 0) return undefined;
  // p·n may lie a rounding error above a whole rank: 0.07 · 100 is 7.000000000000001.
  const rank = Math.min(sorted.length, Math.max(1, Math.ceil(p * sorted.length - 1e-9)));
  return sorted[rank - 1];
}

/** The middle value, or the mean of the two middle ones; undefined without values. */
export function median(sorted: ArrayLike<number>): number | undefined {
  const n = sorted.length;
  if (n === 0) return undefined;
  return n % 2 === 1 ? sorted[n >> 1] : (sorted[n / 2 - 1] + sorted[n / 2]) / 2;
}
