import type { PlateMark } from './packet-marks';
import { PLATE_GAP_PX, PLATE_INSET_PX, PLATE_NAME, PLATE_WORDS, plateWords } from './plate-words';
import type { Sheet } from './sheet';

const INNER_PX = 3;
const RIVET_PX = 8;

/** The identification of a device as a nameplate: double frame, four rivets, what it says of itself. */
export function paintNameplate(sheet: Sheet, mark: PlateMark): void {
  const { pen, palette, model, view } = sheet;
  const { rect } = mark;
  const reset = model.tape.resets[mark.index];
  const isSelected = view.selection?.kind === 'reset' && view.selection.index === mark.index;
  const colour = isSelected ? palette.primary : palette.ink;
  pen.fill(rect, palette.sheet);
  pen.frame(rect, colour, isSelected ? 2 : 1);
  const middle = rect.y + rect.height / 2;
  if (mark.isSmall) {
    pen.text(reset.identity ?? '', rect.x + rect.width / 2, middle + 4, {
      face: 'mono',
      sizePx: 11,
      weight: 600,
      colour,
      align: 'center',
    });
    return;
  }
  const inner = {
    x: rect.x + INNER_PX,
    y: rect.y + INNER_PX,
    width: rect.width - 2 * INNER_PX,
    height: rect.height - 2 * INNER_PX,
  };
  pen.frame(inner, colour);
  for (const x of [rect.x + RIVET_PX + 1, rect.x + rect.width - RIVET_PX - 1]) {
    for (const y of [rect.y + RIVET_PX + 1, rect.y + rect.height - RIVET_PX - 1])
      pen.disc(x, y, 1.4, palette.ink2);
  }
  const x = rect.x + PLATE_INSET_PX;
  const name = pen.text(reset.identity ?? '', x, middle + 8, { ...PLATE_NAME, colour });
  const words = plateWords(reset);
  const first = middle + 4 - ((words.length - 1) * 15) / 2;
  words.forEach((line, i) => {
    pen.text(line, x + name + PLATE_GAP_PX, first + i * 15, { ...PLATE_WORDS, colour: palette.ink2 });
  });
}
