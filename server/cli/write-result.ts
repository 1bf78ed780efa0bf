import { once } from 'node:events';
import type { DecodeResult } from '#shared/contract/decode-result';

const LISTS = ['characters', 'packets', 'glitches', 'findings'] as const;
const ITEMS_PER_PIECE = 5000;

/** A result as one line of JSON, in pieces, so that no string of a whole long capture is made. */
export function* jsonPieces(result: DecodeResult): Generator<string> {
  const { characters, packets, glitches, findings, ...head } = result;
  const lists = { characters, packets, glitches, findings };
  let text = JSON.stringify(head).slice(0, -1);
  for (const name of LISTS) {
    yield `${text},"${name}":[`;
    const list: readonly unknown[] = lists[name];
    for (let i = 0; i < list.length; i += ITEMS_PER_PIECE) {
      const piece = JSON.stringify(list.slice(i, i + ITEMS_PER_PIECE)).slice(1, -1);
      yield i === 0 ? piece : `,${piece}`;
    }
    text = ']';
  }
  yield `${text}}\n`;
}

/** Writes to standard output and waits where the reader is slow. */
export async function print(text: string): Promise<void> {
  if (!process.stdout.write(text)) await once(process.stdout, 'drain');
}
