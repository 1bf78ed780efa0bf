import type { InkedText } from './pen';
import type { Sheet } from './sheet';
import { laneOf } from './sheet';
import { textWidth } from './text-measure';

const HOOK_PX = 5;
const TEXT: Omit<InkedText, 'colour'> = { face: 'sans', sizePx: 11, weight: 400 };

/** What a person states about a stretch, as a bracket with its name in the lane of the dividers. */
export function paintStatedSpans(sheet: Sheet): void {
  const lane = laneOf(sheet, 'dividers');
  if (lane === undefined) return;
  const { pen, palette, scale, model, leftPx, rightPx } = sheet;
  const y = lane.topPx + lane.heightPx - 5;
  for (const { startTicks, endTicks, name } of model.stated) {
    const x0 = scale.xOf(startTicks);
    const x1 = scale.xOf(endTicks);
    if (x1 < leftPx || x0 > rightPx) continue;
    const from = Math.max(leftPx, x0);
    const to = Math.min(rightPx, x1);
    pen.across(from, to, y, palette.ink2, 2);
    if (x0 >= leftPx) pen.down(x0, y - HOOK_PX, y + 1, palette.ink2, 2);
    if (x1 <= rightPx) pen.down(x1, y - HOOK_PX, y + 1, palette.ink2, 2);
    const style = { ...TEXT, colour: palette.ink2 };
    const width = textWidth(name, style);
    if (to - from > width + 16) pen.label(name, (from + to - width) / 2, y - 3, style, palette.sheet, 2);
  }
}
