import { isClockText } from './calendar-clock';
import { isNumberText, levelOfText, placesOfTimeUnit } from './csv-columns';
import type { LineStyle, LogLine } from './log-line';
import { splitLogLine } from './log-line';
import type { LogPayload, Notation } from './log-payload';
import { isUnmistakable, parseNumbers, parseText } from './log-payload';

/** How a log is written, found from its beginning. */
export interface LogLayout extends LineStyle {
  readonly notation: Notation;
  /** Any line has a time. */
  readonly hasStamps: boolean;
  /** Decimal places of the unit of the times in seconds. */
  readonly places: number;
  /** Lines at the top that name columns or tell about the file. */
  readonly headerLines: number;
}

/** Lines looked at, and the characters of each in which its time must stand. */
const MOST_LINES = 400;
const BEGIN = 100;
const MOST_HEADER_LINES = 20;
/** Share of the lines that must read as bytes: some may be damaged. */
const MANY = 0.6;
const MOSTLY = 0.8;
const ALMOST_ALL = 0.9;
/** Lines without times or marks are bytes only where this many stand in them. */
const FEW_BYTES = 3;

/** Lines that name a control line tell about it and hold no bytes. */
const CONTROL_LINE = /^(RTS|DTR|CTS|DSR|DCD|CD|RI)\b/i;

export function isAboutControlLine(payload: string): boolean {
  return CONTROL_LINE.test(payload);
}

export function isLogComment(line: string): boolean {
  return /^\s*(#|;|\/\/)/.test(line);
}

export function parsePayload(payload: string, notation: Notation): LogPayload {
  return notation === 'text' ? parseText(payload) : parseNumbers(payload, notation);
}

/** Reads the beginning of a file, of which the last line may be incomplete, as a byte log; null where it is none. */
export function findLogLayout(text: string): LogLayout | null {
  const lines = text.split(/\r\n|\n|\r/, MOST_LINES);
  // The last line may be cut.
  const whole = lines.slice(0, lines.length > 1 ? -1 : 1).filter((line) => line.trim() !== '');
  const notes = whole.filter(isLogComment);
  const rows = whole.filter((line) => !isLogComment(line));
  if (rows.length === 0) return null;
  for (const notation of notationsOf(notes, rows)) {
    const layout = tryNotation(notation, notes, rows);
    if (layout !== null) return layout;
  }
  return null;
}

function notationsOf(notes: readonly string[], rows: readonly string[]): readonly Notation[] {
  const head = [...notes, ...rows.slice(0, MOST_HEADER_LINES)].filter((line) => /[g-z]{2}/i.test(line));
  return head.some((line) => /\bdec(imal)?\b/i.test(line)) ? ['decimal'] : ['hex', 'text'];
}

function tryNotation(
  notation: Notation,
  notes: readonly string[],
  rows: readonly string[],
): LogLayout | null {
  const style = findStyle(rows);
  const split = rows.map((row) => splitLogLine(row, style));
  const first = split.findIndex((line) => isRow(line, notation, style));
  if (first < 0 || first > MOST_HEADER_LINES) return null;
  const body = split.slice(first).filter(({ payload }) => !isAboutControlLine(payload));
  const good = body.filter((line) => isRow(line, notation, style));
  if (good.length < body.length * MANY || !isConvincing(good, notation, style)) return null;
  const stamps = good.flatMap(({ stamp }) => (stamp === null ? [] : [stamp]));
  const stated = statedPlaces([...notes, ...rows.slice(0, first)]);
  const isInteger = stamps.every((stamp) => stamp.isInteger && stamp.places === null);
  return {
    ...style,
    notation,
    hasStamps: stamps.length > 0,
    places: stated ?? (isInteger ? likelyPlaces(stamps.map(({ text }) => Number(text))) : 0),
    headerLines: rows.slice(0, first).length,
  };
}

/** The line holds bytes and nothing that is none. */
function isRow(line: LogLine, notation: Notation, style: LineStyle): boolean {
  const { values, badAt, sender } = parsePayload(line.payload, notation);
  if (values.length === 0 || badAt >= 0) return false;
  if (notation === 'text') {
    const isQuoted = /^["']/.test(line.payload);
    return line.stamp !== null && (isQuoted || (line.sender ?? sender) !== null);
  }
  const isMarked = line.stamp !== null || line.sender !== null || sender !== null || style.hasOffsets;
  return isMarked || isRunOfPairs(line.payload, values.length);
}

/** Bytes written one by one, or in one run of digits: words of letters from a to f are no bytes. */
function isRunOfPairs(payload: string, count: number): boolean {
  const words = payload.split(/[\s,;:|-]+/).filter((word) => word !== '');
  const arePairs = words.every((word) => /^((0x|\\x|\$)?[0-9a-f]{2}h?|\|.*)$/i.test(word));
  return arePairs || (words.length === 1 && count >= FEW_BYTES && /\d/.test(payload));
}

/** A table of levels or voltages can look like a log of a few digits: something must be there that only a log has. */
function isConvincing(good: readonly LogLine[], notation: Notation, style: LineStyle): boolean {
  const share = (test: (line: LogLine) => boolean): number => good.filter(test).length / good.length;
  const marked = share(
    (line) => line.sender !== null || parsePayload(line.payload, notation).sender !== null,
  );
  const stamped = share(({ stamp }) => stamp !== null);
  if (notation === 'text') {
    if (share(({ payload }) => payload.split(/[\s,;|]+/).every(isLevel)) > 0.5) return false;
    const quoted = share(({ payload }) => isQuotedText(payload));
    return stamped >= ALMOST_ALL && (marked >= ALMOST_ALL || quoted > 0.5);
  }
  if (notation === 'decimal') return stamped >= ALMOST_ALL || marked >= ALMOST_ALL;
  const plain = share(({ payload }) => isUnmistakable(payload));
  if (stamped + marked > 0 || style.hasOffsets) return plain > 0 || marked >= MOSTLY;
  const bytes = good.reduce((sum, { payload }) => sum + parseNumbers(payload, 'hex').values.length, 0);
  return plain > 0 && bytes >= FEW_BYTES && good.every(({ payload }) => /\d/.test(payload));
}

function isLevel(cell: string): boolean {
  return levelOfText(cell.replaceAll('"', '')) !== undefined;
}

/** Text in quotes that is no cell of a table. */
function isQuotedText(payload: string): boolean {
  const [, inside] = /^"([^"]*)"/.exec(payload) ?? /^'([^']*)'/.exec(payload) ?? [];
  return (
    inside !== undefined && levelOfText(inside) === undefined && !isNumberText(inside) && !isClockText(inside)
  );
}

