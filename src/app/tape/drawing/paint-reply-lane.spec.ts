import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import { composeModel, LATE_REPLY, SILENT, viewOf } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';
import { timeScaleOf } from './view';

const model = composeModel(LATE_REPLY);
const { tickS } = model.tape;
const on = model.tape.resets[1].onTicks * tickS;
const view = viewOf(model, on - 0.02, on + 0.06);

describe('a late reply', () => {
  const { data } = paintAll(model, view);
  const scale = timeScaleOf(view);
  const lane = layOutLanes(model, view).find((item) => item.id === 'reply');
  const lineY = (lane?.topPx ?? 0) + (lane?.heightPx ?? 0) - 15;

  it('shows its figure and by how much it is over, in vermilion', () => {
    const texts = new Map(data.texts().map((text) => [text.text, text.colour]));
    expect(texts.get('15.62 ms')).toBe('violation');
    expect(texts.get('1.62 ms over')).toBe('violation');
    expect(texts.has('limit 14.00')).toBe(true);
  });

  it('draws the piece beyond the limit thick, from the limit to the reply', () => {
    const limitX = scale.xOf(model.tape.resets[1].onTicks + 0.014 / tickS);
    const replyX = scale.xOf(model.tape.resets[1].replyTicks ?? 0);
    const piece = data
      .rects('violation')
      .find(([x, , , height]) => height === 3 && Math.abs(x - limitX) < 0.01);
    expect(piece?.[2]).toBeCloseTo(replyX - limitX - 5, 3);
    expect(Math.abs((piece?.[1] ?? 0) + 1.5 - lineY)).toBeLessThanOrEqual(0.5);
  });

  it('draws the limit as a tick of 22 up and 7 down, 2 wide', () => {
    expect(
      data.rects('ink').some(([, y, width, height]) => width === 2 && height === 29 && y === lineY - 22),
    ).toBe(true);
  });
});

describe('a reply in time', () => {
  it('is in plain ink with a glyph in verdigris', () => {
    const early = model.tape.resets[0].onTicks * tickS;
    const { data } = paintAll(model, viewOf(model, early - 0.02, early + 0.06));
    expect(data.texts().find((text) => text.text === '13.10 ms')?.colour).toBe('ink');
    expect(data.saying()).not.toContain('over');
    expect(data.paths().some((path) => path.colour === 'pass')).toBe(true);
  });
});

describe('farther away', () => {
  it('glyph and figure are left', () => {
    const { data } = paintAll(model, viewOf(model, 0, 12));
    expect(data.saying()).toContain('13.10 ms');
    expect(data.saying()).not.toContain('limit 14.00');
  });

  it('a missing reply is said', () => {
    const silent = composeModel(SILENT);
    expect(paintAll(silent, viewOf(silent, 0, 0.8)).data.saying()).toContain('no reply');
  });
});
