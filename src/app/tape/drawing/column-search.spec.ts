import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { indexesTouching } from './column-search';
import { countBefore, countUpTo } from '#shared/time/sorted-search';

const sorted = fc
  .array(fc.integer({ min: 0, max: 50 }), { maxLength: 40 })
  .map((values) => values.sort((a, b) => a - b));

describe('binary search in columns', () => {
  it('counts what a walk through the column counts', () => {
    fc.assert(
      fc.property(sorted, fc.integer({ min: -1, max: 51 }), (values, at) => {
        expect(countUpTo(values, at)).toBe(values.filter((value) => value <= at).length);
        expect(countBefore(values, at)).toBe(values.filter((value) => value < at).length);
      }),
    );
  });

  it('finds the spans that touch a window', () => {
    const starts = [0, 10, 20, 30];
    const ends = [5, 15, 25, 35];
    expect(indexesTouching(starts, ends, 12, 20)).toEqual({ first: 1, end: 3 });
    expect(indexesTouching(starts, ends, 6, 9)).toEqual({ first: 1, end: 1 });
  });
});
