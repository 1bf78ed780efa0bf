import type { TapeLine } from '#shared/contract/tape-payload';
import { isDataRole } from '#shared/line/digital-trace';
import { UNKNOWN } from '#shared/line/level-trace';
import type { LineRole } from '#shared/line/line-map';
import { isRibbon, piecesOf } from './control-ribbons';
import { formatFigure } from './figures';
import type { LaneLayout } from './lanes';
import type { Sheet } from './sheet';
import { laneOf, middleOf } from './sheet';
import { textWidth } from './text-measure';

export const CONTROL_ROLES = [
  'rts',
  'dtr',
  'txd',
  'dsr',
  'supply',
  'contact',
  'ready',
] as const satisfies LineRole[];

const RIBBON_PX = 8;
const POST_PX = { width: 2, height: 16 };

/** Ribbons of RTS, DTR and whatever else is mapped: filled while ON (or at space), a hairline while OFF (or at mark). */
export function paintControlLanes(sheet: Sheet): void {
  for (const role of CONTROL_ROLES) {
    const lane = laneOf(sheet, role);
    const line = sheet.model.lines[role];
    if (lane !== undefined && line !== undefined) paintLine(sheet, lane, line, isDataRole(role));
  }
  const rts = laneOf(sheet, 'rts');
  if (rts !== undefined) paintPulses(sheet, rts);
}

function paintLine(sheet: Sheet, lane: LaneLayout, line: TapeLine, isData: boolean): void {
  const { pen, palette, scale, view, leftPx, rightPx } = sheet;
  const y = middleOf(lane);
  const start = Math.max(0, view.window.startTicks);
  const end = Math.min(sheet.model.tape.endTicks, view.window.endTicks);
  for (const piece of piecesOf(line, start, end)) {
    const x0 = Math.max(leftPx, scale.xOf(piece.startTicks));
    const x1 = Math.min(rightPx, scale.xOf(piece.endTicks));
    if (piece.level === UNKNOWN) {
      pen.hatch([{ x: x0, y: y - RIBBON_PX / 2, width: x1 - x0, height: RIBBON_PX }], palette.ink3);
    } else if (isRibbon(piece.level, isData)) pen.across(x0, x1, y, palette.ribbon, RIBBON_PX);
    else pen.across(x0, x1, y, palette.ribbon);
    if (piece.startTicks > start && !isData) {
      pen.down(x0 + 0.5, y - POST_PX.height / 2, y + POST_PX.height / 2, palette.ribbon, POST_PX.width);
    }
  }
}

/** The width of each reset pulse over its hairline; the word alone in the survey. */
function paintPulses(sheet: Sheet, lane: LaneLayout): void {
  const { model, view, scale, leftPx } = sheet;
  const { resets, tickS } = model.tape;
  const isSurvey = sheet.scaleName === 'survey';
  let takenTo = -Infinity;
  for (const reset of resets) {
    if (reset.onTicks < view.window.startTicks || reset.offTicks > view.window.endTicks) continue;
    const x0 = Math.max(leftPx, scale.xOf(reset.offTicks));
    const x1 = scale.xOf(reset.onTicks);
    const width = (reset.onTicks - reset.offTicks) * tickS * 1e3;
    const least = reset.isPulseStartSeen ? '' : 'at least ';
    const text = isSurvey ? 'reset' : `reset ${least}${formatFigure(width, 1)} ms`;
    takenTo = Math.max(takenTo, paintPulse(sheet, lane, { x0, x1, text, takenTo, isSurvey }));
    if (reset.offTicks < view.window.startTicks) {
      sheet.pen.arrowhead(leftPx, middleOf(lane), Math.PI, sheet.palette.ribbon, 8);
    }
  }
}

interface Pulse {
  readonly x0: number;
  readonly x1: number;
  readonly text: string;
  readonly takenTo: number;
  readonly isSurvey: boolean;
}

/** Writes the label of one pulse where there is room; returns how far it reaches. */
function paintPulse(sheet: Sheet, lane: LaneLayout, pulse: Pulse): number {
  const { pen, palette, leftPx, rightPx } = sheet;
  const style = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink } as const;
  const width = textWidth(pulse.text, style);
  const baseY = middleOf(lane) - (pulse.isSurvey ? 7 : 8);
  // Over its hairline where it fits, else right of the post.
  const isInside = !pulse.isSurvey && pulse.x1 - pulse.x0 >= width - 10;
  const x = isInside ? Math.max(leftPx + 6, (pulse.x0 + pulse.x1 - width) / 2) : pulse.x1 + 5;
  if (x < pulse.takenTo || x + width > rightPx - 2) return -Infinity;
  if (pulse.isSurvey) pen.text(pulse.text, x, baseY, style);
  else pen.label(pulse.text, x, baseY, style, palette.sheet, 2);
  return x + width + 8;
}
