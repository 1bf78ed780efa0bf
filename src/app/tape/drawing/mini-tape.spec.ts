import { describe, expect, it } from 'vitest';
import { paintMiniTape } from './mini-tape';
import { NAMED_PALETTE } from './testing/composed-tape';
import { RecordingContext } from './testing/recording-context';

describe('the tiny tape of a row', () => {
  it('draws a bar for each third px, none where the line rests, none above its full height', () => {
    const recording = new RecordingContext();
    const columns = [...new Array<number>(100).fill(0), ...new Array<number>(100).fill(1)];
    paintMiniTape(recording.ctx, columns, [], NAMED_PALETTE, 120, 26);
    const bars = recording.of('rect').map((call) => call.args as number[]);
    expect(bars).toHaveLength(20);
    expect(bars.every(([x, y]) => x >= 60 && y >= 1)).toBe(true);
  });

  it('keeps marks on the canvas, a diamond for a violation and a square for an undecided place', () => {
    const recording = new RecordingContext();
    const marks = [
      { at: 0, verdict: 'violation' },
      { at: 1, verdict: 'inconclusive' },
    ] as const;
    paintMiniTape(recording.ctx, [], marks, NAMED_PALETTE, 120, 26);
    const xs = recording.of('lineTo').map((call) => call.args[0] as number);
    expect(Math.min(...xs)).toBeGreaterThanOrEqual(0);
    const [[x, , width]] = recording.rects('open');
    expect(x + width).toBeLessThanOrEqual(120);
  });
});
