import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { binomialAtMost } from './binomial';
import { gammaQuantile, logGamma, lowerGammaShare } from './gamma';
import { meanAndDeviation } from './moments';
import { logNormalTail, normalQuantile, normalShare } from './normal';
import { median, percentile } from './percentile';
import { poissonInterval, poissonUpperBound } from './poisson';
import { occurrenceUpperBound, successRun } from './success-run';
import { wilsonInterval } from './wilson';

describe('percentiles by nearest rank', () => {
  // Source: the usual worked example of the nearest rank, five values 15, 20, 35, 40, 50; from memory.
  it.each([
    [0.05, 15],
    [0.3, 20],
    [0.4, 20],
    [0.5, 35],
    [1, 50],
  ])('share %d of five values is %d', (p, expected) => {
    expect(percentile([15, 20, 35, 40, 50], p)).toBe(expected);
  });

  it('does not slip to the next rank by rounding', () => {
    // 0.07 · 100 is 7.000000000000001 in doubles.
    expect(
      percentile(
        Array.from({ length: 100 }, (_, i) => i + 1),
        0.07,
      ),
    ).toBe(7);
  });

  it('are values that were seen, and rise with the share', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer(), { minLength: 1 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (values, p, q) => {
          const sorted = [...values].sort((a, b) => a - b);
          const low = percentile(sorted, Math.min(p, q))!;
          const high = percentile(sorted, Math.max(p, q))!;
          expect(sorted).toContain(low);
          expect(low).toBeLessThanOrEqual(high);
          // At least the share p of the values is at or below the percentile. Source: definition.
          const below = sorted.filter((value) => value <= percentile(sorted, p)!).length;
          expect(below).toBeGreaterThanOrEqual(p * sorted.length - 1e-6);
        },
      ),
    );
  });

  it('the median of an even number is the mean of the two in the middle', () => {
    expect(median([1, 2, 4, 9])).toBe(3);
    expect(median([1, 2, 9])).toBe(2);
    expect(median([])).toBeUndefined();
    expect(percentile([], 0.5)).toBeUndefined();
  });
});

describe('mean and deviation', () => {
  // Source: 2, 4, 4, 4, 5, 5, 7, 9 has mean 5 and sum of squares 32, a usual classroom example; from memory.
  it('divides by n − 1', () => {
    expect(meanAndDeviation([2, 4, 4, 4, 5, 5, 7, 9])).toEqual({
      mean: 5,
      deviation: expect.closeTo(Math.sqrt(32 / 7), 12) as number,
    });
    expect(meanAndDeviation([1])).toBeUndefined();
  });
});

describe('gamma and normal distribution', () => {
  // Source: Γ(n) = (n − 1)!, Γ(1/2) = √π.
  it('knows factorials and the half', () => {
    expect(logGamma(11)).toBeCloseTo(Math.log(3628800), 11);
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.sqrt(Math.PI)), 12);
  });

  // Source: upper 5 % points of χ², any table: 3.841 (1 degree), 18.307 (10), 124.342 (100); from memory.
  it.each([
    [1, 3.841],
    [10, 18.307],
    [100, 124.342],
  ])('χ² with %d degrees', (degrees, point) => {
    expect(2 * gammaQuantile(degrees / 2, 0.95)).toBeCloseTo(point, 3);
  });

  // Source: tables of the standard normal distribution: Φ(1) = 0.84134, Φ(1.6449) = 0.95, Φ(−2.3263) = 0.01; from memory.
  it('knows the table of the normal distribution', () => {
    expect(normalShare(1)).toBeCloseTo(0.841345, 6);
    expect(normalQuantile(0.95)).toBeCloseTo(1.644854, 6);
    expect(normalQuantile(0.01)).toBeCloseTo(-2.326348, 6);
    // Φ(−10) = 7.619853e−24; from memory.
    expect(Math.exp(logNormalTail(10))).toBeCloseTo(7.619853e-24, 29);
    expect(logNormalTail(2)).toBeCloseTo(Math.log(normalShare(-2)), 10);
  });

  it('quantile and share undo each other', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.1, max: 400, noNaN: true }),
        fc.double({ min: 0.001, max: 0.999, noNaN: true }),
        (a, p) => {
          expect(lowerGammaShare(a, gammaQuantile(a, p))).toBeCloseTo(p, 9);
          expect(normalShare(normalQuantile(p))).toBeCloseTo(p, 9);
        },
      ),
    );
  });
});

