import { describe, expect, it } from 'vitest';
import { layOutHeldBars } from './held-bars';
import { layOutLanes } from './lanes';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';
import type { TapeView } from './view';
import { timeScaleOf } from './view';

const model = composeModel(LATE_REPLY);
const [left] = model.held;
const from = left.startTicks[0] * model.tape.tickS;
const to = left.endTicks[0] * model.tape.tickS;

function barsOf(view: TapeView): ReturnType<typeof layOutHeldBars> {
  const lane = layOutLanes(model, view).find((item) => item.id === 'held');
  return lane === undefined ? [] : layOutHeldBars(model, view, lane);
}

describe('held buttons', () => {
  it('are bars from press to release with the packet that told of it', () => {
    const view = viewOf(model, from - 0.1, to + 0.1);
    const [bar] = barsOf(view);
    expect(bar).toMatchObject({ button: 0, packet: left.packets[0], isStartSeen: true, isEndSeen: true });
    expect(bar.x0).toBeCloseTo(timeScaleOf(view).xOf(left.startTicks[0]), 6);
  });

  it('are cut at the edges of the paper', () => {
    const [bar] = barsOf(viewOf(model, from + 0.1, from + 0.2));
    expect(bar).toMatchObject({ x0: 96, x1: 1044, isStartSeen: false, isEndSeen: false });
  });

  it('are named where there is room', () => {
    expect(paintAll(model, viewOf(model, from - 0.1, to + 0.1)).data.saying()).toContain('L down');
    expect(paintAll(model, viewOf(model, 0, 12)).data.saying()).not.toContain('L down');
  });
});
