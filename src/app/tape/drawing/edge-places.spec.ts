import { describe, expect, it } from 'vitest';
import type { Tape, TapeLine } from '#shared/contract/tape-payload';
import { edgesOfCharacter, worstEdge } from './edge-places';

/** 4D (1001101) in 7N1 with 1000 ticks a bit; the edge at the third border comes 50 ticks late. */
const line: TapeLine = {
  role: 'data',
  channel: 'rxd',
  polarity: 'line',
  initialLevel: 1,
  ticks: Float64Array.from([0, 1000, 2000, 3050, 5000, 7000, 12_000]),
  levels: Uint8Array.from([0, 1, 0, 1, 0, 1, 0]),
};
const tape = {
  framing: { bitRate: 1000, nominalBitRate: 1000, dataBits: 7, parity: 'none', stopBits: 1 },
  characters: { startEdge: Int32Array.from([0, -1]) },
} as unknown as Tape;

describe('edgesOfCharacter', () => {
  it('names the border and how late each edge is, in percent of a bit (terms of ITU-T R.140, from memory)', () => {
    const edges = edgesOfCharacter(tape, line, 0, 1000, 1000);
    expect(edges.map((edge) => [edge.border, Number(edge.displacement.toFixed(6))])).toEqual([
      [1, 0],
      [2, 0],
      [3, 5],
      [5, 0],
      [7, 0],
    ]);
    expect(worstEdge(edges)?.ticks).toBe(3050);
  });

  it('takes the due places from the rate asked for', () => {
    const [first, , third] = edgesOfCharacter(tape, line, 0, 1000, 1010);
    expect(first.dueTicks).toBe(1010);
    expect(third.displacement).toBeCloseTo(100 * (3050 / 1010 - 3), 9);
  });

  it('is empty for a byte log, which has no edges', () => {
    expect(edgesOfCharacter(tape, line, 1, 1000, 1000)).toEqual([]);
    expect(worstEdge([])).toBeUndefined();
  });
});
