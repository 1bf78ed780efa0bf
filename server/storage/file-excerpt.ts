import { createReadStream } from 'node:fs';
import type { Excerpt, Place } from '#shared/contract/http/problem';
import { unpack } from './unpack';

const LINES_AROUND = 1;
const LONGEST_LINE = 200;
/** A line further down than this many bytes is not looked for. */
const FARTHEST_BYTE = 256 * 1024 ** 2;

/** The line a place names and its neighbours, for the reader of a message; null where the file has no such line. */
export async function readExcerpt(path: string, place: Place): Promise<Excerpt | null> {
  if (place.line === undefined) return null;
  const first = Math.max(1, place.line - LINES_AROUND);
  const last = place.line + LINES_AROUND;
  const lines: string[] = [];
  let number = 1;
  let line = '';
  const stream = createReadStream(path, {
    highWaterMark: 1 << 18,
    end: FARTHEST_BYTE,
  }) as AsyncIterable<Buffer>;
  const text = new TextDecoder();
  for await (const bytes of unpack(stream, () => undefined)) {
    const chunk = text.decode(bytes, { stream: true });
    let from = 0;
    for (let end = chunk.indexOf('\n'); end >= 0; end = chunk.indexOf('\n', from)) {
      if (number >= first)
        lines.push(readable(line + chunk.slice(from, Math.min(end, from + LONGEST_LINE * 2))));
      if (number === last) return { firstLine: first, lines };
      line = '';
      number += 1;
      from = end + 1;
    }
    if (number >= first && line.length < LONGEST_LINE * 2) line += chunk.slice(from, from + LONGEST_LINE * 2);
  }
  if (number >= first && line !== '') lines.push(readable(line));
  return number >= place.line && lines.length > 0 ? { firstLine: first, lines } : null;
}

/** Without control characters, and cut where it is too long. */
function readable(line: string): string {
  const plain = line.replace(/\r$/, '').replace(/[\u0000-\u0008\u000b-\u001f\u007f\ufffd]/g, '\u00b7');
  return plain.length > LONGEST_LINE ? `${plain.slice(0, LONGEST_LINE)}…` : plain;
}
