import type { Sender } from './log-line';
import { senderOf } from './log-line';

/** How the bytes of a line are written. */
export type Notation = 'hex' | 'decimal' | 'text';

/** The bytes of a line, and where it stops to be bytes. */
export interface LogPayload {
  readonly values: readonly number[];
  /** Offset in the payload of what is neither a byte nor something that may stand beside bytes; −1 where there is none. */
  readonly badAt: number;
  /** A mark behind the bytes. */
  readonly sender: Sender | null;
}

const BETWEEN = /[\s,;:|"'<>{}[\]()-]*/y;
const BOUNDARY = String.raw`(?=[\s,;:|"'<>{}[\]()-]|$)`;
const HEX = new RegExp(String.raw`(?:(?:0x|\\x|\$)([0-9a-f]{1,2})|((?:[0-9a-f]{2})+)h?)${BOUNDARY}`, 'iy');
const DECIMAL = new RegExp(String.raw`(\d{1,3})${BOUNDARY}`, 'y');
/** Hexadecimal in a way that cannot be a level, a voltage or a count. */
const UNMISTAKABLE = /^(0x|\\x|\$)|[a-f]|h$/i;

/** Bytes as hexadecimal or decimal numbers; text that repeats them, a comment or the mark of the sender may stand behind. */
export function parseNumbers(payload: string, notation: 'hex' | 'decimal'): LogPayload {
  const values: number[] = [];
  let at = 0;
  for (;;) {
    const start = at + lengthAt(BETWEEN, payload, at);
    if (values.length > 0 && /[\s,;|]/.test(payload[at] ?? '')) {
      const beside = readBeside(payload, at, values);
      if (beside !== null) return { values, badAt: -1, sender: beside.sender };
    }
    if (start === payload.length) break;
    const pattern = notation === 'hex' ? HEX : DECIMAL;
    pattern.lastIndex = start;
    const match = pattern.exec(payload);
    if (match === null || (notation === 'decimal' && Number(match[1]) > 255)) {
      return { values, badAt: start, sender: null };
    }
    if (notation === 'decimal') values.push(Number(match[1]));
    else if (match[1] !== undefined) values.push(parseInt(match[1], 16));
    else for (let i = 0; i < match[2].length; i += 2) values.push(parseInt(match[2].slice(i, i + 2), 16));
    at = start + match[0].length;
  }
  return { values, badAt: -1, sender: null };
}

const SEPARATORS = /[\s,;|:]*/y;
const LONGEST_MARK = 40;

/** What may stand behind bytes at `from`: a comment, a mark, or the same bytes once more as characters. */
function readBeside(
  payload: string,
  from: number,
  values: readonly number[],
): { readonly sender: Sender | null } | null {
  const at = from + lengthAt(SEPARATORS, payload, from);
  const isComment =
    payload[at] === '#' || payload.startsWith('//', at) || /^\s+;/.test(payload.slice(from, at));
  if (isComment) return { sender: null };
  const sender = payload.length - at > LONGEST_MARK ? null : senderOf(payload.slice(at).trimEnd());
  if (sender !== null) return { sender };
  const start = at + Number(/["'<]/.test(payload[at] ?? ''));
  const rest = payload.length - start - values.length;
  // A quote, bar or bracket may close the characters.
  if (rest < 0 || rest > 2) return null;
  const isSame = values.every((value, i) => isCharacterOf(payload[start + i], value));
  return isSame && /^\s?["'|>]?$/.test(payload.slice(start + values.length)) ? { sender: null } : null;
}

/** A point stands for what cannot be printed. */
function isCharacterOf(c: string, value: number): boolean {
  return (
    c === '.' || c === '·' || c === String.fromCharCode(value) || c === String.fromCharCode(value & 0x7f)
  );
}

/** Names of control characters. Source: ISO/IEC 646. */
const CONTROLS =
  'NUL SOH STX ETX EOT ENQ ACK BEL BS HT LF VT FF CR SO SI DLE DC1 DC2 DC3 DC4 NAK SYN ETB CAN EM SUB ESC FS GS RS US'.split(
    ' ',
  );
const ESCAPES: Readonly<Record<string, number>> = {
  n: 10,
  r: 13,
  t: 9,
  b: 8,
  f: 12,
  v: 11,
  a: 7,
  e: 27,
  '0': 0,
};
const SHARP = /<(?:(?:0x)?([0-9a-f]{2})|([a-z]{2}[a-z0-9]?))>/iy;

/** Bytes as characters, in quotes or bare. `\x4D`, `\r`, `\\`, `<4D>` and `<NUL>` stand for what cannot be printed. */
export function parseText(payload: string): LogPayload {
  const quote = /^["']/.exec(payload)?.[0] ?? null;
  const values: number[] = [];
  let i = quote === null ? 0 : 1;
  while (i < payload.length) {
    if (payload[i] === quote) return readTextEnd(payload, i, values);
    const { value, length } = characterAt(payload, i);
    if (value < 0 || value > 255) return { values, badAt: i, sender: null };
    values.push(value);
    i += length;
  }
  return quote === null
    ? { values, badAt: -1, sender: null }
    : { values, badAt: payload.length, sender: null };
}

function readTextEnd(payload: string, end: number, values: readonly number[]): LogPayload {
  const rest = payload.slice(end + 1).replace(/^[\s,;|:]+/, '');
  const sender = senderOf(rest);
  const isFine = rest === '' || sender !== null || /^(#|\/\/)/.test(rest);
  return { values, badAt: isFine ? -1 : end + 1, sender };
}

function characterAt(text: string, i: number): { readonly value: number; readonly length: number } {
  SHARP.lastIndex = i;
  const [sharp, hex, name] = SHARP.exec(text) ?? [];
  if (sharp !== undefined) {
    const value = hex === undefined ? nameValue(name) : parseInt(hex, 16);
    if (value >= 0) return { value, length: sharp.length };
  }
  if (text[i] !== '\\') return { value: text.charCodeAt(i), length: 1 };
  const [escaped, digits] = /\\x([0-9a-f]{2})/iy.exec(text.slice(i)) ?? [];
  if (escaped !== undefined) return { value: parseInt(digits, 16), length: escaped.length };
  const next = text[i + 1] ?? '';
  if (/[\\"']/.test(next)) return { value: next.charCodeAt(0), length: 2 };
  return next in ESCAPES ? { value: ESCAPES[next], length: 2 } : { value: 0x5c, length: 1 };
}

function nameValue(name: string): number {
  return name.toUpperCase() === 'DEL' ? 127 : CONTROLS.indexOf(name.toUpperCase());
}

/** Whether a payload is hexadecimal beyond doubt. */
export function isUnmistakable(payload: string): boolean {
  return payload.split(/[\s,;:|"'<>{}[\]()-]+/).some((word) => UNMISTAKABLE.test(word));
}

function lengthAt(pattern: RegExp, text: string, at: number): number {
  pattern.lastIndex = at;
  return pattern.exec(text)?.[0].length ?? 0;
}
