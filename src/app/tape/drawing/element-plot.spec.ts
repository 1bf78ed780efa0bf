import { describe, expect, it } from 'vitest';
import { plotElements } from './element-plot';
import { composeModel } from './testing/composed-tape';

const script = (more: object) => ({
  name: 'element plot',
  protocol: 'M' as const,
  steps: [
    { do: 'wait' as const, ms: 300 },
    { do: 'reset' as const, widthMs: 104.2, latencyMs: 12 },
    { do: 'draw' as const, figure: 'eight' as const, size: 900, packets: 150, angle: 0 },
  ],
  ...more,
});

describe('distortion against element position', () => {
  it('rises by the rate error for each element', () => {
    // Rates: 1200 bit/s nominal; a device 1.5 % slow is late by 1.5 % of a bit more at each border.
    const plot = plotElements(composeModel(script({ rateErrorPercent: -1.5 })));
    expect(plot.slope).toBeCloseTo(1.5, 0);
    expect(Math.abs(plot.gap ?? 9)).toBeLessThan(0.3);
  });

  it('is flat and narrow for a good device', () => {
    const plot = plotElements(composeModel(script({})));
    expect(Math.abs(plot.slope ?? 9)).toBeLessThan(0.1);
    expect(plot.jitter ?? 9).toBeLessThan(0.3);
    expect(plot.borders.length).toBe(8);
  });

  it('spreads with jitter', () => {
    const plot = plotElements(composeModel(script({ jitterPercent: 3 })));
    expect(plot.jitter ?? 0).toBeGreaterThan(0.8);
    const widest = Math.max(
      ...plot.borders.flatMap(({ toMark }) => (toMark === null ? [] : [toMark.highest - toMark.lowest])),
    );
    expect(widest).toBeGreaterThan(3);
  });
});
