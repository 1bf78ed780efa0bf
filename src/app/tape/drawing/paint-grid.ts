import { rulerSteps } from './ruler-steps';
import type { Sheet } from './sheet';
import { bottomOf, laneOf } from './sheet';
import { secondsAt, ticksAtSeconds } from './time-scale';

/** The paper: fine grid in real time on the sheet's colour. The findings stand on plain paper below it. */
export function paintGrid(sheet: Sheet): void {
  const { pen, palette, leftPx, rightPx, view } = sheet;
  pen.fill({ x: leftPx, y: 0, width: rightPx - leftPx, height: view.heightPx }, palette.sheet);
  const { top, bottom } = gridSpan(sheet);
  if (bottom <= top) return;
  const { tape } = sheet.model;
  const { majorS, minorS } = rulerSteps(sheet.scale.ticksPerPx * tape.tickS);
  paintAcross(sheet, top, bottom, minorS / tape.tickS / sheet.scale.ticksPerPx);
  paintDown(sheet, top, bottom, minorS, palette.gridMinor);
  paintDown(sheet, top, bottom, majorS, palette.grid);
}

function gridSpan(sheet: Sheet): { top: number; bottom: number } {
  const time = laneOf(sheet, 'time');
  const findings = laneOf(sheet, 'findings');
  const last = sheet.lanes.at(-1);
  const isTimeFirst = time !== undefined && time.topPx === 0;
  return {
    top: isTimeFirst ? bottomOf(time) : 0,
    bottom: findings !== undefined && findings === last ? findings.topPx : sheet.view.heightPx,
  };
}

function paintAcross(sheet: Sheet, top: number, bottom: number, pitchPx: number): void {
  const { pen, palette, leftPx, rightPx } = sheet;
  for (let y = top + pitchPx; y < bottom; y += pitchPx) pen.across(leftPx, rightPx, y, palette.gridMinor);
}

function paintDown(sheet: Sheet, top: number, bottom: number, stepS: number, colour: string): void {
  const { pen, scale, view } = sheet;
  const { tape } = sheet.model;
  const first = Math.ceil(secondsAt(tape, view.window.startTicks) / stepS);
  const last = Math.floor(secondsAt(tape, view.window.endTicks) / stepS);
  for (let i = first; i <= last; i++) {
    pen.down(scale.xOf(ticksAtSeconds(tape, i * stepS)), top, bottom, colour);
  }
}

/** The ruled lines between the lanes, through gutter and paper. */
export function paintLaneRules(sheet: Sheet): void {
  const { pen, palette, view, leftPx } = sheet;
  for (const lane of sheet.lanes) {
    const y = bottomOf(lane) - 0.5;
    const isBeforeFindings = sheet.lanes.some(
      (below) => below.id === 'findings' && below.topPx === bottomOf(lane),
    );
    pen.across(0, leftPx, y, lane.id === 'time' ? palette.surface : palette.rule);
    if (lane.id === 'time' || isBeforeFindings) pen.across(leftPx, view.widthPx, y, palette.ink);
    else if (lane !== sheet.lanes.at(-1)) pen.across(leftPx, view.widthPx, y, palette.rule);
  }
}
