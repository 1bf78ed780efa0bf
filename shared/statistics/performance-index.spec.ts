import { describe, expect, it } from 'vitest';
import { performanceIndex } from './performance-index';

describe('performanceIndex', () => {
  it('is the distance to the limit in threes of the deviation', () => {
    // mean 10, s = 1: (13 − 10) ÷ 3 = 1. Source: definition of Ppu, ISO 22514-2, from memory.
    const values = [9, 11, 9, 11, 10, 10, 9, 11, 9, 11];
    const s = Math.sqrt(8 / 9);
    expect(performanceIndex(values, 13, 0)?.value).toBeCloseTo(3 / (3 * s), 12);
  });

  it('says nothing where the spread does not exceed the resolution', () => {
    expect(performanceIndex([10, 10.1, 10], 14, 0.5)).toBeUndefined();
  });

  it('takes the rounding of the instrument out of the spread', () => {
    const values = [9, 11, 9, 11, 10, 10, 9, 11, 9, 11];
    expect(performanceIndex(values, 13, 0.5)!.value).toBeGreaterThan(performanceIndex(values, 13, 0)!.value);
  });

  it('prints the interval of its standard error', () => {
    const values = [9, 11, 9, 11, 10, 10, 9, 11, 9, 11];
    const { value, half } = performanceIndex(values, 13, 0)!;
    // Source: √(1/(9n) + P²/(2(n − 1))), rules.md 1; Bissell 1990, from memory.
    expect(half).toBeCloseTo(1.959964 * Math.sqrt(1 / 90 + value ** 2 / 18), 5);
  });

  it('warns where the values do not look normal', () => {
    const two = Array.from({ length: 40 }, (_, i) => (i % 2 === 0 ? 10 : 12));
    expect(performanceIndex(two, 14, 0)!.isNormalityDoubtful).toBe(true);
    const even = Array.from({ length: 40 }, (_, i) => 11 + 0.8 * Math.tan((i - 19.5) / 17));
    expect(performanceIndex(even, 16, 0)!.isNormalityDoubtful).toBe(false);
  });
});
