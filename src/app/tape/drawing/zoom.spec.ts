import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { pxPerBit } from './time-scale';
import {
  clampWindow,
  fitWindow,
  panBy,
  stepFactor,
  windowAtScale,
  windowLimits,
  zoomAt,
  ZOOM_STEPS,
} from './zoom';

const TAPE = {
  tickS: 1e-6,
  endTicks: 30_000_000,
  framing: { bitRate: 1200, nominalBitRate: 1200, dataBits: 7, parity: 'none', stopBits: 1 },
} as const;
const LIMITS = windowLimits(TAPE, 948);

describe('zoomAt', () => {
  it('keeps the focus at its place on the screen', () => {
    const window = { startTicks: 1_000_000, endTicks: 3_000_000 };
    const zoomed = zoomAt(window, 2, 1_500_000, LIMITS);
    expect(zoomed).toEqual({ startTicks: 1_250_000, endTicks: 2_250_000 });
  });

  it('goes no closer than 120 px a bit', () => {
    const closest = zoomAt({ startTicks: 0, endTicks: 1e6 }, 1e9, 5e5, LIMITS);
    expect(pxPerBit(TAPE, closest, 948)).toBe(120);
  });

  it('never leaves the record', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 3e7, noNaN: true }),
        fc.double({ min: 10, max: 3e7, noNaN: true }),
        fc.double({ min: 0.01, max: 100, noNaN: true }),
        (start, length, factor) => {
          const window = clampWindow({ startTicks: start, endTicks: start + length }, LIMITS);
          const { startTicks, endTicks } = zoomAt(window, factor, start, LIMITS);
          expect(startTicks).toBeGreaterThanOrEqual(0);
          expect(endTicks).toBeLessThanOrEqual(TAPE.endTicks + 1e-3);
          expect(endTicks - startTicks).toBeGreaterThanOrEqual(LIMITS.shortestTicks - 1e-6);
        },
      ),
    );
  });
});

describe('panBy', () => {
  it('moves by a share of the window and stops at the ends', () => {
    const window = { startTicks: 1_000_000, endTicks: 2_000_000 };
    expect(panBy(window, 0.1, LIMITS)).toEqual({ startTicks: 1_100_000, endTicks: 2_100_000 });
    expect(panBy(window, -5, LIMITS)).toEqual({ startTicks: 0, endTicks: 1_000_000 });
    expect(panBy(window, 500, LIMITS).endTicks).toBe(TAPE.endTicks);
  });
});

describe('fitWindow', () => {
  it('leaves a margin on both sides', () => {
    expect(fitWindow(1e6, 2e6, LIMITS, 0.1)).toEqual({ startTicks: 900_000, endTicks: 2_100_000 });
  });

  it('shows the whole tape where more was asked', () => {
    expect(fitWindow(0, TAPE.endTicks, LIMITS)).toEqual({ startTicks: 0, endTicks: TAPE.endTicks });
  });
});

describe('the steps of the zoom keys', () => {
  it('run 1-2-5 from 0.0004 to 120 px a bit', () => {
    expect(ZOOM_STEPS[0]).toBe(0.0004);
    expect(ZOOM_STEPS).toContain(0.05);
    expect(ZOOM_STEPS).toContain(20);
    expect(ZOOM_STEPS.at(-1)).toBe(120);
  });

  it('go to the next step whatever the scale is now', () => {
    expect(10 * stepFactor(10, 1)).toBeCloseTo(20, 9);
    expect(10 * stepFactor(10, -1)).toBeCloseTo(5, 9);
    expect(7.3 * stepFactor(7.3, 1)).toBeCloseTo(10, 9);
    expect(stepFactor(120, 1)).toBe(1);
  });
});

describe('windowAtScale', () => {
  it('makes a window of the scale around an instant', () => {
    const window = windowAtScale(TAPE, 948, 10, 5e6);
    expect(pxPerBit(TAPE, window, 948)).toBe(10);
    expect((window.startTicks + window.endTicks) / 2).toBeCloseTo(5e6, 3);
  });
});
