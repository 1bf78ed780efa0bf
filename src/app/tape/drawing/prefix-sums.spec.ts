import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { TapeLine } from '#shared/contract/tape-payload';
import { spaceUpTo, sumSpace, sumUsed, usedUpTo } from './prefix-sums';

function lineOf(initialLevel: number, steps: readonly [number, number][]): TapeLine {
  let at = 0;
  const ticks = steps.map(([step]) => (at += step));
  return {
    role: 'data',
    channel: 'data',
    polarity: 'line',
    initialLevel,
    ticks: Float64Array.from(ticks),
    levels: Uint8Array.from(steps.map(([, level]) => level)),
  };
}

describe('ticks at space', () => {
  it('are those a walk along the line adds up', () => {
    const steps = fc.array(fc.tuple(fc.integer({ min: 1, max: 9 }), fc.integer({ min: 0, max: 2 })), {
      maxLength: 20,
    });
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 2 }),
        steps,
        fc.integer({ min: 0, max: 120 }),
        (first, list, at) => {
          const line = lineOf(first, list);
          let walked = 0;
          for (let t = 0; t < at; t++) {
            let level = first;
            line.ticks.forEach((edge, i) => {
              if (edge <= t) level = line.levels[i];
            });
            if (level === 0) walked += 1;
          }
          expect(spaceUpTo(line, sumSpace(line), at)).toBe(walked);
        },
      ),
    );
  });
});

describe('ticks taken by characters', () => {
  const characters = {
    count: 2,
    startTicks: Float64Array.from([100, 300]),
    endTicks: Float64Array.from([190, 390]),
    values: new Uint8Array(2),
    errors: new Uint8Array(2),
    startEdge: new Int32Array(2),
  };

  it('grow inside characters only', () => {
    const sums = sumUsed(characters);
    const at = (ticks: number): number => usedUpTo(characters, sums, ticks);
    expect([0, 100, 150, 190, 250, 345, 1000].map(at)).toEqual([0, 0, 50, 90, 90, 135, 180]);
  });
});
