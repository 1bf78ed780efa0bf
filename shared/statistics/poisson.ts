import { gammaQuantile } from './gamma';
import type { Interval } from './wilson';

/**
 * Two-sided exact interval of the expected number of events where `count` were seen: χ² quantiles with 2c and 2c + 2 degrees
 * of freedom, halved. Divide by the exposure (seconds, characters) for a rate.
 * Source: Garwood 1936, Biometrika 28, from memory.
 */
export function poissonInterval(count: number, confidence = 0.95): Interval {
  const tail = (1 - confidence) / 2;
  return {
    lower: count === 0 ? 0 : gammaQuantile(count, tail),
    upper: gammaQuantile(count + 1, 1 - tail),
  };
}

/** One-sided upper bound of the expected number of events: 3.00 for none seen at 95 %. Source: as `poissonInterval`. */
export function poissonUpperBound(count: number, confidence = 0.95): number {
  return gammaQuantile(count + 1, confidence);
}
