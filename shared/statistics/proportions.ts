/** Quantile of the standard normal distribution for a two-sided 95 % interval. */
const Z_95 = 1.959963984540054;

/** The Wilson 95 % score interval of a proportion. Source: Wilson 1927, from memory; Brown, Cai, DasGupta 2001, from memory. */
export function wilsonInterval(
  successes: number,
  n: number,
  z = Z_95,
): { readonly lower: number; readonly upper: number } {
  if (n === 0) return { lower: 0, upper: 1 };
  const p = successes / n;
  const z2 = z * z;
  const centre = (p + z2 / (2 * n)) / (1 + z2 / n);
  const half = (z / (1 + z2 / n)) * Math.sqrt((p * (1 - p)) / n + z2 / (4 * n * n));
  return { lower: Math.max(0, centre - half), upper: Math.min(1, centre + half) };
}

/** Upper bound of a share of which none was seen in n: 1 − (1 − confidence)^(1/n). Source: rules.md 1, Counts. */
export function occurrenceUpperBound(n: number, confidence: number): number {
  return n <= 0 ? 1 : 1 - (1 - confidence) ** (1 / n);
}

/** Trials without failure that show a reliability `p` with a confidence: n = ⌈ln(1 − C) ÷ ln p⌉. Source: rules.md 1, Planning. */
export function successRun(p: number, confidence: number): number {
  return Math.ceil(Math.log(1 - confidence) / Math.log(p));
}
