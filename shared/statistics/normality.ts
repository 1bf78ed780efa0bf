import { meanAndDeviation } from './moments';
import { logNormalTail } from './normal';

export interface NormalityCheck {
  /** A², and A² adjusted for mean and deviation taken from the values. */
  readonly statistic: number;
  readonly adjusted: number;
  /** Probability of at least this much where the values are normal. */
  readonly p: number;
}

/** Below this the check has no say. Source: D'Agostino and Stephens 1986, from memory. */
const LEAST_VALUES = 8;

/**
 * Whether values look like a normal distribution: Anderson–Darling with mean and deviation from the values. undefined below
 * eight values or without spread. Source: Stephens in D'Agostino and Stephens 1986, Table 4.9, from memory.
 */
export function checkNormality(values: ArrayLike<number>): NormalityCheck | undefined {
  const moments = meanAndDeviation(values);
  const n = values.length;
  if (moments === undefined || n < LEAST_VALUES) return undefined;
  const sorted = Float64Array.from(values).sort();
  if (sorted[0] === sorted[n - 1]) return undefined;
  const at = (i: number): number => (sorted[i] - moments.mean) / moments.deviation;
  let sum = 0;
  for (let i = 0; i < n; i++) sum += (2 * i + 1) * (logNormalTail(-at(i)) + logNormalTail(at(n - 1 - i)));
  const statistic = -n - sum / n;
  return { statistic, ...adjust(statistic, n) };
}

/** The adjusted statistic and its probability. */
export function adjust(statistic: number, n: number): { readonly adjusted: number; readonly p: number } {
  const a = statistic * (1 + 0.75 / n + 2.25 / (n * n));
  return { adjusted: a, p: Math.min(1, Math.max(0, probability(a))) };
}

function probability(a: number): number {
  if (a < 0.2) return 1 - Math.exp(-13.436 + 101.14 * a - 223.73 * a * a);
  if (a < 0.34) return 1 - Math.exp(-8.318 + 42.796 * a - 59.938 * a * a);
  if (a < 0.6) return Math.exp(0.9177 - 4.279 * a - 1.38 * a * a);
  // Beyond 13 the parabola turns; nothing is left there anyway.
  return a > 13 ? 0 : Math.exp(1.2937 - 5.709 * a + 0.0186 * a * a);
}
