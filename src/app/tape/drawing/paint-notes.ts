import { layOutNotes, NOTE_FIGURE, NOTE_PX, NOTE_WORDS } from './lane-notes';
import type { LaneNote } from './lane-notes';
import type { Sheet } from './sheet';
import { inkOf } from './sheet';

/** Lanes with nothing in the window say so, and where the nearest thing is. */
export function paintNotes(sheet: Sheet): void {
  for (const note of layOutNotes(sheet.model, sheet.view, sheet.lanes)) paintNote(sheet, note);
}

function paintNote(sheet: Sheet, note: LaneNote): void {
  const { pen, palette, leftPx } = sheet;
  const { box } = note;
  const y = box.y + box.height / 2;
  pen.fill({ ...box, y: y - 9, height: 18, x: box.x + 1 }, palette.sheet);
  let x = leftPx + NOTE_PX.plain;
  if (note.side !== null) {
    paintChevron(sheet, leftPx + NOTE_PX.arrow, y, note.side === 'before' ? -1 : 1);
    x = leftPx + NOTE_PX.afterArrow;
  }
  if (note.verdict !== null) {
    pen.glyph(note.verdict, leftPx + NOTE_PX.glyph, y, 13, inkOf(palette, note.verdict), palette.sheet);
    x = leftPx + NOTE_PX.afterGlyph;
  }
  if (note.figure !== '')
    x += pen.text(note.figure, x, y + 4, { ...NOTE_FIGURE, colour: palette.ink }) + NOTE_PX.gap;
  pen.text(note.words, x, y + 4, { ...NOTE_WORDS, colour: palette.ink2 });
}

function paintChevron(sheet: Sheet, x: number, y: number, direction: 1 | -1): void {
  const { ctx, palette } = sheet;
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 1.4;
  ctx.beginPath();
  ctx.moveTo(x + (direction > 0 ? 0 : 5), y - 4.5);
  ctx.lineTo(x + (direction > 0 ? 5 : 0), y);
  ctx.lineTo(x + (direction > 0 ? 0 : 5), y + 4.5);
  ctx.stroke();
}
