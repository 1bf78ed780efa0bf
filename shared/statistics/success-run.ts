/** Upper bound of a share of which none was seen in n: 1 − (1 − confidence)^(1/n). Source: rules.md 1, Counts. */
export function occurrenceUpperBound(n: number, confidence: number): number {
  return n <= 0 ? 1 : 1 - (1 - confidence) ** (1 / n);
}

/**
 * Trials without failure that show a reliability `p` with a confidence: n = ⌈ln(1 − C) ÷ ln p⌉; 59 for 95/95, 299 for 99 %
 * at 95 %. Source: rules.md 1, Planning (success run).
 */
export function successRun(p: number, confidence: number): number {
  return Math.ceil(Math.log(1 - confidence) / Math.log(p) - 1e-9);
}
