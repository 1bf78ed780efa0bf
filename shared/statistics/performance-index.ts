import { meanAndDeviation } from './moments';
import { Z_95 } from './normal';
import { checkNormality } from './normality';

export interface PerformanceIndex {
  /** Ppu = (USL − mean) ÷ (3·s), overall s. */
  readonly value: number;
  /** Half of its 95 % interval: 1.96 · √(1/(9n) + P²/(2(n − 1))). */
  readonly half: number;
  /** The values do not look normal (p below 0.05): the index then says little about the share beyond the limit. */
  readonly isNormalityDoubtful: boolean;
}

/** Below this probability the check of normality warns (house). */
const DOUBTFUL_BELOW = 0.05;

/**
 * One-sided performance index against an upper limit. s² is freed of the rounding of the instrument by −T²/6.
 * Undefined where the spread does not exceed the resolution, or below two values. Source: rules.md 1, Performance index;
 * ISO 22514-2 for the index, from memory; standard error after Bissell 1990, from memory.
 * @param resolution T of one value, in the unit of the values
 */
export function performanceIndex(
  values: ArrayLike<number>,
  upperLimit: number,
  resolution: number,
): PerformanceIndex | undefined {
  const moments = meanAndDeviation(values);
  if (moments === undefined || moments.deviation <= resolution) return undefined;
  const deviation = Math.sqrt(moments.deviation ** 2 - resolution ** 2 / 6);
  const value = (upperLimit - moments.mean) / (3 * deviation);
  const n = values.length;
  const normality = checkNormality(values);
  return {
    value,
    half: Z_95 * Math.sqrt(1 / (9 * n) + value ** 2 / (2 * (n - 1))),
    isNormalityDoubtful: normality !== undefined && normality.p < DOUBTFUL_BELOW,
  };
}
