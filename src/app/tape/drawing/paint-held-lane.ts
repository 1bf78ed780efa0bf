import { heldLineY, layOutHeldBars } from './held-bars';
import type { LaneLayout } from './lanes';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { laneOf } from './sheet';
import { textWidth } from './text-measure';

const BAR_PX = 3;
const HOOK_PX = 7;
const NAME_FROM_PX = 46;

/** The lines of the buttons, under the bars. */
export function paintHeldLines(sheet: Sheet): void {
  const lane = laneOf(sheet, 'held');
  if (lane === undefined) return;
  for (let i = 0; i < sheet.model.held.length; i++) {
    const y = heldLineY(lane, i, sheet.model.held.length);
    sheet.pen.across(sheet.leftPx, sheet.rightPx, y, sheet.palette.grid);
  }
}

/** The Held lane: a bar for as long as the packets say a button was down. */
export function paintHeldLane(sheet: Sheet): void {
  const lane = laneOf(sheet, 'held');
  if (lane !== undefined) paintBars(sheet, lane);
}

function paintBars(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, model, view, leftPx } = sheet;
  let namedTo = -Infinity;
  let namedButton = -1;
  for (const bar of layOutHeldBars(model, view, lane)) {
    const x1 = Math.max(bar.x1, bar.x0 + 2);
    pen.across(bar.x0, x1, bar.y, palette.ink, BAR_PX);
    if (bar.isStartSeen) pen.down(bar.x0 + 0.5, bar.y - HOOK_PX + 1.5, bar.y + 1.5, palette.ink);
    if (bar.isEndSeen) pen.down(x1 - 0.5, bar.y - HOOK_PX + 1.5, bar.y + 1.5, palette.ink);
    if (bar.button !== namedButton) namedTo = -Infinity;
    namedButton = bar.button;
    if (sheet.pxPerBit < FROM.heldName || x1 - bar.x0 < NAME_FROM_PX || bar.x0 < namedTo) continue;
    const text = `${model.held[bar.button].letter} down`;
    const style = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink } as const;
    const x = Math.max(bar.x0, leftPx) + 5;
    pen.text(text, x, bar.y - 4, style);
    namedTo = x + textWidth(text, style);
  }
}
