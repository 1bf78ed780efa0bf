import type { Sheet } from './sheet';
import { bottomOf, laneOf } from './sheet';
import { hitTest } from './hit-test';
import type { TapeHit } from './hit-test';
import type { Rect } from './pen';
import { placeOf } from './selection-places';
import { formatSeconds } from './figures';
import { groupsWidth } from './pen';
import type { InkedText } from './pen';
import { secondsAt } from './time-scale';

/** The pointer's hairline with its time in the ruler, and a thin frame around what a click would take. */
export function paintHover(sheet: Sheet): void {
  const { view, pen, palette, leftPx, rightPx, model } = sheet;
  const { hover } = view;
  if (hover === null || hover.xPx < leftPx || hover.xPx > rightPx) return;
  const time = laneOf(sheet, 'time');
  const findings = laneOf(sheet, 'findings');
  const top = time === undefined ? 0 : bottomOf(time);
  pen.dashed(hover.xPx, top, hover.xPx, findings?.topPx ?? view.heightPx, [2, 3], palette.ink3);
  if (time !== undefined) {
    const groups = formatSeconds(secondsAt(model.tape, sheet.scale.ticksAt(hover.xPx)));
    paintTime(sheet, groups, hover.xPx, time.topPx + 12);
  }
  const hit = hitTest(model, view, sheet.lanes, hover.xPx, hover.yPx);
  const box = hit === null ? null : boxOf(sheet, hit);
  if (box !== null) pen.frame(grow(box, 2), palette.primary, 1);
}

function paintTime(sheet: Sheet, groups: readonly string[], x: number, baseY: number): void {
  const { pen, palette, leftPx, rightPx } = sheet;
  const style: InkedText = { face: 'mono', sizePx: 11, weight: 500, colour: palette.primary };
  const parts = [...groups.slice(0, -1), `${groups[groups.length - 1]} s`];
  const width = groupsWidth(parts, style);
  const left = Math.min(Math.max(leftPx + 4, x - width / 2), rightPx - width - 4);
  pen.fill({ x: left - 4, y: baseY - 11, width: width + 8, height: 15 }, palette.sheet);
  pen.groups(parts, left, baseY, style);
}

function boxOf(sheet: Sheet, hit: TapeHit): Rect | null {
  switch (hit.kind) {
    case 'finding':
    case 'packet':
    case 'character':
    case 'reset':
      return placeOf(sheet.model, sheet.view, sheet.lanes, { kind: hit.kind, index: hit.index });
    default:
      return null;
  }
}

/** The ring around what has the keyboard's focus: 2 px with a gap of 2. */
export function paintFocus(sheet: Sheet): void {
  const { focus } = sheet.view;
  if (focus === undefined || focus === null) return;
  const box = placeOf(sheet.model, sheet.view, sheet.lanes, focus);
  if (box !== null) sheet.pen.frame(grow(box, 4), sheet.palette.primary, 2);
}

/** The stretch of the ruler that is being drawn up. */
export function paintDrag(sheet: Sheet): void {
  const { drag } = sheet.view;
  if (drag === undefined || drag === null) return;
  const { ctx, pen, palette, scale, view } = sheet;
  const x0 = scale.xOf(Math.min(drag.fromTicks, drag.toTicks));
  const x1 = scale.xOf(Math.max(drag.fromTicks, drag.toTicks));
  ctx.save();
  ctx.globalAlpha = 0.1;
  pen.fill({ x: x0, y: 0, width: x1 - x0, height: view.heightPx }, palette.primary);
  ctx.restore();
  pen.down(x0, 0, view.heightPx, palette.primary);
  pen.down(x1, 0, view.heightPx, palette.primary);
}

function grow(rect: Rect, by: number): Rect {
  return { x: rect.x - by, y: rect.y - by, width: rect.width + 2 * by, height: rect.height + 2 * by };
}
