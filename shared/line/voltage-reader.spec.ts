import { describe, expect, it } from 'vitest';
import type { AnalogChannel, SampleTimes } from '../capture/capture';
import { VoltageReader } from './voltage-reader';

function channel(values: number[], times: SampleTimes, isStepped = false): AnalogChannel {
  return { kind: 'analog', name: 'v', aliases: [], times, values: Float32Array.from(values), isStepped };
}

const uniform = (count: number): SampleTimes => ({ kind: 'uniform', startTicks: 5, stepTicks: 10, count });
const listed = (...ticks: number[]): SampleTimes => ({ kind: 'listed', ticks: Float64Array.from(ticks) });

describe('VoltageReader', () => {
  it.each([
    ['even', uniform(4)],
    ['listed', listed(5, 15, 25, 35)],
  ])('finds samples by time: %s', (_name, times) => {
    const reader = new VoltageReader(channel([1, 2, 3, 4], times));
    expect([0, 5, 6, 15, 35, 36].map((at) => reader.firstFrom(at))).toEqual([0, 0, 1, 1, 3, 4]);
    expect(reader.stepTicks).toBe(10);
    expect(reader.timeOf(2)).toBe(25);
  });

  it('takes the median of a stretch, its end left out', () => {
    const reader = new VoltageReader(channel([9, 1, 5, 7], uniform(4)));
    expect(reader.median(5, 35, 1)).toBe(5);
    expect(reader.median(5, 36, 1)).toBe(6);
    expect(reader.median(5, 25, 3)).toBeUndefined();
  });

  it('leaves out what is no number', () => {
    const reader = new VoltageReader(channel([NaN, 2, NaN, 4], uniform(4)));
    expect(reader.median(0, 100, 1)).toBe(3);
    expect(reader.median(0, 100, 3)).toBeUndefined();
  });

  it('holds a step until the next one', () => {
    const reader = new VoltageReader(channel([0, 6, 3], listed(0, 10, 20), true));
    expect(reader.median(12, 18, 3)).toBe(6);
    expect(reader.median(30, 40, 3)).toBe(3);
  });
});
