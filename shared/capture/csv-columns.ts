import { CalendarClock, isClockText, isDateText } from './calendar-clock';
import { HIGH, LOW, UNKNOWN } from './capture';
import { plainNumber } from './number-text';

/** What a column of a file holds. */
export interface CsvColumn {
  readonly index: number;
  readonly name: string;
  readonly kind: 'digital' | 'analog';
  /** Factor from the column's unit to volts. */
  readonly voltsPerUnit: number;
}

/** Where the time of a row comes from. */
export type TimeSource =
  /**
   * A column of times; `places`: 3 for milliseconds; null where no unit is stated. `usualStep`: from row to row, in its unit.
   * `isClock`: written as times of day.
   */
  | {
      readonly kind: 'column';
      readonly index: number;
      readonly places: number | null;
      readonly isInteger: boolean;
      readonly usualStep: number;
      readonly isClock: boolean;
    }
  /** A column that counts samples. */
  | { readonly kind: 'counts'; readonly index: number }
  /** Every row is one sample. */
  | { readonly kind: 'rows' };

export interface CsvColumns {
  readonly time: TimeSource;
  readonly channels: readonly CsvColumn[];
}

const TIME_WORDS = new Set(
  'time t zeit zeitpunkt zeitstempel timestamp timestamps stamp temps tiempo tempo tid tijd seconds second sec secs sekunden elapsed x'.split(
    ' ',
  ),
);
const COUNT_WORDS = new Set(
  'sample samples sampleno samplenr samplenumber index idx nr no n number # count counts counter tick ticks row zeile punkt point points messpunkt abtastwert i num'.split(
    ' ',
  ),
);
function wordMap<T>(entries: readonly (readonly [string, T])[]): ReadonlyMap<string, T> {
  return new Map(
    entries.flatMap(([words, value]) => words.split(' ').map((word): [string, T] => [word, value])),
  );
}

const TIME_UNIT_PLACES = wordMap<number>([
  ['s sec secs second seconds sekunde sekunden', 0],
  ['ms msec millis millisecond milliseconds millisekunden', 3],
  ['us usec µs μs micros microsecond microseconds mikrosekunden', 6],
  ['ns nsec nanos nanosecond nanoseconds nanosekunden', 9],
  ['ps picoseconds', 12],
  ['fs femtoseconds', 15],
]);
const VOLT_UNITS = wordMap<number>([
  ['v volt volts', 1],
  ['mv millivolt millivolts', 1e-3],
  ['kv', 1e3],
  ['uv µv μv', 1e-6],
]);
const LEVEL_WORDS = wordMap<number>([
  ['0 l low false off', LOW],
  ['1 h high true on', HIGH],
  ['x z u w ? -', UNKNOWN],
]);

/** Level a cell of a digital column states; undefined where it states none. Accepts `0`, `1.0`, `H`, `low`, `TRUE`, `x`. */
export function levelOfText(text: string): number | undefined {
  const word = LEVEL_WORDS.get(text.toLowerCase());
  if (word !== undefined) return word;
  if (/^[+-]?0+([.,]0*)?$/.test(text)) return LOW;
  return /^\+?0*1([.,]0*)?$/.test(text) ? HIGH : undefined;
}

const NUMBER = /^[+-]?(\d+([.,]\d*)?|[.,]\d+|\d{1,3}((,\d{3})+\.|(\.\d{3})+,)\d*)(e[+-]?\d+)?$/i;

export function isNumberText(text: string): boolean {
  return NUMBER.test(text) || NUMBER.test(plainNumber(text));
}

/** Decimal places of a time unit in seconds; undefined for a word that is none. */
export function placesOfTimeUnit(word: string): number | undefined {
  return TIME_UNIT_PLACES.get(word.toLowerCase());
}

/** The unit at the end of a header: `t (ns)`, `Time [s]`, `Zeit_ms`, `Time/us`, or the whole of it. */
function unitOfHeader(header: string): string {
  const [, bracketed] = /[[({]\s*([^\])}]*?)\s*[\])}]\s*$/.exec(header) ?? [];
  if (bracketed !== undefined) return bracketed.toLowerCase();
  const [last] = /[^\s_/,;:.-]+$/.exec(header.trim()) ?? [''];
  return last.toLowerCase();
}

/** The words of a header without a unit in brackets. */
function wordsOfHeader(header: string): string[] {
  const plain = header.replace(/[[({][^\])}]*[\])}]/g, ' ').replace(/([a-z])([A-Z])/g, '$1 $2');
  return plain.toLowerCase().split(/[\s_/,;:.-]+/).filter((word) => word !== ''); // prettier-ignore
}

/** Units of the columns from a row of their own, or from the header. */
function unitsOf(names: readonly string[], units: readonly string[]): string[] {
  return names.map((name, i) => (units[i] ?? '').replace(/[[\](){}]/g, '').trim().toLowerCase() || unitOfHeader(name)); // prettier-ignore
}

function toNumber(written: string): number {
  const text = plainNumber(written);
  const isGrouped = text.includes(',') && text.includes('.');
  const plain = isGrouped ? text.replaceAll(text.indexOf(',') < text.indexOf('.') ? ',' : '.', '') : text;
  return plain === '' ? NaN : Number(plain.replace(',', '.'));
}

interface ColumnFacts {
  /** All filled cells are numbers that never decrease. */
  readonly isRising: boolean;
  readonly isInteger: boolean;
  /** Whole numbers, each one more than the one before. */
  readonly isCounting: boolean;
  /** Times of day, or dates without one. */
  readonly isClock: boolean;
  readonly isDate: boolean;
  /** All filled cells state levels. */
  readonly isDigital: boolean;
  readonly distinct: number;
  /** Median difference of neighbours; NaN where there are none. */
  readonly usualStep: number;
}

