import { CODE_STYLE, HEAD_GLYPH_PX, HEAD_TEXT_PX, VALUE_GAP_PX, VALUE_STYLE } from './finding-heads';
import type { FindingHead } from './finding-heads';
import type { Sheet } from './sheet';
import { inkOf, plateColours } from './sheet';

/** The Findings lane: a head for each finding, the selected one on a plate. */
export function paintFindingsLane(sheet: Sheet): void {
  for (const head of sheet.heads()) paintHead(sheet, head);
}

function paintHead(sheet: Sheet, head: FindingHead): void {
  const { pen, palette, model } = sheet;
  const { verdict } = model.findings[head.lead];
  const ink = inkOf(palette, verdict);
  const plate = plateColours(palette, verdict);
  if (head.isSelected) {
    pen.fill(head.box, plate.ground);
    pen.frame(head.box, ink, 1);
  }
  pen.glyph(verdict, head.x, head.y, HEAD_GLYPH_PX, ink, head.isSelected ? plate.ground : palette.sheet);
  if (head.code === '') return;
  const x = head.x + HEAD_TEXT_PX;
  const baseY = head.y + 4;
  const width = pen.text(head.code, x, baseY, {
    ...CODE_STYLE,
    colour: head.isSelected ? plate.text : palette.ink,
  });
  if (head.value === '') return;
  pen.text(head.value, x + width + VALUE_GAP_PX, baseY, {
    ...VALUE_STYLE,
    colour: head.isSelected ? plate.text : palette.ink2,
  });
}
