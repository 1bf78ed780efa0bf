/** Mean and sample standard deviation (n − 1); undefined below two values. Source: elementary statistics. */
export function meanAndDeviation(
  values: ArrayLike<number>,
): { readonly mean: number; readonly deviation: number } | undefined {
  const n = values.length;
  if (n < 2) return undefined;
  let total = 0;
  for (let i = 0; i < n; i++) total += values[i];
  const mean = total / n;
  let sum = 0;
  for (let i = 0; i < n; i++) sum += (values[i] - mean) ** 2;
  return { mean, deviation: Math.sqrt(sum / (n - 1)) };
}
