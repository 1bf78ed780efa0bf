import { describe, expect, it } from 'vitest';
import {
  TimeScale,
  measuredBitTicks,
  nominalBitTicks,
  pxPerBit,
  secondsAt,
  ticksAtSeconds,
} from './time-scale';

const FRAMING = { bitRate: 1212, nominalBitRate: 1200, dataBits: 7, parity: 'none', stopBits: 1 } as const;

describe('TimeScale', () => {
  const scale = new TimeScale({ startTicks: 1000, endTicks: 3000 }, 400, 96);

  it('puts the window between the origin and the end of the paper', () => {
    expect(scale.xOf(1000)).toBe(96);
    expect(scale.xOf(3000)).toBe(496);
    expect(scale.ticksPerPx).toBe(5);
  });

  it('finds the tick back from its place', () => {
    for (const ticks of [1000, 1234.5, 2999]) expect(scale.ticksAt(scale.xOf(ticks))).toBeCloseTo(ticks, 9);
  });
});

describe('pxPerBit', () => {
  it('is counted at the nominal rate: 833.33 µs a bit at 1200 bit/s', () => {
    const tape = { tickS: 1e-6, framing: FRAMING };
    expect(nominalBitTicks(tape)).toBeCloseTo(833.333, 3);
    expect(measuredBitTicks(tape)).toBeCloseTo(825.083, 3);
    expect(pxPerBit(tape, { startTicks: 0, endTicks: 83_333.333333333 }, 1000)).toBe(10);
  });

  it('assumes 1200 bit/s where no rate was found', () => {
    expect(nominalBitTicks({ tickS: 1e-6, framing: null })).toBeCloseTo(833.333, 3);
  });

  it('hits the scale a window was made for in spite of rounding', () => {
    const tape = { tickS: 1e-9, framing: FRAMING };
    const half = (nominalBitTicks(tape) * 948) / 8 / 2;
    expect(pxPerBit(tape, { startTicks: 7.6e8 - half, endTicks: 7.6e8 + half }, 948)).toBe(8);
  });
});

describe('seconds of the file', () => {
  it('count from the origin of its clock', () => {
    const tape = { tickS: 1e-6, originS: -0.5 };
    expect(secondsAt(tape, 250_000)).toBeCloseTo(-0.25, 12);
    expect(ticksAtSeconds(tape, -0.25)).toBeCloseTo(250_000, 6);
  });
});
