import { cellOf } from './characters-in-view';
import { countUpTo } from '#shared/time/sorted-search';
import type { FindingHead } from './finding-heads';
import { spaceUpTo } from './prefix-sums';
import { FROM } from './scales';
import { dataRows } from './paint-data-lane';
import type { LaneLayout } from './lanes';
import type { Sheet } from './sheet';
import { bottomOf, inkOf, laneOf, middleOf } from './sheet';

const TRIANGLE_PX = 8;

/** Lines from each head to its place: solid for a violation, dashed for inconclusive, dotted for a pass. */
export function paintStems(sheet: Sheet): void {
  const lane = laneOf(sheet, 'findings');
  if (lane === undefined) return;
  for (const head of sheet.heads()) paintStem(sheet, lane, head);
}

function paintStem(sheet: Sheet, findings: LaneLayout, head: FindingHead): void {
  const { palette, model, scale } = sheet;
  const { verdict } = model.findings[head.lead];
  if (verdict === 'not-shown') return;
  const place = model.places[head.lead];
  const x = scale.xOf(place.ticks);
  const colour = inkOf(palette, verdict);
  const top = topOf(sheet, head);
  const bottom = head.box.y - 1;
  if (top === undefined || bottom <= top || findings.topPx < top) return;
  for (const [from, to] of piecesBetween(sheet, x, top, bottom))
    drawPiece(sheet, x, from, to, verdict, colour);
  if (place.character >= 0) paintTriangle(sheet, x, colour);
}

function drawPiece(sheet: Sheet, x: number, from: number, to: number, verdict: string, colour: string): void {
  if (verdict === 'violation') sheet.pen.down(x, from, to, colour, 1.2);
  else sheet.pen.dashed(x, from, x, to, verdict === 'pass' ? [1, 3] : [4, 3], colour, 1.2);
}

/** A stem does not cross the ribbon it speaks of. */
function piecesBetween(sheet: Sheet, x: number, top: number, bottom: number): [number, number][] {
  const data = laneOf(sheet, 'data');
  if (data === undefined || !hasCells(sheet) || !isAtSpace(sheet, x)) return [[top, bottom]];
  const rows = dataRows(data);
  if (top >= rows.ribbonBottom || bottom <= rows.ribbonTop) return [[top, bottom]];
  const pieces: [number, number][] = [
    [top, rows.ribbonTop - 3],
    [rows.ribbonBottom + 1, bottom],
  ];
  return pieces.filter(([from, to]) => to > from);
}

function hasCells(sheet: Sheet): boolean {
  return sheet.scaleName !== 'survey' && sheet.scaleName !== 'packets';
}

/** Whether the ribbon is filled within a px of x. */
function isAtSpace(sheet: Sheet, x: number): boolean {
  const { model, scale } = sheet;
  const line = model.lines.data;
  if (line === undefined) return false;
  const before = spaceUpTo(line, model.spaceBefore, scale.ticksAt(x - 1));
  return spaceUpTo(line, model.spaceBefore, scale.ticksAt(x + 1)) > before;
}

function topOf(sheet: Sheet, head: FindingHead): number | undefined {
  const place = sheet.model.places[head.lead];
  const isClose = hasCells(sheet);
  const lane = laneOf(sheet, place.lane) ?? laneOf(sheet, 'data');
  if (lane === undefined) return undefined;
  if (lane.id === 'data' && isClose) {
    const rows = dataRows(lane);
    if (place.character < 0 && !isInCell(sheet, place.ticks)) return rows.ribbonBottom + 2;
    const isHexBelow = sheet.pxPerBit >= FROM.packetNumber;
    return Math.min(isHexBelow ? rows.hexBase + 6 : rows.cellBottom + 3, bottomOf(lane));
  }
  if (lane.id === 'rts') return middleOf(lane) + 10;
  if (lane.id === 'reply') return isClose ? bottomOf(lane) - 8 : middleOf(lane) + 8;
  return lane.id === 'packets' && isClose ? lane.topPx + 4 : middleOf(lane);
}

/** Whether an instant lies inside a cell, not at its edge. */
function isInCell(sheet: Sheet, ticks: number): boolean {
  const { model, scale } = sheet;
  const { characters } = model.tape;
  const c = countUpTo(characters.startTicks, ticks, characters.count) - 1;
  if (c < 0) return false;
  const cell = cellOf(model, scale, c);
  const x = scale.xOf(ticks);
  return x > cell.x + 2 && x < cell.x + cell.width - 2;
}

/** Marks the edge itself, under the ribbon. */
function paintTriangle(sheet: Sheet, x: number, colour: string): void {
  const data = laneOf(sheet, 'data');
  if (data === undefined || !hasCells(sheet)) return;
  const { ribbonBottom } = dataRows(data);
  const half = TRIANGLE_PX / 2;
  sheet.pen.polygon(
    [
      [x, ribbonBottom + 2],
      [x + half, ribbonBottom + 2 + TRIANGLE_PX - 1],
      [x - half, ribbonBottom + 2 + TRIANGLE_PX - 1],
    ],
    colour,
  );
}
