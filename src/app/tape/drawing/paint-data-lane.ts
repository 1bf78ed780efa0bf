import { paintCells } from './paint-cells';
import { paintRibbon } from './paint-ribbon';
import { usedUpTo } from './prefix-sums';
import type { LaneLayout } from './lanes';
import type { Sheet } from './sheet';
import { bottomOf, laneOf, middleOf } from './sheet';

/** Ribbon, gap and cell of the Data lane from its upper edge, px. Source: design 6. */
export const RIBBON_TOP_PX = 16;
export const RIBBON_PX = 18;
export const CELL_GAP_PX = 12;
export const CELL_PX = 24;
export const HEX_BELOW_PX = 18;

const RAW_RIBBON_PX = 22;
const DENSITY_COLUMN_PX = 3;

/** Heights of the parts of the Data lane. */
export interface DataRows {
  readonly ribbonTop: number;
  readonly ribbonBottom: number;
  readonly cellTop: number;
  readonly cellBottom: number;
  readonly hexBase: number;
}

/** A low lane (phone) has its ribbon a little higher and no room below the cells. */
export function dataRows(lane: LaneLayout): DataRows {
  const ribbonTop = lane.topPx + (lane.heightPx < 90 ? 12 : RIBBON_TOP_PX);
  const ribbonBottom = ribbonTop + RIBBON_PX;
  const cellTop = ribbonBottom + CELL_GAP_PX;
  const cellBottom = cellTop + CELL_PX;
  return { ribbonTop, ribbonBottom, cellTop, cellBottom, hexBase: cellBottom + HEX_BELOW_PX };
}

/** The Data lane at every scale: density, raw ribbon, or ribbon with cells. */
export function paintDataLane(sheet: Sheet): void {
  const lane = laneOf(sheet, 'data');
  if (lane === undefined) return;
  switch (sheet.scaleName) {
    case 'survey':
      paintDensity(sheet, lane);
      break;
    case 'packets':
      paintRibbon(sheet, middleOf(lane) - RAW_RIBBON_PX / 2, RAW_RIBBON_PX);
      break;
    default: {
      const rows = dataRows(lane);
      paintRibbon(sheet, rows.ribbonTop, RIBBON_PX);
      paintCells(sheet, rows, lane);
    }
  }
}

/** Share of the line in use per column, standing on a base line; the dotted line is all of it. */
function paintDensity(sheet: Sheet, lane: LaneLayout): void {
  const { pen, ctx, palette, scale, model, leftPx, rightPx } = sheet;
  const { characters } = model.tape;
  const baseY = pen.snap(bottomOf(lane) - 10);
  const fullPx = lane.heightPx - 20;
  pen.dashed(leftPx, baseY - fullPx, rightPx, baseY - fullPx, [3, 3], palette.grid);
  // Columns are counted from tick 0, so that they do not flicker while the window moves.
  const columnTicks = DENSITY_COLUMN_PX * scale.ticksPerPx;
  const first = Math.floor(scale.ticksAt(leftPx) / columnTicks);
  const last = Math.ceil(scale.ticksAt(rightPx) / columnTicks);
  let before = usedUpTo(characters, model.usedBefore, first * columnTicks);
  ctx.fillStyle = palette.ribbon;
  for (let column = first; column < last; column++) {
    const after = usedUpTo(characters, model.usedBefore, (column + 1) * columnTicks);
    const height = ((after - before) / columnTicks) * fullPx;
    before = after;
    if (height <= 0) continue;
    const x0 = pen.snap(scale.xOf(column * columnTicks));
    const x1 = pen.snap(scale.xOf((column + 1) * columnTicks));
    ctx.fillRect(x0, baseY - Math.max(1, height), x1 - x0, Math.max(1, height));
  }
  pen.across(leftPx, rightPx, baseY + 0.5, palette.ribbon);
}