function medianStep(numbers: readonly number[]): number {
  const steps = numbers.slice(1).map((value, i) => value - numbers[i]);
  return steps.sort((a, b) => a - b)[steps.length >> 1] ?? NaN;
}

function lookAt(cells: readonly string[]): ColumnFacts {
  const filled = cells.filter((cell) => cell !== '');
  const clock = new CalendarClock();
  // One damaged row among many must not hide what a column is.
  const isAlmostAll = (count: number): boolean => count >= Math.max(1, filled.length * 0.9);
  const isClock = isAlmostAll(filled.filter(isClockText).length);
  const numbers = isClock
    ? filled.map((cell) => Number(clock.toSeconds(cell) ?? NaN)).filter((value) => !Number.isNaN(value))
    : filled.filter(isNumberText).map(toNumber);
  const falls = numbers.filter((value, i) => i > 0 && value < numbers[i - 1]).length;
  const counts = numbers.filter((value, i) => i > 0 && value === numbers[i - 1] + 1).length;
  const isInteger = filled.length > 0 && numbers.every((value) => Number.isInteger(value));
  return {
    isRising: isAlmostAll(numbers.length) && falls <= numbers.length * 0.05,
    isInteger,
    isClock,
    isDate: isAlmostAll(filled.filter(isDateText).length),
    isCounting: isInteger && numbers.length > 2 && counts >= (numbers.length - 1) * 0.95,
    isDigital:
      filled.length === 0 || isAlmostAll(filled.filter((cell) => levelOfText(cell) !== undefined).length),
    distinct: new Set(filled).size,
    usualStep: medianStep(numbers),
  };
}

/**
 * Finds out what each column holds from its header and the first rows.
 * `names`: header cells, all empty without a header; `units`: cells of a row of units, or empty.
 */
export function assignColumns(
  names: readonly string[],
  unitRow: readonly string[],
  rows: readonly (readonly string[])[],
): CsvColumns {
  const units = unitsOf(names, unitRow);
  const facts = names.map((_, i) => lookAt(rows.map((row) => row[i] ?? '')));
  const time = findTime(names, units, facts);
  const skipped = new Set<number>();
  if (time.kind !== 'rows') skipped.add(time.index);
  names.forEach((name, i) => {
    if (facts[i].isDate || facts[i].isClock) skipped.add(i);
    if (time.kind === 'column' && isCountColumn(name, facts[i])) skipped.add(i);
  });
  const channels = names
    .map((name, index): CsvColumn => {
      const volts = VOLT_UNITS.get(units[index]);
      const saysVolts = volts !== undefined && (/[[({]/.test(name) || (unitRow[index] ?? '') !== '');
      const isAnalog = !facts[index].isDigital || saysVolts;
      return {
        index,
        name: name || `column ${index + 1}`,
        kind: isAnalog ? 'analog' : 'digital',
        voltsPerUnit: volts ?? 1,
      };
    })
    .filter(({ index }) => !skipped.has(index));
  return { time, channels };
}

function isCountColumn(name: string, facts: ColumnFacts): boolean {
  const words = wordsOfHeader(name);
  if (name === '') return facts.isCounting && facts.distinct > 2;
  return (
    words.some((word) => COUNT_WORDS.has(word)) && facts.isInteger && facts.isRising && facts.distinct > 2
  );
}

function findTime(
  names: readonly string[],
  units: readonly string[],
  facts: readonly ColumnFacts[],
): TimeSource {
  const places = units.map(placesOfTimeUnit);
  const asColumn = (index: number): TimeSource => ({
    kind: 'column',
    index,
    places: facts[index].isClock ? 0 : (places[index] ?? null),
    isInteger: facts[index].isInteger,
    usualStep: facts[index].usualStep,
    isClock: facts[index].isClock,
  });
  const clock = facts.findIndex(({ isClock }) => isClock);
  const words = names.map(wordsOfHeader);
  const isSpelledOut = (i: number): boolean =>
    words[i].some((word) => TIME_WORDS.has(word) && word.length > 3);
  // The few times of a short table may look like levels; nobody calls a channel “time”.
  const mayBeTime = (i: number): boolean =>
    facts[i].isRising && (facts[i].distinct > 2 || !facts[i].isDigital || isSpelledOut(i));
  const isTimeName = (i: number): boolean =>
    words[i].some((word) => TIME_WORDS.has(word)) ||
    (places[i] !== undefined && (words[i].length <= 2 || names[i].includes('(') || names[i].includes('[')));
  const named = names.findIndex((name, i) => isTimeName(i) && mayBeTime(i) && !isOnlyCount(words[i]));
  if (named >= 0) return asColumn(named);
  if (clock >= 0) return asColumn(clock);
  const counted = names.findIndex((name, i) => name !== '' && isCountColumn(name, facts[i]));
  if (counted >= 0) return { kind: 'counts', index: counted };
  if (!mayBeTime(0)) {
    // A header that says time is believed even where the rows do not rise: the reader then tells where they do not.
    const claimed = names.findIndex((_, i) => isSpelledOut(i));
    return claimed >= 0 && !facts[claimed].isDigital ? asColumn(claimed) : { kind: 'rows' };
  }
  if (facts[0].isCounting && names.length > 2 && mayBeTime(1) && !facts[1].isDigital) return asColumn(1);
  return facts[0].isCounting ? { kind: 'counts', index: 0 } : asColumn(0);
}

/** `Sample` alone counts; `Sample time` is a time. */
function isOnlyCount(words: readonly string[]): boolean {
  return words.length > 0 && words.every((word) => COUNT_WORDS.has(word));
}
