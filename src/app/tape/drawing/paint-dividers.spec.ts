import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import { layOutPackets } from './packet-marks';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';
import { ticksAtSeconds } from './time-scale';

const model = composeModel(LATE_REPLY);
const at = (seconds: number): number => ticksAtSeconds(model.tape, seconds);
const start = model.packetStarts[0] * model.tape.tickS;

describe('dividers', () => {
  it('say their span on the beam between them', () => {
    const view = viewOf(model, start - 0.02, start + 0.06, {
      dividers: { a: at(start), b: at(start + 0.0254) },
    });
    expect(paintAll(model, view).overlay.saying()).toBe('25.40 ms | 30.5 bits | 39.4 Hz | A | B');
  });

  it('pass under flags', () => {
    const dividers = { a: model.packetStarts[0] + 2000, b: null };
    const view = viewOf(model, start - 0.02, start + 0.06, { dividers });
    const lane = layOutLanes(model, view).find((item) => item.id === 'packets');
    const flag =
      lane === undefined
        ? undefined
        : layOutPackets(model, view, lane).find((mark) => mark.kind === 'packet');
    const pieces = paintAll(model, view)
      .overlay.rects('primary')
      .filter(([, , width]) => width === 1);
    expect(pieces).toHaveLength(2);
    const [above, below] = pieces;
    expect(above[1] + above[3]).toBe(flag?.rect.y);
    expect(below[1]).toBe((flag?.rect.y ?? 0) + (flag?.rect.height ?? 0));
  });

  it('outside the window leave no blade behind', () => {
    const view = viewOf(model, start, start + 0.02, { dividers: { a: at(0), b: null } });
    expect(paintAll(model, view).overlay.texts()).toEqual([]);
  });
});

describe('the pointer', () => {
  it('reads the time in the ruler, in groups', () => {
    const view = viewOf(model, 0.4, 0.5, { hover: { xPx: 96 + 474, yPx: 100 } });
    const said = paintAll(model, view)
      .overlay.texts()
      .map((text) => text.text);
    expect(said).toEqual(['0.450', '000 s']);
  });

  it('leaves the gutter alone', () => {
    const view = viewOf(model, 0.4, 0.5, { hover: { xPx: 40, yPx: 100 } });
    expect(paintAll(model, view).overlay.texts()).toEqual([]);
  });
});

describe('the focus', () => {
  it('is a ring of 2 px with a gap of 2 around the thing', () => {
    const view = viewOf(model, start - 0.02, start + 0.06, { focus: { kind: 'packet', index: 0 } });
    const [top] = paintAll(model, view).overlay.rects('primary');
    expect(top[3]).toBe(2);
    expect(top[2]).toBeCloseTo(136 + 8, 0);
  });
});
