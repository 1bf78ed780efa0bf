import { isClockText, isDateText } from './calendar-clock';
import { CaptureError } from './capture-error';
import type { CsvColumns } from './csv-columns';
import { assignColumns, isNumberText, levelOfText, placesOfTimeUnit } from './csv-columns';
import type { CsvRecord } from './csv-records';
import { splitRecords } from './csv-records';
import type { SampleInterval } from './stated-rate';
import { findStatedInterval } from './stated-rate';
import { decodeText, quoteForMessage } from './text-bytes';

const SEPARATORS = [',', ';', '\t', '|'];
/** Records by which the separator is chosen, and those by which columns are judged. */
const FEW_RECORDS = 300;
const MANY_RECORDS = 1200;
/** No instrument has that many channels; a spreadsheet that lost its line breaks has. */
const MOST_COLUMNS = 4096;

/** How a file is written, found from its beginning. */
export interface CsvDialect {
  readonly separator: string;
  /** `','`, `'.'`, or null where no number of the beginning has a fraction. */
  readonly decimal: ',' | '.' | null;
  readonly fieldCount: number;
  /** Offset and 1-based line of the first row of data. */
  readonly dataStart: number;
  readonly dataLine: number;
  readonly columns: CsvColumns;
  /** Length of a sample as the preamble states it. */
  readonly statedInterval: SampleInterval | null;
  /** Unit of the time column as the preamble states it, in decimal places of a second. */
  readonly statedPlaces: number | null;
}

interface Reading {
  readonly separator: string;
  readonly records: readonly CsvRecord[];
  readonly fieldCount: number;
  readonly rowCount: number;
}

function withoutTrailing(cells: readonly string[]): readonly string[] {
  let count = cells.length;
  while (count > 0 && cells[count - 1] === '') count -= 1;
  return cells.slice(0, count);
}

function isDataCell(cell: string): boolean {
  return (
    cell === '' ||
    isNumberText(cell) ||
    levelOfText(cell) !== undefined ||
    isClockText(cell) ||
    isDateText(cell) ||
    /^[+-]?(inf(inity)?|nan)$/i.test(cell)
  );
}

/** Numbers and levels only, and at least one of them. */
function isDataRow(cells: readonly string[]): boolean {
  return (
    cells.every(isDataCell) && cells.some((cell) => isNumberText(cell) || levelOfText(cell) !== undefined)
  );
}

function isComment(record: CsvRecord, separator: string): boolean {
  const first = record.cells[0];
  return first.startsWith('#') || first.startsWith('//') || (separator !== ';' && first.startsWith(';'));
}

/** The field count most rows of data have, and how many have it. */
function measure(separator: string, bytes: Uint8Array, most: number): Reading {
  const records = splitRecords(bytes, separator, most);
  const counts = new Map<number, number>();
  for (const { cells } of records) {
    if (cells.length <= MOST_COLUMNS && isDataRow(cells)) {
      const count = Math.max(1, withoutTrailing(cells).length);
      counts.set(count, (counts.get(count) ?? 0) + 1);
    }
  }
  let fieldCount = 0;
  let rowCount = 0;
  for (const [count, rows] of counts) {
    // Rows whose last cells are empty are as wide as their neighbours.
    if (rows > rowCount || (rows * 2 > rowCount && count > fieldCount))
      [fieldCount, rowCount] = [count, rows];
  }
  return { separator, records, fieldCount, rowCount };
}

/**
 * Finds separator, decimal sign, header, columns and stated rate. `bytes`: the beginning of the file without a byte-order mark.
 * Throws `CaptureError` where there are no rows of data.
 */
export function findDialect(bytes: Uint8Array): CsvDialect {
  const [, declared] = /^sep=(.)\r?\n/i.exec(String.fromCharCode(...bytes.subarray(0, 8))) ?? [];
  const candidates = declared === undefined ? SEPARATORS : [declared];
  const readings = candidates.map((separator) => measure(separator, bytes, FEW_RECORDS));
  const score = ({ rowCount, fieldCount }: Reading): number =>
    fieldCount > 1 ? rowCount * 1000 + fieldCount : rowCount;
  const best = readings.reduce((a, b) => (score(b) > score(a) ? b : a));
  refuseUnreadable(best, readings, bytes);
  return describe(measure(best.separator, bytes, MANY_RECORDS), bytes);
}

