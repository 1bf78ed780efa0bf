import { indexesTouching } from './column-search';
import { formatSeconds } from './figures';
import type { LaneLayout } from './lanes';
import { groupsWidth } from './pen';
import type { InkedText } from './pen';
import { rulerSteps } from './ruler-steps';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { bottomOf, laneOf } from './sheet';
import { secondsAt, ticksAtSeconds } from './time-scale';

/** Height of the bit rule below the ruler, px. */
const BIT_RULE_PX = 13;
/** Ticks of the ruler: a label's, a half's, a tenth's. */
const TICKS_PX = { major: 9, half: 6, minor: 3.5 };

/** The Time lane: seconds of the file above, bits of the receiver below. */
export function paintRuler(sheet: Sheet): void {
  const lane = laneOf(sheet, 'time');
  if (lane === undefined) return;
  const hasBits = sheet.pxPerBit >= FROM.bitRule && sheet.model.elements > 0;
  const hasRow = lane.heightPx >= 34;
  const baseY = bottomOf(lane) - (hasRow ? BIT_RULE_PX : 1);
  paintSeconds(sheet, lane, baseY);
  if (hasRow) sheet.pen.across(sheet.leftPx, sheet.rightPx, baseY, sheet.palette.rule);
  if (hasBits && hasRow) paintBits(sheet, lane, baseY);
}

function paintSeconds(sheet: Sheet, lane: LaneLayout, baseY: number): void {
  const { pen, palette, scale, model, view } = sheet;
  const { tape } = model;
  const { minorS, decimals } = rulerSteps(scale.ticksPerPx * tape.tickS);
  const first = Math.ceil(secondsAt(tape, view.window.startTicks) / minorS);
  const last = Math.floor(secondsAt(tape, view.window.endTicks) / minorS);
  for (let i = first; i <= last; i++) {
    const x = scale.xOf(ticksAtSeconds(tape, i * minorS));
    const isMajor = i % 10 === 0;
    const height = isMajor ? TICKS_PX.major : i % 5 === 0 ? TICKS_PX.half : TICKS_PX.minor;
    pen.down(x, baseY - height, baseY, palette.ink, isMajor ? 1 : 0.8);
    if (isMajor) paintLabel(sheet, formatSeconds(i * minorS, decimals), x, lane.topPx + 12);
  }
}

function paintLabel(sheet: Sheet, groups: readonly string[], x: number, baseY: number): void {
  const { pen, palette, leftPx, rightPx } = sheet;
  const style: InkedText = { face: 'mono', sizePx: 11, weight: 400, colour: palette.ink };
  const parts = [...groups.slice(0, -1), `${groups[groups.length - 1]} s`];
  const width = groupsWidth(parts, style);
  const left = Math.max(leftPx + 4, x - width / 2);
  if (left + width <= rightPx - 2) pen.groups(parts, left, baseY, style);
}

/** Ticks a bit apart that re-seat at each start edge, as a receiver does. */
function paintBits(sheet: Sheet, lane: LaneLayout, topY: number): void {
  const { pen, palette, scale, model, view } = sheet;
  const { characters } = model.tape;
  const { startTicks, endTicks } = view.window;
  const bottom = bottomOf(lane) - 1;
  const bit = model.nominalBitTicks;
  const { first, end } = indexesTouching(characters.startTicks, characters.endTicks, startTicks, endTicks);
  let idleFrom = first > 0 ? characters.endTicks[first - 1] : startTicks;
  for (let c = first; c <= end; c++) {
    const start = c < end ? characters.startTicks[c] : endTicks;
    if (sheet.pxPerBit >= FROM.idleBits) paintIdle(sheet, idleFrom, start, bottom);
    if (c === end) break;
    pen.down(scale.xOf(start), topY, bottom, palette.ink);
    for (let n = 1; n < model.elements; n++) {
      pen.down(scale.xOf(start + n * bit), bottom - 7, bottom, palette.ink2, 0.8);
    }
    idleFrom = start + model.elements * bit;
  }
}

function paintIdle(sheet: Sheet, fromTicks: number, toTicks: number, bottom: number): void {
  const { pen, palette, scale, model, view } = sheet;
  const bit = model.nominalBitTicks;
  const skipped = Math.max(0, Math.ceil((view.window.startTicks - fromTicks) / bit));
  for (let at = fromTicks + skipped * bit; at < Math.min(toTicks, view.window.endTicks); at += bit) {
    pen.down(scale.xOf(at), bottom - 3.5, bottom, palette.rule);
  }
}
