import { indexesTouching } from './column-search';
import type { LaneLayout } from './lanes';
import type { TapeModel } from './tape-model';
import type { TapeView } from './view';
import { timeScaleOf } from './view';

/** A held button in view. */
export interface HeldBar {
  readonly button: number;
  readonly packet: number;
  readonly x0: number;
  readonly x1: number;
  readonly y: number;
  /** The press and the release lie in the window. */
  readonly isStartSeen: boolean;
  readonly isEndSeen: boolean;
}

/** Height of the line of a button: L, M, R (and the fourth) one below the other. */
export function heldLineY(lane: LaneLayout, button: number, buttons: number): number {
  const pitch = buttons > 3 ? 0.235 : 0.3;
  const first = buttons > 3 ? 0.145 : 0.2;
  return lane.topPx + lane.heightPx * (first + pitch * button);
}

export function layOutHeldBars(model: TapeModel, view: TapeView, lane: LaneLayout): HeldBar[] {
  const scale = timeScaleOf(view);
  const { startTicks, endTicks } = view.window;
  const bars: HeldBar[] = [];
  model.held.forEach((button, i) => {
    const range = indexesTouching(button.startTicks, button.endTicks, startTicks, endTicks);
    const y = heldLineY(lane, i, model.held.length);
    for (let s = range.first; s < range.end; s++) {
      const [from, to] = [button.startTicks[s], button.endTicks[s]];
      bars.push({
        button: i,
        packet: button.packets[s],
        x0: Math.max(view.gutterPx, scale.xOf(from)),
        x1: Math.min(view.widthPx, scale.xOf(to)),
        y,
        isStartSeen: from >= startTicks,
        isEndSeen: to <= endTicks && to < model.tape.endTicks,
      });
    }
  });
  return bars;
}