const COMMA_TIME = /^\W*(?:[\d./-]+[T\s]\s*)?(?:\d+:)*\d+,(\d+)\s*(s|ms|us|µs|μs|ns)?["\])]?([\s;|:]|$)/i;

function findStyle(all: readonly string[]): LineStyle {
  const header = all.findIndex((row) => /^\W*([a-z<>-]+\W+)?\d/i.test(row.slice(0, BEGIN)));
  const whole = all.slice(Math.max(0, header));
  const hasOffsets = areOffsets(whole);
  const rows = whole.map((row) => row.slice(0, BEGIN));
  const withComma = rows.filter((row) => {
    const [whole, digits = '', unit, next = ''] = COMMA_TIME.exec(row) ?? [];
    return whole !== undefined && (digits.length > 2 || unit !== undefined || /[;|\t]/.test(next));
  });
  return {
    hasOffsets,
    hasDecimalComma: withComma.length > rows.length / 2,
    hasIntegerStamps: !hasOffsets && areStamps(rows),
  };
}

/** Numbers at the begin of most lines that never fall, and are no column of bytes: whole ones are times too. */
function areStamps(rows: readonly string[]): boolean {
  const firsts = rows.flatMap((row) => {
    const [, mark = '', digits] =
      /^\W*((?:rxd?|txd?|in|out)\W+)?(\d+(?:[.,]\d+)?)["\])]?(?=[\s,;|:])\s*\S/i.exec(row) ?? [];
    return digits === undefined
      ? []
      : [{ digits, rest: row.slice(row.indexOf(digits) + digits.length), mark }];
  });
  if (firsts.length === 0 || firsts.length < rows.length * MOSTLY) return false;
  const falls = firsts.filter(
    ({ digits }, i) => i > 0 && toNumber(digits) < toNumber(firsts[i - 1].digits),
  ).length;
  if (falls > firsts.length * 0.1) return false;
  if (firsts.every(({ rest }) => /^["\])]?\s*[,;|:\t]/.test(rest))) return true;
  const isEqual = firsts.every(({ digits, rest }) => rest.trim().split(/\s+/)[0].length === digits.length);
  return firsts.some(({ digits }) => digits.length !== 2) && !isEqual;
}

function toNumber(digits: string): number {
  return Number(digits.replace(',', '.'));
}

/** `00000000`, `00000010` and so on, each as far on as the line before has bytes. */
function areOffsets(rows: readonly string[]): boolean {
  let expected = 0;
  return rows.every((row, i) => {
    const [all = '', digits] = /^\s*([0-9a-f]{4,8}):?(?=\s)/i.exec(row) ?? [];
    if (digits === undefined || parseInt(digits, 16) !== expected) return false;
    expected += parseNumbers(row.slice(all.length), 'hex').values.length;
    return i > 0 || /^0+$/.test(digits);
  });
}

/** Unit of the times as a header or comment states it. */
function statedPlaces(lines: readonly string[]): number | null {
  for (const line of lines) {
    const [, unit] =
      /\b(?:time|timestamp|stamp|zeit|t|elapsed)(?:[\s_-]*unit)?[\s_]*[[(/:=_,]?\s*(?:in\s+)?(s|sec|seconds|ms|milliseconds|us|µs|μs|microseconds|ns|nanoseconds)\b/i.exec(
        line.slice(0, BEGIN),
      ) ?? [];
    const places = unit === undefined ? undefined : placesOfTimeUnit(unit);
    if (places !== undefined) return places;
  }
  return null;
}

/** Bytes follow each other at some milliseconds: the unit in which whole numbers do so. Seconds where none fits. */
function likelyPlaces(stamps: readonly number[]): number {
  const steps = stamps
    .slice(1)
    .map((stamp, i) => stamp - stamps[i])
    .filter((step) => step > 0);
  const usual = steps.sort((a, b) => a - b)[steps.length >> 2];
  if (usual === undefined) return 0;
  return [3, 6, 9].find((places) => usual / 10 ** places >= 0.0005 && usual / 10 ** places < 0.5) ?? 0;
}
