import type { LaneLayout } from './lanes';
import { paintControlLanes } from './paint-control-lane';
import { paintDataLane } from './paint-data-lane';
import { paintDividers } from './paint-dividers';
import { paintEdgesLane } from './paint-edges-lane';
import { paintFindingsLane } from './paint-findings-lane';
import { paintGrid, paintLaneRules } from './paint-grid';
import { paintGutter, paintGutterEdge } from './paint-gutter';
import { paintHeldLane, paintHeldLines } from './paint-held-lane';
import { paintDrag, paintFocus, paintHover } from './paint-hover';
import { paintLineUseLane } from './paint-line-use-lane';
import { paintNotes } from './paint-notes';
import { paintPacketFlags, paintPacketGround } from './paint-packets-lane';
import { paintReplyLane } from './paint-reply-lane';
import { paintRuler } from './paint-ruler';
import { paintStatedSpans } from './paint-stated-spans';
import { paintStems } from './paint-stems';
import { paintSpanBar, paintWash } from './paint-wash';
import type { Palette } from './palette';
import { makeSheet, onPaper } from './sheet';
import type { Sheet } from './sheet';
import type { TapeModel } from './tape-model';
import type { TapeView } from './view';

/**
 * The three layers of the tape, each for a canvas of its own, the first at the bottom. The context's unit must be the CSS px:
 * scale it by devicePixelRatio before. Each call paints its whole canvas anew.
 */

/** Paper, grid, ruler, lane rules and the gutter with the names. Changes with window, size and theme. */
export function paintPaper(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  palette: Palette,
): void {
  const sheet = makeSheet(ctx, model, view, lanes, palette);
  onPaper(sheet, () => paintGrid(sheet));
  paintGutter(sheet);
  paintLaneRules(sheet);
  onPaper(sheet, () => {
    paintHeldLines(sheet);
    paintRuler(sheet);
  });
  paintGutterEdge(sheet);
}

/** Everything measured and found, over the wash of the selection. Changes with window, selection, size and theme. */
export function paintData(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  palette: Palette,
): void {
  ctx.clearRect(0, 0, view.widthPx, view.heightPx);
  paintDataOver(makeSheet(ctx, model, view, lanes, palette));
}

/** Paper and data on one canvas: both change with the window, and a canvas less is a layer less to put together. */
export function paintTape(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  palette: Palette,
): void {
  paintPaper(ctx, model, view, lanes, palette);
  paintDataOver(makeSheet(ctx, model, view, lanes, palette));
}

function paintDataOver(sheet: Sheet): void {
  onPaper(sheet, () => {
    paintWash(sheet);
    paintStatedSpans(sheet);
    paintControlLanes(sheet);
    paintDataLane(sheet);
    paintEdgesLane(sheet);
    paintLineUseLane(sheet);
    paintPacketGround(sheet);
    paintStems(sheet);
    paintReplyLane(sheet);
    paintPacketFlags(sheet);
    paintHeldLane(sheet);
    paintNotes(sheet);
    paintSpanBar(sheet);
    paintFindingsLane(sheet);
  });
}

/** Dividers, hover, focus and the stretch being drawn up: what changes with the pointer. */
export function paintOverlay(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  palette: Palette,
): void {
  const sheet = makeSheet(ctx, model, view, lanes, palette);
  ctx.clearRect(0, 0, view.widthPx, view.heightPx);
  onPaper(sheet, () => {
    paintDividers(sheet);
    paintDrag(sheet);
    paintHover(sheet);
    paintFocus(sheet);
  });
}
