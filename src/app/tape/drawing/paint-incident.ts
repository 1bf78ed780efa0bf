import type { IncidentMark } from './packet-marks';
import type { TextStyle } from './text-measure';
import { textWidth } from './text-measure';
import type { Sheet } from './sheet';

const TITLE: TextStyle = { face: 'sans', sizePx: 11, weight: 600 };
const REASON: TextStyle = { face: 'sans', sizePx: 11, weight: 400 };
const INSET_PX = 8;
const LINE_PX = 13;

/** Characters that made no packet: a dashed frame with the reason. */
export function paintIncident(sheet: Sheet, mark: IncidentMark): void {
  if (!mark.hasFrame) return;
  const { pen, palette, model } = sheet;
  const { rect } = mark;
  const incident = model.tape.incidents[mark.index];
  const colour = incident.isAtEdge ? palette.ink3 : palette.violation;
  pen.fill(rect, palette.sheet);
  const right = rect.x + rect.width - 0.5;
  const bottom = rect.y + rect.height - 0.5;
  for (const y of [rect.y + 0.5, bottom]) pen.dashed(rect.x, y, right, y, [4, 3], colour);
  for (const x of [rect.x + 0.5, right]) pen.dashed(x, rect.y, x, bottom, [4, 3], colour);
  pen.text('no packet', rect.x + INSET_PX, rect.y + 15, { ...TITLE, colour });
  const lines = Math.max(1, Math.floor((rect.height - 20) / LINE_PX));
  wrapWords(incident.reason, rect.width - 2 * INSET_PX, REASON, lines).forEach((line, i) => {
    pen.text(line, rect.x + INSET_PX, rect.y + 15 + (i + 1) * LINE_PX, { ...REASON, colour: palette.ink2 });
  });
}

/** Breaks a text into lines of at most `widthPx`; what does not fit in `most` lines ends in an ellipsis. */
export function wrapWords(text: string, widthPx: number, style: TextStyle, most: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (line !== '' && textWidth(longer, style) > widthPx) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  lines.push(line);
  if (lines.length <= most) return lines;
  return [...lines.slice(0, most - 1), `${lines[most - 1]}…`];
}