function refuseUnreadable(best: Reading, readings: readonly Reading[], bytes: Uint8Array): void {
  const wide = readings.find(({ records }) => records.some(({ cells }) => cells.length > MOST_COLUMNS));
  const widest = wide?.records.find(({ cells }) => cells.length > MOST_COLUMNS);
  if (widest !== undefined && best.rowCount < 2) {
    const message = `a line has ${widest.cells.length} columns or more, at most ${MOST_COLUMNS} can be read`;
    throw new CaptureError('too-many-columns', message, { line: widest.line, byte: widest.start });
  }
  const unclosed = best.records.find(({ isUnclosed }) => isUnclosed);
  if (best.rowCount === 0 && unclosed !== undefined) {
    throw new CaptureError('unclosed-quote', 'a quote is opened and never closed', {
      line: unclosed.line,
      byte: unclosed.start,
    });
  }
  const filled = best.records.filter(({ cells }) => cells.some((cell) => cell !== ''));
  const isProse =
    best.rowCount === 0 || best.rowCount * 4 < filled.length || (best.fieldCount === 1 && best.rowCount < 8);
  if (!isProse) return;
  const header = readings.find(
    ({ records }) => records.length <= 3 && records.some(({ cells }) => isHeader(cells)),
  );
  if (best.rowCount === 0 && header !== undefined && filled.length <= 2) {
    throw new CaptureError('no-rows', 'the table has a header but no rows of numbers or levels', {
      line: 1,
      byte: 0,
    });
  }
  const first = filled[0] ?? { line: 1, start: 0, end: 0 };
  const shown = quoteForMessage(bytes.subarray(first.start, Math.max(first.start, first.end - 1)));
  throw new CaptureError(
    'not-a-capture',
    `no rows of numbers or levels follow; the text begins with ${shown}`,
    { line: first.line, byte: first.start },
  );
}

