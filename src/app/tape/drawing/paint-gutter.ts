import type { LaneLayout } from './lanes';
import { edgeLimit, edgeScale, referenceName } from './edge-stems';
import { formatSigned } from './figures';
import { heldLineY } from './held-bars';
import { hasFlags, stickPin } from './packet-vectors';
import type { Sheet } from './sheet';
import { middleOf } from './sheet';
import type { InkedText } from './pen';

const LINE_PX = 15;

/** The gutter: the name of each lane, what it holds, and the scale of what is drawn in it. */
export function paintGutter(sheet: Sheet): void {
  const { pen, palette, view, lanes } = sheet;
  if (view.gutterPx <= 0) return;
  pen.fill({ x: 0, y: 0, width: view.gutterPx, height: view.heightPx }, palette.surface);
  for (const lane of lanes) {
    paintName(sheet, lane);
    if (lane.id === 'held') paintButtons(sheet, lane);
    if (lane.id === 'edges') paintEdgeLimits(sheet, lane);
  }
}

export function paintGutterEdge(sheet: Sheet): void {
  const { pen, palette, view } = sheet;
  if (view.gutterPx > 0) pen.down(view.gutterPx - 0.5, 0, view.heightPx, palette.ink);
}

/** Left inset of the names, px. */
function insetOf(gutterPx: number): number {
  if (gutterPx >= 96) return 20;
  return gutterPx >= 80 ? 14 : 8;
}

function paintName(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, view } = sheet;
  const x = insetOf(view.gutterPx);
  const middle = middleOf(lane);
  const name: InkedText = { face: 'sans', sizePx: view.isPhone ? 11 : 12, weight: 500, colour: palette.ink };
  const sub: InkedText = { face: 'sans', sizePx: 11, weight: 400, colour: palette.ink2 };
  const lines = lane.subName === '' ? 1 : lane.id === 'edges' ? 3 : 2;
  const baseY = middle + 4 - ((lines - 1) * LINE_PX) / 2;
  pen.text(lane.name, x, baseY, name);
  if (lines === 1) return;
  if (lane.id === 'packets' && !hasFlags(sheet.model, sheet.pxPerBit)) {
    paintPin(sheet, lane, x, baseY + LINE_PX, sub);
    return;
  }
  pen.text(lane.subName, x, baseY + LINE_PX, sub);
  if (lane.id === 'edges')
    pen.text(referenceName(view), x, baseY + 2 * LINE_PX, { ...sub, colour: palette.primary });
}

function paintPin(sheet: Sheet, lane: LaneLayout, x: number, baseY: number, style: InkedText): void {
  const { pen, palette } = sheet;
  const { lengthPx } = stickPin(sheet.stick());
  const top = baseY - 8;
  pen.down(x + 3, top, top + lengthPx, palette.ink2);
  pen.disc(x + 3, top, 2, palette.ink2);
  pen.text(lane.subName, x + 12, baseY, style);
}

function paintButtons(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, view, model } = sheet;
  model.held.forEach((button, i) => {
    pen.text(button.letter, view.gutterPx - 12, heldLineY(lane, i, model.held.length) + 4, {
      face: 'mono',
      sizePx: model.held.length > 3 ? 10 : 11,
      weight: 500,
      colour: palette.ink,
      align: 'center',
    });
  });
}

function paintEdgeLimits(sheet: Sheet, lane: LaneLayout): void {
  const { pen, palette, view, model } = sheet;
  const limit = edgeLimit(model, sheet.view);
  if (limit === null) return;
  const { zeroY, pxPerPercent } = edgeScale(model, sheet.view, lane);
  for (const side of [1, -1]) {
    pen.text(formatSigned(side * limit), view.gutterPx - 7, zeroY - side * limit * pxPerPercent + 4, {
      face: 'mono',
      sizePx: 11,
      weight: 400,
      colour: palette.ink2,
      align: 'right',
    });
  }
}