describe('the Wilson interval', () => {
  // Source: Newcombe 1998, Statistics in Medicine 17, Table I, method 3; from memory.
  it.each([
    [81, 263, 0.2553, 0.3662],
    [15, 148, 0.0624, 0.1605],
    [0, 20, 0, 0.1611],
    [1, 29, 0.0061, 0.1718],
  ])('%d of %d', (successes, n, lower, upper) => {
    const interval = wilsonInterval(successes, n);
    expect(interval.lower).toBeCloseTo(lower, 4);
    expect(interval.upper).toBeCloseTo(upper, 4);
  });

  it('holds the proportion, shrinks with n, mirrors failures', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5000 }), fc.nat(), (n, k) => {
        const successes = k % (n + 1);
        const { lower, upper } = wilsonInterval(successes, n);
        expect(lower).toBeLessThanOrEqual(successes / n + 1e-12);
        expect(upper).toBeGreaterThanOrEqual(successes / n - 1e-12);
        const mirrored = wilsonInterval(n - successes, n);
        expect(mirrored.lower).toBeCloseTo(1 - upper, 10);
        const larger = wilsonInterval(10 * successes, 10 * n);
        expect(larger.upper - larger.lower).toBeLessThan(upper - lower);
      }),
    );
    expect(wilsonInterval(0, 0)).toEqual({ lower: 0, upper: 1 });
  });
});

describe('counts with an exposure', () => {
  // Source: Garwood 1936, Biometrika 28, 437–442: 25 events lie in 16.18 … 36.90 (95 %), 17.38 … 34.92 (90 %), 14.00 … 41.00 (99 %),
  // as printed in a statistics guide on counts; 10 events in 4.80 … 18.39 and 100 in 81.36 … 121.63; none below 3.689 two-sided,
  // 2.996 one-sided, as in the documentation of the R package epitools 0.5-10.1 (pois.exact, pois.daly).
  it.each([
    [25, 0.95, 16.18, 36.9],
    [25, 0.9, 17.38, 34.92],
    [25, 0.99, 14.0, 41.0],
    [10, 0.95, 4.8, 18.39],
    [100, 0.95, 81.36, 121.63],
    [0, 0.95, 0, 3.689],
  ])('%d events at %d', (count, confidence, lower, upper) => {
    const interval = poissonInterval(count, confidence);
    expect(interval.lower).toBeCloseTo(lower, 1.9);
    expect(interval.upper).toBeCloseTo(upper, 1.9);
  });

  it('none seen leaves room for three', () => {
    expect(poissonUpperBound(0)).toBeCloseTo(2.996, 3);
  });

  it('the ends of the interval are where the tails are', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 300 }), (count) => {
        const { lower, upper } = poissonInterval(count);
        // P(at most c | upper) = 2.5 %; P(at least c | lower) = 2.5 %. Source: definition of the exact interval.
        const atMost = (mean: number, most: number): number => {
          let sum = 0;
          for (let k = 0; k <= most; k++) sum += Math.exp(k * Math.log(mean) - mean - logGamma(k + 1));
          return sum;
        };
        expect(atMost(upper, count)).toBeCloseTo(0.025, 6);
        expect(1 - atMost(lower, count - 1)).toBeCloseTo(0.025, 6);
      }),
    );
  });
});

describe('runs without failure', () => {
  // Source: rules.md 1, Planning: 59 for 95/95, 299 for 95/99; the rule of three, 3/n.
  it('59 show 95 %, 299 show 99 %', () => {
    expect(successRun(0.95, 0.95)).toBe(59);
    expect(successRun(0.99, 0.95)).toBe(299);
    expect(occurrenceUpperBound(59, 0.95)).toBeLessThanOrEqual(0.05);
    expect(occurrenceUpperBound(58, 0.95)).toBeGreaterThan(0.05);
    expect(occurrenceUpperBound(1000, 0.95)).toBeCloseTo(3 / 1000, 4);
    expect(occurrenceUpperBound(0, 0.95)).toBe(1);
  });

  it('needs no trial more where the quotient is whole', () => {
    // ln 0.25 ÷ ln 0.5 = 2.
    expect(successRun(0.5, 0.75)).toBe(2);
  });
});

describe('the binomial distribution', () => {
  // Source: ten tosses of a coin, at most two heads: 56 of 1024.
  it('adds up the ways', () => {
    expect(binomialAtMost(2, 10, 0.5)).toBeCloseTo(56 / 1024, 12);
    expect(binomialAtMost(10, 10, 0.5)).toBe(1);
    expect(binomialAtMost(0, 10, 1)).toBe(0);
    expect(binomialAtMost(0, 10, 0)).toBe(1);
  });
});
