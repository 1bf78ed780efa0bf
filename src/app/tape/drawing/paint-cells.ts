import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '#shared/characters/character-table';
import { cellOf, charactersIn } from './characters-in-view';
import { hexByte } from './figures';
import type { LaneLayout } from './lanes';
import type { DataRows } from './paint-data-lane';
import type { Rect } from './pen';
import { FROM } from './scales';
import type { Sheet } from './sheet';
import { textWidth } from './text-measure';

/** Start and stop are hatched apart from this width of an element, px. */
const HATCH_FROM_PX = 3;

/** What is collected over all cells in view, so that each colour is drawn in one go. */
interface Parts {
  readonly zeros: Rect[];
  readonly hatched: Rect[];
  readonly solid: Rect[];
  readonly separators: number[];
}

/** The characters: cells of sub-cells at the nominal rate, their bits in the order sent, and the value below or inside. */
export function paintCells(sheet: Sheet, rows: DataRows, lane: LaneLayout): void {
  const { model, view, scale, ctx, pen, palette } = sheet;
  if (model.elements === 0) return;
  const { first, end } = charactersIn(model, view.window.startTicks, view.window.endTicks);
  const parts: Parts = { zeros: [], hatched: [], solid: [], separators: [] };
  for (let c = first; c < end; c++) {
    const cell = cellOf(model, scale, c);
    pen.fill(
      { x: cell.x, y: rows.cellTop, width: cell.width, height: rows.cellBottom - rows.cellTop },
      palette.sheet,
    );
    collect(sheet, rows, c, parts);
  }
  fillAll(ctx, parts.zeros, palette.tint);
  pen.hatch(parts.hatched, palette.ink2, 3.6, 0.8);
  fillAll(ctx, parts.solid, palette.ink);
  for (const x of parts.separators) pen.down(x, rows.cellTop, rows.cellBottom, palette.ink3, 0.7);
  for (let c = first; c < end; c++) paintOutline(sheet, rows, c);
  for (let c = first; c < end; c++) paintFigures(sheet, rows, lane, c);
}

function fillAll(ctx: CanvasRenderingContext2D, rects: readonly Rect[], colour: string): void {
  ctx.fillStyle = colour;
  ctx.beginPath();
  for (const { x, y, width, height } of rects) ctx.rect(x, y, width, height);
  ctx.fill();
}

/** The sub-cells of one character: start, data bits first sent first, parity, stop. */
function collect(sheet: Sheet, rows: DataRows, c: number, parts: Parts): void {
  const { model, scale } = sheet;
  const { characters } = model.tape;
  const cell = cellOf(model, scale, c);
  const step = model.nominalBitTicks / scale.ticksPerPx;
  if (step < HATCH_FROM_PX) return;
  const isBitwise = sheet.pxPerBit >= FROM.packetNumber;
  const bits = bitsOf(sheet, c);
  const height = rows.cellBottom - rows.cellTop;
  const isBroken = (characters.errors[c] & (FRAMING_ERROR | BREAK_ERROR)) !== 0;
  for (let n = 0; n < model.elements; n++) {
    const x = cell.x + n * step;
    const width = Math.min(step, cell.x + cell.width - x);
    if (width <= 0) break;
    const rect = { x, y: rows.cellTop, width, height };
    const bit = bits[n];
    if (n === bits.length && isBroken) parts.solid.push(rect);
    else if (n === 0 || n >= bits.length) parts.hatched.push(rect);
    else if (isBitwise && bit === '0') parts.zeros.push(rect);
    const isOuter = n === 0 || n >= bits.length - 1;
    if (n < model.elements - 1 && (isBitwise || isOuter)) parts.separators.push(x + step);
  }
}

/** Signs of the sub-cells up to the last bit before the stop; '' for the start. */
function bitsOf(sheet: Sheet, c: number): string[] {
  const { characters, framing } = sheet.model.tape;
  if (framing === null) return [''];
  const value = characters.values[c];
  const data = Array.from({ length: framing.dataBits }, (_, n) => String((value >> n) & 1));
  if (framing.parity === 'none') return ['', ...data];
  return ['', ...data, parityBit(value, framing.parity, (characters.errors[c] & PARITY_ERROR) !== 0)];
}

function parityBit(value: number, parity: 'odd' | 'even' | 'mark', isWrong: boolean): string {
  let ones = 0;
  for (let rest = value; rest > 0; rest >>= 1) ones += rest & 1;
  const due = parity === 'mark' ? 1 : (ones + (parity === 'odd' ? 1 : 0)) & 1;
  return String(isWrong ? 1 - due : due);
}

