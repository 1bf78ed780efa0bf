import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { binomialAtMost } from './binomial';
import { exposureFor, planSample, trialsFor, trialsForWilson, valuesForIndex } from './sample-size';
import { wilsonInterval } from './wilson';

describe('trials for a reliability', () => {
  // Source: tables of binomial sampling plans for 95 % at 95 %: 59, 93, 124, 153, 181; for 90 % at 90 %: 22, 38, 52; from memory.
  it.each([
    [0.95, 0.95, 0, 59],
    [0.95, 0.95, 1, 93],
    [0.95, 0.95, 2, 124],
    [0.95, 0.95, 3, 153],
    [0.95, 0.95, 4, 181],
    [0.9, 0.9, 0, 22],
    [0.9, 0.9, 1, 38],
    [0.9, 0.9, 2, 52],
    [0.99, 0.95, 0, 299],
  ])('%d at %d with %d failures: %d', (reliability, confidence, failures, n) => {
    expect(trialsFor(reliability, confidence, failures)).toBe(n);
  });

  it('are the least that will do', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.5, max: 0.999, noNaN: true }),
        fc.double({ min: 0.5, max: 0.99, noNaN: true }),
        fc.integer({ min: 0, max: 6 }),
        (reliability, confidence, failures) => {
          const n = trialsFor(reliability, confidence, failures)!;
          expect(binomialAtMost(failures, n, 1 - reliability)).toBeLessThanOrEqual(1 - confidence + 1e-9);
          if (n > failures + 1) {
            expect(binomialAtMost(failures, n - 1, 1 - reliability)).toBeGreaterThan(1 - confidence - 1e-9);
          }
        },
      ),
    );
  });

  it('have no answer for a share of 0 or 1', () => {
    expect(trialsFor(1, 0.95)).toBeUndefined();
    expect(trialsFor(0.95, 1)).toBeUndefined();
    expect(trialsForWilson(1)).toBeUndefined();
  });
});

describe('other plans', () => {
  // Source: rules.md 1, Proportions: 73 of 73 for 95 %, 381 of 381 for 99 %.
  it('by the Wilson bound', () => {
    expect(trialsForWilson(0.95)).toBe(73);
    expect(trialsForWilson(0.99)).toBe(381);
    expect(wilsonInterval(72, 72).lower).toBeLessThan(0.95);
  });

  it('for an index: enough values bring its interval above the limit, one less does not', () => {
    const n = valuesForIndex(1.67, 1.33)!;
    // Source: formula of the standard error in rules.md 1, solved here by trying.
    const lower = (k: number): number => 1.67 - 1.959964 * Math.sqrt(1 / (9 * k) + 1.67 ** 2 / (2 * (k - 1)));
    expect(lower(n)).toBeGreaterThanOrEqual(1.33);
    expect(lower(n - 1)).toBeLessThan(1.33);
    expect(valuesForIndex(1.33, 1.33)).toBeUndefined();
  });

  it('for a rate: three divided by it where none is seen', () => {
    expect(exposureFor(0.01, 0.95)).toBeCloseTo(299.6, 1);
    expect(exposureFor(0, 0.95)).toBeUndefined();
  });

  it('for resets and units together', () => {
    expect(planSample({ resetReliability: 0.95, unitReliability: 0.9, confidence: 0.95 })).toEqual({
      resetsPerUnit: 59,
      units: 29,
      resetsInAll: 59 * 29,
    });
    expect(
      planSample({ resetReliability: 0.95, unitReliability: 0.95, confidence: 0.95, failedResets: 1 })
        ?.resetsPerUnit,
    ).toBe(93);
    expect(planSample({ resetReliability: 1, unitReliability: 0.9, confidence: 0.95 })).toBeUndefined();
  });
});
