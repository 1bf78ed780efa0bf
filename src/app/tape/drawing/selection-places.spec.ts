import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import { placeOf, spanOf } from './selection-places';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import { timeScaleOf } from './view';

const model = composeModel(LATE_REPLY);
const reset = model.tape.resets[1];
const reply = (reset.replyTicks ?? 0) * model.tape.tickS;
const view = viewOf(model, reply - 0.03, reply + 0.05);
const lanes = layOutLanes(model, view);

describe('placeOf', () => {
  it('finds the cell of a character, 24 tall and nine bits wide in 7N1', () => {
    const index = reset.identification[0];
    const place = placeOf(model, view, lanes, { kind: 'character', index });
    expect(place?.height).toBe(24);
    expect(place?.width).toBeCloseTo((9 * model.nominalBitTicks) / timeScaleOf(view).ticksPerPx, 6);
  });

  it('finds nothing of what is not in view', () => {
    expect(placeOf(model, view, lanes, { kind: 'packet', index: 30 })).toBeNull();
    expect(placeOf(model, view, [], { kind: 'finding', index: 0 })).toBeNull();
  });
});

describe('spanOf', () => {
  it('of a reset runs from RTS ON to the end of the identification', () => {
    expect(spanOf(model, { kind: 'reset', index: 1 })).toEqual({
      startTicks: reset.onTicks,
      endTicks: reset.identificationEndTicks,
    });
  });

  it('of a packet runs from its first start edge to its last stop element', () => {
    expect(spanOf(model, { kind: 'packet', index: 0 })).toEqual({
      startTicks: model.packetStarts[0],
      endTicks: model.packetEnds[0],
    });
  });
});