function paintOutline(sheet: Sheet, rows: DataRows, c: number): void {
  const { model, scale, pen, palette, view } = sheet;
  const cell = cellOf(model, scale, c);
  const rect = { x: cell.x, y: rows.cellTop, width: cell.width, height: rows.cellBottom - rows.cellTop };
  if (cell.width >= 3) {
    // Faint lines that tie the cell to its stretch of the ribbon.
    pen.down(cell.x + 0.5, rows.ribbonBottom, rows.cellTop, palette.ink2, 0.8);
    if (!isFollowed(sheet, c))
      pen.down(
        cell.x + cell.width - 0.5,
        (rows.ribbonTop + rows.ribbonBottom) / 2,
        rows.cellTop,
        palette.ink2,
        0.8,
      );
  }
  const isSelected = view.selection?.kind === 'character' && view.selection.index === c;
  if (isSelected) pen.frame(rect, palette.primary, 2);
  else pen.frame(rect, palette.ink, 1);
}

/** Whether the next character begins within 2 px: its line then stands for the end of this one too. */
function isFollowed(sheet: Sheet, c: number): boolean {
  const { model, scale } = sheet;
  const { characters } = model.tape;
  if (c + 1 >= characters.count) return false;
  const { x, width } = cellOf(model, scale, c);
  return scale.xOf(characters.startTicks[c + 1]) - (x + width) < 2;
}

/** Digits in the sub-cells; the value inside the cell while they are too narrow for digits, else below. */
function paintFigures(sheet: Sheet, rows: DataRows, lane: LaneLayout, c: number): void {
  const { model, scale, pen, palette, pxPerBit } = sheet;
  const cell = cellOf(model, scale, c);
  const middle = cell.x + cell.width / 2;
  const cellMiddle = (rows.cellTop + rows.cellBottom) / 2;
  const isBelow = pxPerBit >= FROM.packetNumber && rows.hexBase < lane.topPx + lane.heightPx;
  if (pxPerBit >= FROM.letters && isBelow) paintDigits(sheet, c, cell.x, cellMiddle);
  const hex = valueText(sheet, c);
  if (isBelow) paintValueBelow(sheet, c, hex, middle, rows.hexBase);
  else if (pxPerBit >= FROM.hexInCell) {
    const style = { face: 'mono', sizePx: pxPerBit < 3 ? 11 : 12, weight: 600, colour: palette.ink } as const;
    if (textWidth(hex, style) <= cell.width)
      pen.text(hex, middle, cellMiddle + 4, { ...style, align: 'center' });
  }
}

function valueText(sheet: Sheet, c: number): string {
  const { characters } = sheet.model.tape;
  return (characters.errors[c] & BREAK_ERROR) !== 0 ? 'break' : hexByte(characters.values[c]);
}

function paintDigits(sheet: Sheet, c: number, x: number, middleY: number): void {
  const { model, scale, pen, palette } = sheet;
  const step = model.nominalBitTicks / scale.ticksPerPx;
  const sizePx = sheet.scaleName === 'edges' ? 13 : 10;
  bitsOf(sheet, c).forEach((bit, n) => {
    if (bit === '') return;
    pen.text(bit, x + (n + 0.5) * step, middleY + sizePx * 0.36, {
      face: 'mono',
      sizePx,
      weight: 500,
      colour: palette.ink,
      align: 'center',
    });
  });
}

/** The value, with the letter it stands for where it is part of an identification. */
function paintValueBelow(sheet: Sheet, c: number, hex: string, middle: number, baseY: number): void {
  const { model, pen, palette, pxPerBit } = sheet;
  const value = model.tape.characters.values[c];
  const isLetter = model.tape.resetOfCharacter[c] >= 0 && value > 32 && value < 127;
  const style = { face: 'mono', sizePx: 14, weight: 600, colour: palette.ink } as const;
  if (!isLetter || pxPerBit < FROM.letters) {
    pen.text(hex, middle, baseY, { ...style, align: 'center' });
    return;
  }
  const width = textWidth(`${hex} M`, style);
  pen.text(hex, middle - width / 2, baseY, style);
  const letter = String.fromCharCode(value);
  pen.text(letter, middle + width / 2, baseY, {
    ...style,
    weight: 400,
    colour: palette.ink2,
    align: 'right',
  });
}
