/** The nearest-rank percentile ⌈p·n⌉ of values already sorted ascending; undefined without values. Source: rules.md 1. */
export function percentile(sorted: ArrayLike<number>, p: number): number | undefined {
  if (sorted.length === 0) return undefined;
  const rank = Math.min(sorted.length, Math.max(1, Math.ceil(p * sorted.length)));
  return sorted[rank - 1];
}

/** The middle value, or the mean of the two middle ones; undefined without values. */
export function median(sorted: ArrayLike<number>): number | undefined {
  const n = sorted.length;
  if (n === 0) return undefined;
  return n % 2 === 1 ? sorted[n >> 1] : (sorted[n / 2 - 1] + sorted[n / 2]) / 2;
}

/** Mean and sample standard deviation (n − 1); undefined below two values. */
export function meanAndDeviation(
  values: ArrayLike<number>,
): { readonly mean: number; readonly deviation: number } | undefined {
  const n = values.length;
  if (n < 2) return undefined;
  let mean = 0;
  for (let i = 0; i < n; i++) mean += values[i] / n;
  let sum = 0;
  for (let i = 0; i < n; i++) sum += (values[i] - mean) ** 2;
  return { mean, deviation: Math.sqrt(sum / (n - 1)) };
}
