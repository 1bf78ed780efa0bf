import { Z_95 } from './normal';

export interface Interval {
  readonly lower: number;
  readonly upper: number;
}

/**
 * The Wilson score interval of a proportion, two-sided 95 % unless `z` says otherwise.
 * Source: Wilson 1927, from memory; recommended by Brown, Cai, DasGupta 2001, from memory.
 */
export function wilsonInterval(successes: number, n: number, z = Z_95): Interval {
  if (n === 0) return { lower: 0, upper: 1 };
  const p = successes / n;
  const z2 = z * z;
  const centre = (p + z2 / (2 * n)) / (1 + z2 / n);
  const half = (z / (1 + z2 / n)) * Math.sqrt((p * (1 - p)) / n + z2 / (4 * n * n));
  return { lower: Math.max(0, centre - half), upper: Math.min(1, centre + half) };
}
