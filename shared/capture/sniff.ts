import { CaptureError } from './capture-error';
import { findLogLayout } from './log-layout';
import { areRawPackets } from './raw-packets';
import { decodeText, isControl } from './text-bytes';

/** What a file is, told by its first bytes. `log`: bytes with times, as lines of text; `raw`: bytes alone. */
export type FileKind = 'vcd' | 'csv' | 'log' | 'raw';
/** How its characters are stored. */
export type CharacterSet = 'bytes' | 'utf-16le' | 'utf-16be';

/** As many bytes should be seen before judging; fewer only where the file is shorter. */
export const SNIFFED_BYTES = 4096;

/** Share of the characters of a header that are letters of the first 256, whatever the language. */
const MOSTLY_LATIN = 0.7;

/** Share of the bytes that may be control characters. */
const TOLERATED_CONTROLS = 0.02;

const SIGNATURES: readonly (readonly [readonly number[], string])[] = [
  [[0x89, 0x50, 0x4e, 0x47], 'a PNG picture'],
  [[0xff, 0xd8, 0xff], 'a JPEG picture'],
  [[0x47, 0x49, 0x46, 0x38], 'a GIF picture'],
  [[0x42, 0x4d], 'a bitmap picture'],
  [[0x49, 0x49, 0x2a, 0x00], 'a TIFF picture'],
  [[0x4d, 0x4d, 0x00, 0x2a], 'a TIFF picture'],
  [[0x52, 0x49, 0x46, 0x46], 'a RIFF file (sound or picture)'],
  [[0x25, 0x50, 0x44, 0x46], 'a PDF document'],
  [[0x50, 0x4b, 0x03, 0x04], 'a zip archive or office document'],
  [[0x1f, 0x8b], 'packed by gzip: unpack it first'],
  [[0x42, 0x5a, 0x68], 'packed by bzip2: unpack it first'],
  [[0xfd, 0x37, 0x7a, 0x58, 0x5a], 'packed by xz: unpack it first'],
  [[0x28, 0xb5, 0x2f, 0xfd], 'packed by zstd: unpack it first'],
  [[0x37, 0x7a, 0xbc, 0xaf], 'a 7z archive'],
  [[0x7f, 0x45, 0x4c, 0x46], 'a program'],
  [[0xd0, 0xcf, 0x11, 0xe0], 'an old office document'],
];

/** Tells UTF-16 by its mark or, without one, by every other byte of plain text being 0. */
export function findCharacterSet(head: Uint8Array): CharacterSet {
  if (head[0] === 0xff && head[1] === 0xfe) return 'utf-16le';
  if (head[0] === 0xfe && head[1] === 0xff) return 'utf-16be';
  const looked = Math.min(head.length & ~1, 64);
  if (looked < 8) return 'bytes';
  let evenZeros = 0;
  let oddZeros = 0;
  for (let i = 0; i < looked; i += 2) {
    // Zeros between control characters are no text.
    if (isControl(head[i]) && isControl(head[i + 1])) return 'bytes';
    if (head[i] === 0) evenZeros += 1;
    if (head[i + 1] === 0) oddZeros += 1;
  }
  const most = (looked / 2) * MOSTLY_LATIN;
  if (oddZeros >= most && evenZeros === 0) return 'utf-16le';
  if (evenZeros >= most && oddZeros === 0) return 'utf-16be';
  return 'bytes';
}

/** Throws `CaptureError` where the first bytes are those of something that is no text. `head` holds single-byte characters. */
export function findKind(head: Uint8Array): FileKind {
  const known = SIGNATURES.find(([bytes]) => bytes.every((byte, i) => head[i] === byte));
  const isText = known !== undefined && known[0].length === 2 && known[0][0] < 0x80 && !hasControls(head);
  if (known !== undefined && !isText) {
    throw new CaptureError('not-a-capture', `the file is ${known[1]}`, { byte: 0 });
  }
  const start = skipBlank(head);
  if (start === head.length)
    throw new CaptureError('empty-file', 'the file holds nothing but blanks', { byte: 0 });
  if (areRawPackets(head)) return 'raw';
  refuseBinary(head);
  if (head[start] === 0x24 && isLetter(head[start + 1])) return 'vcd';
  if (hasWord(head, '$enddefinitions') || hasWord(head, '$timescale')) return 'vcd';
  return findLogLayout(decodeText(head)) === null ? 'csv' : 'log';
}

function isLetter(byte: number): boolean {
  return (byte | 0x20) >= 0x61 && (byte | 0x20) <= 0x7a;
}

/** Past the UTF-8 byte-order mark and blanks. */
function skipBlank(head: Uint8Array): number {
  let i = head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf ? 3 : 0;
  while (i < head.length && head[i] <= 32 && head[i] !== 0) i += 1;
  return i;
}

function hasControls(head: Uint8Array): boolean {
  return head.some(isControl);
}

/** Text has no control characters; a few are taken for damage, and zeros at its end for space that was never filled. */
function refuseBinary(head: Uint8Array): void {
  let end = head.length;
  while (end > 0 && head[end - 1] === 0) end -= 1;
  let count = 0;
  let first = end === 0 ? 0 : -1;
  for (let i = 0; i < end; i++) {
    if (!isControl(head[i])) continue;
    if (first < 0) first = i;
    count += 1;
  }
  if (first < 0 || (end > 0 && count <= Math.max(3, end * TOLERATED_CONTROLS))) return;
  const shown = head[first].toString(16).padStart(2, '0').toUpperCase();
  const message = `the file is not text: it holds the byte ${shown}h and more like it`;
  throw new CaptureError('not-a-capture', message, { byte: first });
}

function hasWord(head: Uint8Array, word: string): boolean {
  outer: for (let i = 0; i + word.length <= head.length; i++) {
    for (let k = 0; k < word.length; k++) if (head[i + k] !== word.charCodeAt(k)) continue outer;
    return true;
  }
  return false;
}