/** Short words, one of which says time or carries a unit. */
function isHeader(cells: readonly string[]): boolean {
  const isShort = cells.length > 1 && cells.every((cell) => cell.length <= 40);
  return (
    isShort && cells.some((cell) => /^#?\s*(t|time|zeit|timestamp|sample|index)\b|[[(]\w+[\])]$/i.test(cell))
  );
}

function describe(reading: Reading, bytes: Uint8Array): CsvDialect {
  const { separator, records, fieldCount } = reading;
  const isRow = ({ cells }: CsvRecord): boolean =>
    isDataRow(cells) && withoutTrailing(cells).length <= fieldCount;
  const isFull = (record: CsvRecord): boolean => isRow(record) && record.cells.length >= fieldCount;
  let first = records.findIndex(
    (record, i) =>
      isFull(record) &&
      !isComment(record, separator) &&
      (i + 1 >= records.length || records.slice(i + 1, i + 4).some(isFull)),
  );
  const head = findHeader(records, first, fieldCount, separator);
  first = head.firstRow;
  if (records[first] === undefined) {
    throw new CaptureError('not-a-capture', 'no row of numbers or levels follows the header', {
      line: records[0]?.line ?? 1,
    });
  }
  const rows = records
    .slice(first)
    .filter(isRow)
    .map(({ cells }) => cells);
  const preamble = records
    .slice(0, first)
    .map(({ start, end }) => decodeText(bytes.subarray(start, Math.min(end, start + 500))));
  return {
    separator,
    decimal: findDecimal(rows),
    fieldCount,
    dataStart: records[first].start,
    dataLine: records[first].line,
    columns: assignColumns(head.names, head.units, rows),
    statedInterval: firstOf(preamble, findStatedInterval),
    statedPlaces: firstOf(preamble, findStatedUnit),
  };
}

function firstOf<T>(lines: readonly string[], find: (line: string) => T | null): T | null {
  for (const line of lines) {
    const found = find(line);
    if (found !== null) return found;
  }
  return null;
}

/** `Time unit: ms`, `Zeiteinheit;us`. */
function findStatedUnit(line: string): number | null {
  const [, word] =
    /(?:time|zeit|horizontal|x)[\s_-]*(?:unit|einheit)\w*[\s:=,;"|]*([a-zµμ]+)/i.exec(line) ?? [];
  return word === undefined ? null : (placesOfTimeUnit(word) ?? null);
}

const UNIT_CELL = /^[[({]?(s|ms|us|µs|μs|ns|ps|sec|seconds|m?v|volts?|bool|logic|digital|bit|-|)[\])}]?$/i;

interface Head {
  readonly names: readonly string[];
  readonly units: readonly string[];
  readonly firstRow: number;
}

/** Rows of units and damaged rows between header and data are looked through up to this many lines. */
const FARTHEST_HEADER = 6;

/** The header is the last line of text above the rows that has a name for each column; a row of units may stand below it. */
function findHeader(
  records: readonly CsvRecord[],
  first: number,
  fieldCount: number,
  separator: string,
): Head {
  const isPossible = (cells: readonly string[]): boolean =>
    cells.length > 0 && (cells.length >= fieldCount - 1 || isNearHeader(cells, fieldCount));
  const above = Array.from({ length: Math.min(first, FARTHEST_HEADER) }, (_, k) => first - 1 - k);
  const cellsOf = (i: number): readonly string[] => withoutMark(withoutTrailing(records[i].cells));
  const candidates = above.filter((i) => isPossible(cellsOf(i)) && !isUnitRow(records[i].cells, fieldCount));
  const header =
    candidates.find((i) => isNames(cellsOf(i))) ??
    candidates.find((i) => cellsOf(i).filter(isDataCell).length * 2 <= cellsOf(i).length);
  if (header === undefined)
    return { names: Array.from({ length: fieldCount }, () => ''), units: [], firstRow: first };
  const between = above.filter((i) => i > header);
  const unitRow = between.find((i) => isUnitRow(records[i].cells, fieldCount));
  // Damaged rows: reading begins with them, so that they are reported.
  const damaged = between.filter(
    (i) => i !== unitRow && cellsOf(i).length > 0 && !isComment(records[i], separator),
  );
  return {
    names: Array.from({ length: fieldCount }, (_, k) => cellsOf(header)[k] ?? ''),
    units: unitRow === undefined ? [] : withoutMark(records[unitRow].cells),
    firstRow: Math.min(first, ...damaged),
  };
}

/** Names only, or a time beside names that may be numbers. */
function isNames(cells: readonly string[]): boolean {
  return !cells.some((cell) => cell !== '' && isDataCell(cell)) || /^(t|time|zeit)\b/i.test(cells[0]);
}

function isUnitRow(cells: readonly string[], fieldCount: number): boolean {
  const filled = withoutMark(cells);
  return (
    filled.length >= fieldCount - 1 &&
    filled.some((cell) => cell !== '') &&
    filled.every((cell) => UNIT_CELL.test(cell))
  );
}

function isNearHeader(cells: readonly string[], fieldCount: number): boolean {
  return fieldCount > 2 && cells.length >= fieldCount / 2 && cells.every((cell) => !isDataCell(cell));
}

function withoutMark(cells: readonly string[]): readonly string[] {
  return cells.map((cell, i) => (i === 0 ? cell.replace(/^(#|;|\/\/)+\s*/, '') : cell));
}

/** Decimal comma or point, by what the numbers of the beginning have. */
function findDecimal(rows: readonly (readonly string[])[]): ',' | '.' | null {
  let commas = 0;
  let points = 0;
  for (const row of rows) {
    for (const cell of row) {
      if (!isNumberText(cell)) continue;
      if (cell.includes(',')) commas += 1;
      else if (cell.includes('.')) points += 1;
    }
  }
  if (commas === 0 && points === 0) return null;
  return commas >= points ? ',' : '.';
}
