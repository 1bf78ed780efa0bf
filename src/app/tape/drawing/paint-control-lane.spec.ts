import { describe, expect, it } from 'vitest';
import type { TapeLine } from '#shared/contract/tape-payload';
import { isRibbon, piecesOf } from './control-ribbons';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';

const line: TapeLine = {
  role: 'rts',
  channel: 'rts',
  polarity: 'line',
  initialLevel: 0,
  ticks: Float64Array.from([100, 200, 300]),
  levels: Uint8Array.from([1, 2, 0]),
};

describe('pieces of a line', () => {
  it('cover the window without gaps', () => {
    expect(piecesOf(line, 50, 250)).toEqual([
      { startTicks: 50, endTicks: 100, level: 0 },
      { startTicks: 100, endTicks: 200, level: 1 },
      { startTicks: 200, endTicks: 250, level: 2 },
    ]);
    expect(piecesOf(line, 120, 130)).toEqual([{ startTicks: 120, endTicks: 130, level: 1 }]);
  });

  it('are thick while ON, or at space on a data line, never while unknown', () => {
    expect([0, 1, 2].map((level) => isRibbon(level, false))).toEqual([false, true, false]);
    expect([0, 1, 2].map((level) => isRibbon(level, true))).toEqual([true, false, false]);
  });
});

describe('the RTS lane', () => {
  const model = composeModel(LATE_REPLY);
  const { onTicks, offTicks } = model.tape.resets[1];

  it('writes the width of a pulse over its hairline', () => {
    const view = viewOf(model, offTicks * 1e-6 - 0.05, onTicks * 1e-6 + 0.05);
    expect(model.tape.tickS).toBe(1e-6);
    expect(paintAll(model, view).data.saying()).toContain('reset 104.2 ms');
  });

  it('says that a pulse may have been longer where its beginning is not in the record', () => {
    expect(paintAll(model, viewOf(model, 0, 0.4)).data.saying()).toContain('reset at least 254.2 ms');
  });

  it('has ribbons 8 px thick with posts of 2 by 16 at each change', () => {
    const { data } = paintAll(model, viewOf(model, onTicks * 1e-6 - 0.02, onTicks * 1e-6 + 0.06));
    const rects = data.rects('ribbon');
    expect(rects.some(([, , width, height]) => height === 8 && width > 500)).toBe(true);
    expect(rects.some(([, , width, height]) => width === 2 && height === 16)).toBe(true);
  });
});
