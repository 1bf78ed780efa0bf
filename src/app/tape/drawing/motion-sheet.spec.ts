import { describe, expect, it } from 'vitest';
import { hitMotion, layOutMotion, paintMotion } from './motion-sheet';
import { composeModel, LATE_REPLY, NAMED_PALETTE, SILENT } from './testing/composed-tape';
import { RecordingContext } from './testing/recording-context';

const model = composeModel(LATE_REPLY);
const layout = layOutMotion(model, 292, 250);
const window = { startTicks: 0, endTicks: model.tape.endTicks };

describe('the motion sheet', () => {
  it('sums the packets with y growing downward, as the device counts', () => {
    const { dx, dy } = model.tape.packets;
    expect(layout.x[1] - layout.x[0]).toBeCloseTo(dx[0] * layout.pxPerCount, 3);
    expect(layout.y[1] - layout.y[0]).toBeCloseTo(dy[0] * layout.pxPerCount, 3);
    expect(dy[0]).toBeLessThan(0);
    expect(layout.y[1]).toBeLessThan(layout.y[0]);
  });

  it('keeps the whole path on the sheet', () => {
    expect(Math.min(...layout.x, ...layout.y)).toBeGreaterThanOrEqual(25.9);
    expect(Math.max(...layout.x)).toBeLessThanOrEqual(266.1);
    expect(Math.max(...layout.y)).toBeLessThanOrEqual(224.1);
  });

  it('finds the packet that led to a point, and none far from the path', () => {
    expect(hitMotion(layout, layout.x[21] + 0.5, layout.y[21])).toBe(20);
    expect(hitMotion(layout, -50, -50)).toBeNull();
  });

  it('draws start, end and the scale, the held stretch as a band of 13 percent', () => {
    const recording = new RecordingContext();
    paintMotion(recording.ctx, layout, { window, selection: null }, NAMED_PALETTE);
    expect(recording.saying()).toContain('start');
    expect(recording.saying()).toMatch(/\d+ counts/);
    expect(recording.of('stroke').some((call) => call.alpha === 0.13 && call.strokeStyle === 'ink')).toBe(
      true,
    );
  });

  it('marks the window only where it is a part of the tape', () => {
    const inPrimary = (to: number): number => {
      const recording = new RecordingContext();
      paintMotion(
        recording.ctx,
        layout,
        { window: { startTicks: 0, endTicks: to }, selection: null },
        NAMED_PALETTE,
      );
      return recording.of('stroke').filter((call) => call.strokeStyle === 'primary').length;
    };
    expect(inPrimary(model.tape.endTicks)).toBe(0);
    expect(inPrimary(model.packetStarts[10])).toBe(1);
  });

  it('says when there is no movement', () => {
    const recording = new RecordingContext();
    const empty = layOutMotion(composeModel(SILENT), 292, 250);
    paintMotion(recording.ctx, empty, { window, selection: null }, NAMED_PALETTE);
    expect(recording.saying()).toBe('No movement');
    expect(hitMotion(empty, 146, 125)).toBeNull();
  });
});
