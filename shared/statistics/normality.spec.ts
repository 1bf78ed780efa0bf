import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { normalQuantile } from './normal';
import { adjust, checkNormality } from './normality';

/** Values where a normal distribution has its middle ranks: as normal as n values can be. */
function normalScores(n: number): number[] {
  return Array.from({ length: n }, (_, i) => normalQuantile((i + 0.5) / n));
}

describe('checkNormality', () => {
  // Source: example results of routine g08ck of a published numerical library (A² 0.165956, adjusted 0.171296, p 0.931155); the
  // ratio of the two statistics belongs to n = 26.
  it('adjusts A² and turns it into a probability', () => {
    const { adjusted, p } = adjust(0.165956, 26);
    expect(adjusted).toBeCloseTo(0.171296, 6);
    expect(p).toBeCloseTo(0.931155, 5);
  });

  // Source: 5 % point 0.752 and 1 % point 1.035 of the adjusted statistic, Stephens 1986, Table 4.7, from memory.
  it('has its 5 % and 1 % points where the table has them', () => {
    expect(adjust(0.752, 1e9).p).toBeCloseTo(0.05, 2);
    expect(adjust(1.035, 1e9).p).toBeCloseTo(0.01, 2);
    expect(adjust(1e6, 1e9).p).toBe(0);
  });

  it('takes normal scores for normal, waiting times not', () => {
    const scores = normalScores(60);
    expect(checkNormality(scores)!.p).toBeGreaterThan(0.9);
    expect(checkNormality(scores.map(Math.exp))!.p).toBeLessThan(0.001);
  });

  it('does not depend on unit, origin or order', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 10, maxLength: 60 }),
        fc.double({ min: 0.1, max: 1000, noNaN: true }),
        fc.double({ min: -100, max: 100, noNaN: true }),
        (noise, factor, origin) => {
          const values = normalScores(noise.length).map((value, i) => value + noise[i]);
          const moved = [...values].reverse().map((value) => origin + factor * value);
          expect(checkNormality(moved)!.statistic).toBeCloseTo(checkNormality(values)!.statistic, 6);
        },
      ),
    );
  });

  it('has no say about few values or values without spread', () => {
    expect(checkNormality([1, 2, 3, 4, 5, 6, 7])).toBeUndefined();
    expect(checkNormality(new Array<number>(20).fill(0.1))).toBeUndefined();
  });
});
