import { describe, expect, it } from 'vitest';
import { handleOf, hitStrip, paintStrip, stripTicksAt } from './strip';
import type { StripView } from './strip';
import { composeModel, LATE_REPLY, NAMED_PALETTE } from './testing/composed-tape';
import { RecordingContext } from './testing/recording-context';

const model = composeModel(LATE_REPLY);
const end = model.tape.endTicks;
const viewOf = (startTicks: number, endTicks: number): StripView => ({
  window: { startTicks, endTicks },
  widthPx: 1044,
  heightPx: 46,
  gutterPx: 96,
});

describe('the handle of the strip', () => {
  it('covers the window', () => {
    expect(handleOf(model, viewOf(end / 2, end))).toEqual({ x0: 96 + 474, x1: 1044 });
  });

  it('is never narrower than 12 px and never leaves the strip', () => {
    const { x0, x1 } = handleOf(model, viewOf(0, end / 10_000));
    expect([x0, x1]).toEqual([96, 108]);
    const last = handleOf(model, viewOf(end * 0.9999, end));
    expect([last.x0, last.x1]).toEqual([1032, 1044]);
  });

  it('has grips that reach farther than they are drawn', () => {
    const view = viewOf(end / 4, end / 2);
    const { x0, x1 } = handleOf(model, view);
    expect(
      [x0 - 8, x0 + 2, (x0 + x1) / 2, x1 - 2, x1 + 8, x1 + 40].map((x) => hitStrip(model, view, x)),
    ).toEqual(['left-grip', 'left-grip', 'handle', 'right-grip', 'right-grip', 'outside']);
  });
});

describe('the strip', () => {
  it('tells the tick at a place and stays within the record', () => {
    const view = viewOf(0, end);
    expect(stripTicksAt(model, view, 96 + 474)).toBeCloseTo(end / 2, 3);
    expect(stripTicksAt(model, view, 10)).toBe(0);
    expect(stripTicksAt(model, view, 5000)).toBe(end);
  });

  it('draws density in the ribbon colour and the violation as a diamond', () => {
    const recording = new RecordingContext();
    paintStrip(recording.ctx, model, viewOf(0, end), NAMED_PALETTE);
    const bars = recording.of('fillRect').filter((call) => call.fillStyle === 'ribbon');
    expect(bars.length).toBeGreaterThan(40);
    expect(bars.every((call) => (call.args[3] as number) >= 1 && (call.args[3] as number) <= 18.1)).toBe(
      true,
    );
    const violations = model.findings.filter((finding) => finding.verdict === 'violation').length;
    const diamonds = recording.of('moveTo').filter((call) => call.fillStyle === 'violation');
    expect(violations).toBeGreaterThan(0);
    expect(diamonds.length).toBeGreaterThan(0);
    expect(diamonds.length).toBeLessThanOrEqual(violations);
    expect(recording.saying()).toBe('Whole tape');
  });
});
