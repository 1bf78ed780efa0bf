import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { roundStep, rulerSteps } from './ruler-steps';

describe('roundStep', () => {
  it('is the next 1, 2 or 5 times a power of ten', () => {
    expect([0.003, 0.05, 1, 1.1, 3, 6].map(roundStep)).toEqual([0.005, 0.05, 1, 2, 5, 10]);
  });
});

describe('rulerSteps', () => {
  it('keeps labels at least 92 px apart and not more than two and a half times that', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-8, max: 10, noNaN: true }), (secondsPerPx) => {
        const { majorS, minorS } = rulerSteps(secondsPerPx);
        expect(majorS / secondsPerPx).toBeGreaterThanOrEqual(91.99);
        expect(majorS / secondsPerPx).toBeLessThan(92 * 2.51);
        expect(minorS).toBeCloseTo(majorS / 10, 12);
      }),
    );
  });

  it('gives labels the decimals their step needs', () => {
    expect(rulerSteps(0.0001).decimals).toBe(2);
    expect(rulerSteps(0.000_05).decimals).toBe(3);
    expect(rulerSteps(0.05).decimals).toBe(0);
  });
});
