import { isClockText } from './calendar-clock';
import { placesOfTimeUnit } from './csv-columns';

/** Who sent the bytes of a line. */
export type Sender = 'device' | 'host';

/** How the lines of a log are written, as far as one line cannot tell. */
export interface LineStyle {
  /** A comma between digits at the begin of a line is a decimal sign. */
  readonly hasDecimalComma: boolean;
  /** Whole numbers at the begin of a line are times, not bytes. */
  readonly hasIntegerStamps: boolean;
  /** Lines begin with the hexadecimal count of the bytes before. */
  readonly hasOffsets: boolean;
}

export interface LogStamp {
  readonly kind: 'clock' | 'number';
  /** As written, without brackets and unit. */
  readonly text: string;
  /** Decimal places of its own unit in seconds; null without one. */
  readonly places: number | null;
  readonly isInteger: boolean;
}

interface FoundStamp {
  readonly stamp: LogStamp;
  /** Offset behind it. */
  readonly end: number;
}

/** A line taken apart. */
export interface LogLine {
  readonly stamp: LogStamp | null;
  readonly sender: Sender | null;
  /** What stands behind stamp and mark, and its offset in the line. */
  readonly payload: string;
  readonly payloadAt: number;
}

const DEVICE = 'device|dev|mouse|dce';
const HOST = 'host|pc|dte';
/** One letter is enough where both are named. */
const DEVICE_WORD = `(?:${DEVICE}|d)`;
const HOST_WORD = `(?:${HOST}|h)`;
const RIGHT = String.raw`\s*(?:-+>|=+>|>+|→|\bto\b)\s*`;
const LEFT = String.raw`\s*(?:<-+|<=+|<+|←|\bfrom\b)\s*`;
/** Words are meant as the host sees them: it receives what the device sends. */
const FROM_DEVICE = String.raw`${DEVICE_WORD}${RIGHT}${HOST_WORD}|${HOST_WORD}${LEFT}${DEVICE_WORD}`;
const FROM_HOST = String.raw`${HOST_WORD}${RIGHT}${DEVICE_WORD}|${DEVICE_WORD}${LEFT}${HOST_WORD}`;
const DEVICE_MARK = String.raw`rxd?|received|receive|recv|input|in|read|rd|r|${DEVICE}|<[-=<]*|←`;
const HOST_MARK = String.raw`txd?|sent|send|output|out|write|wr|td|w|t|${HOST}|[-=>]*>|→`;
const BOUNDARY = String.raw`(?=[\s,;|:]|$)`;
const MARK = new RegExp(
  String.raw`["'[({]?(?:(?<device>${FROM_DEVICE})|(?<host>${FROM_HOST})|(?<receive>${DEVICE_MARK})|(?<send>${HOST_MARK}))["'\])}]?:?${BOUNDARY}`,
  'iy',
);
const POINT_NUMBER = numberPattern(String.raw`\.`);
const COMMA_NUMBER = numberPattern('[.,]');
const GAP = /(?:[\s,;|]|-(?=\s))*/y;
const OFFSET = /\s*[0-9a-f]{4,8}:?(?=\s)/iy;
/** A time and a place between it and the bytes at most: number of the line, time, mark. */
const MOST_ITEMS = 3;
const LONGEST_CLOCK = 64;
/** A clock has its first colon within so many characters, a date and a bracket in front of it. */
const LONGEST_DATE = 16;

function numberPattern(sign: string): RegExp {
  const number = String.raw`([+-]?\d+(?:${sign}\d+)?(?:e[+-]?\d+)?)`;
  const unit = String.raw`(?:\s?(s|sec|ms|us|µs|μs|ns))?`;
  return new RegExp(String.raw`(["[(]?)\s*${number}${unit}\s*(["\])]?):?(?=[\s,;|:<>]|$)`, 'iy');
}

/** Takes the number of the line, the time and the mark of the sender off a line; what remains are its bytes. */
export function splitLogLine(line: string, style: LineStyle): LogLine {
  let at = style.hasOffsets ? after(OFFSET, line, 0) : 0;
  let stamp: LogStamp | null = null;
  let sender: Sender | null = null;
  for (let item = 0; item < MOST_ITEMS; item++) {
    at = after(GAP, line, at);
    const mark: RegExpExecArray | null =
      sender === null && !isDigit(line, at) ? matchAt(MARK, line, at) : null;
    if (mark !== null) {
      sender = senderOfMark(mark);
      at += mark[0].length;
      continue;
    }
    // A whole number in front of a time counts the lines.
    const found: FoundStamp | null =
      stamp === null || stamp.isInteger ? findStamp(line, at, style, stamp !== null) : null;
    if (found === null) break;
    stamp = found.stamp;
    at = found.end;
  }
  at = after(GAP, line, at);
  return { stamp, sender, payload: line.slice(at).trimEnd(), payloadAt: at };
}

/** The sender a text names; null where it is no mark. */
export function senderOf(text: string): Sender | null {
  const mark = matchAt(MARK, text, 0);
  if (mark === null || mark[0].length !== text.length) return null;
  return senderOfMark(mark);
}

function senderOfMark({ groups }: RegExpExecArray): Sender {
  return (groups?.['device'] ?? groups?.['receive']) === undefined ? 'host' : 'device';
}

function findStamp(line: string, at: number, style: LineStyle, isSecond: boolean): FoundStamp | null {
  const mayBeClock = line.slice(at, at + LONGEST_DATE).includes(':');
  const clock = mayBeClock ? longestClock(line, at, style.hasDecimalComma) : null;
  if (clock !== null) {
    const stamp: LogStamp = { kind: 'clock', text: clock.text, places: 0, isInteger: false };
    return { stamp, end: clock.end };
  }
  const match = matchAt(style.hasDecimalComma ? COMMA_NUMBER : POINT_NUMBER, line, at);
  if (match === null) return null;
  const [whole, opening, text, unit, closing] = match;
  const isInteger = /^[+-]?\d+$/.test(text);
  const isMarked = unit !== undefined || (opening !== '' && closing !== '');
  if (isInteger && !isMarked && (!style.hasIntegerStamps || isSecond)) return null;
  const places = unit === undefined ? null : (placesOfTimeUnit(unit) ?? null);
  return { stamp: { kind: 'number', text, places, isInteger }, end: at + whole.length };
}

/** A date, a clock and the half of a day may have blanks between them: the longest piece that is a time of day. */
function longestClock(
  line: string,
  at: number,
  hasComma: boolean,
): { readonly text: string; readonly end: number } | null {
  const piece = hasComma ? /\s*[^\s;|]+/y : /\s*[^\s,;|]+/y;
  let best: { text: string; end: number } | null = null;
  let end = at;
  for (let pieces = 0; pieces < 3; pieces++) {
    const more = matchAt(piece, line, end);
    if (more === null || !/\d/.test(line.slice(at, at + 2))) break;
    end += more[0].length;
    if (end - at > LONGEST_CLOCK) break;
    const text = line
      .slice(at, end)
      .replace(/^["[(]\s*/, '')
      .replace(/:$/, '')
      .replace(/\s*["\])]$/, '');
    if (isClockText(text)) best = { text, end };
  }
  return best;
}

function isDigit(line: string, at: number): boolean {
  const c = line.charCodeAt(at);
  return c >= 48 && c <= 57;
}

function matchAt(pattern: RegExp, text: string, at: number): RegExpExecArray | null {
  pattern.lastIndex = at;
  return pattern.exec(text);
}

function after(pattern: RegExp, text: string, at: number): number {
  return at + (matchAt(pattern, text, at)?.[0].length ?? 0);
}
