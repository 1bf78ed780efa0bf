import type { Span } from '#shared/time/ticks';
import { countBefore } from '#shared/time/sorted-search';
import { formatPlain } from './figures';
import type { LaneLayout } from './lanes';
import type { Sheet } from './sheet';
import { bottomOf, laneOf } from './sheet';
import { textWidth } from './text-measure';
import type { InkedText } from './pen';

const COLUMN_PX = 4;
/** Scale of the lane, percent. */
const LEAST_PERCENT = 30;
const MOST_PERCENT = 100;
const INSET_PX = 6;

/** The Line use lane of the survey: how much of the line's time the packets of a stroke fill. */
export function paintLineUseLane(sheet: Sheet): void {
  const lane = laneOf(sheet, 'lineUse');
  if (lane === undefined) return;
  paintLimit(sheet, lane);
  paintUse(sheet, lane);
}

function heightOf(lane: LaneLayout, percent: number): number {
  const share = (Math.max(LEAST_PERCENT, percent) - LEAST_PERCENT) / (MOST_PERCENT - LEAST_PERCENT);
  return bottomOf(lane) - INSET_PX - share * (lane.heightPx - 2 * INSET_PX);
}

function paintLimit(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, leftPx, rightPx, model } = sheet;
  const limit = model.limits.lineUseLimit;
  if (limit === null) return;
  const y = heightOf(lane, limit);
  pen.dashed(leftPx, y, rightPx, y, [5, 3], palette.ribbon);
  const text = `${formatPlain(limit, 1)} %`;
  const style: InkedText = { face: 'mono', sizePx: 11, weight: 400, colour: palette.ink2, align: 'center' };
  const pause = widestPause(sheet);
  const half = textWidth(text, style) / 2 + 4;
  const x = Math.min(Math.max(pause, leftPx + half), rightPx - half);
  pen.label(text, x, y + 4, style, palette.sheet, 4);
}

/** Middle of the widest stretch in view without a stroke, px. */
function widestPause(sheet: Sheet): number {
  const { scale, model, leftPx, rightPx } = sheet;
  let from = leftPx;
  let widest = 0;
  let middle = rightPx;
  const see = (to: number): void => {
    if (to - from > widest) {
      widest = to - from;
      middle = (from + to) / 2;
    }
  };
  for (const run of model.runs) {
    const x0 = scale.xOf(run.startTicks);
    const x1 = scale.xOf(run.endTicks);
    if (x1 < leftPx || x0 > rightPx) continue;
    see(x0);
    from = x1;
  }
  see(rightPx);
  return middle;
}

function paintUse(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, scale, model, leftPx, rightPx } = sheet;
  const { used, span } = model.motion;
  const starts = model.packetStarts;
  const columnTicks = COLUMN_PX * scale.ticksPerPx;
  const first = Math.floor(scale.ticksAt(leftPx) / columnTicks);
  const last = Math.ceil(scale.ticksAt(rightPx) / columnTicks);
  let from = countBefore(starts, first * columnTicks);
  for (let column = first; column < last; column++) {
    const to = countBefore(starts, (column + 1) * columnTicks);
    const length = span[to] - span[from];
    if (length > 0) {
      const percent = Math.min(MOST_PERCENT, (100 * (used[to] - used[from])) / length);
      const middle = (column + 0.5) * columnTicks;
      const isLow = isInside(model.lowUse, middle);
      const x = scale.xOf(column * columnTicks);
      const y = heightOf(lane, percent);
      pen.across(x, x + COLUMN_PX, y, isLow ? palette.violation : palette.ink, isLow ? 2.5 : 2);
    }
    from = to;
  }
}

/** Whether an instant lies in one of the spans, which are in order of time. */
function isInside(spans: readonly Span[], ticks: number): boolean {
  return spans.some((span) => span.startTicks <= ticks && span.endTicks >= ticks);
}
