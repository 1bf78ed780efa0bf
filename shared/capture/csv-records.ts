import { decodeText } from './text-bytes';

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const QUOTE = 0x22;

/** One record of the beginning of a file, as text. */
export interface CsvRecord {
  /** Trimmed, quotes taken off. */
  readonly cells: readonly string[];
  /** Offset of its first byte in the examined bytes, and of the first byte after its end of line. */
  readonly start: number;
  readonly end: number;
  /** 1-based line on which it begins. */
  readonly line: number;
  /** A quote that is opened in it is never closed. */
  readonly isUnclosed: boolean;
}

/** Where the record that begins at `start` ends: the offset of its end of line, or of the end of the bytes. */
function findEnd(bytes: Uint8Array, start: number, separator: number): { end: number; isUnclosed: boolean } {
  let isQuoted = false;
  let isFieldStart = true;
  for (let i = start; i < bytes.length; i++) {
    const c = bytes[i];
    if (isQuoted) {
      if (c === QUOTE) isQuoted = false;
    } else if (c === LINE_FEED || c === CARRIAGE_RETURN) {
      return { end: i, isUnclosed: false };
    } else if (c === QUOTE) {
      // Also true for the second of two quotes inside a quoted field.
      if (isFieldStart || bytes[i - 1] === QUOTE) isQuoted = true;
    }
    isFieldStart = !isQuoted && (c === separator || (isFieldStart && c === 32));
  }
  return { end: bytes.length, isUnclosed: isQuoted };
}

/** Cells of one record. Source: RFC 4180 section 2, rules 5 to 7. */
function splitCells(text: string, separator: string): string[] {
  const cells: string[] = [];
  let i = 0;
  for (;;) {
    let cell = '';
    while (text[i] === ' ' && separator !== ' ') i += 1;
    if (text[i] === '"') {
      i += 1;
      while (i < text.length) {
        if (text[i] !== '"') cell += text[i++];
        else if (text[i + 1] === '"') {
          cell += '"';
          i += 2;
        } else break;
      }
      i += 1;
    }
    const next = text.indexOf(separator, i);
    const stop = next < 0 ? text.length : next;
    cells.push((cell + text.slice(i, stop)).trim());
    if (next < 0) return cells;
    i = next + 1;
  }
}

/** Splits the beginning of a file into at most `most` records. The last one may be incomplete. */
export function splitRecords(bytes: Uint8Array, separator: string, most: number): CsvRecord[] {
  const records: CsvRecord[] = [];
  let start = 0;
  let line = 1;
  while (start < bytes.length && records.length < most) {
    const { end, isUnclosed } = findEnd(bytes, start, separator.charCodeAt(0));
    const isPair = bytes[end] === CARRIAGE_RETURN && bytes[end + 1] === LINE_FEED;
    const next = end + (isPair ? 2 : 1);
    const content = bytes.subarray(start, Math.min(end, start + 1_000_000));
    records.push({ cells: splitCells(decodeText(content), separator), start, end: next, line, isUnclosed });
    line += countLines(content) + 1;
    start = next;
  }
  return records;
}

function countLines(bytes: Uint8Array): number {
  let count = 0;
  for (let i = 0; i < bytes.length; i++) {
    if (bytes[i] === LINE_FEED || (bytes[i] === CARRIAGE_RETURN && bytes[i + 1] !== LINE_FEED)) count += 1;
  }
  return count;
}
