import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Capture } from '#shared/capture/capture';
import { CaptureError } from '#shared/capture/capture-error';
import { CsvReader } from '#shared/capture/csv-reader';
import type { FormatReader } from '#shared/capture/format-reader';
import { KeepRule } from '#shared/capture/format-reader';
import { bytesOf } from '#shared/capture/spec-texts';
import { VcdReader } from '#shared/capture/vcd-reader';

/** The fast way of reading and the plain one beside it come to the same captures and the same errors, however a file is damaged. */

/** Files of each kind; `EQUAL_READING_RUNS=50000` tries as many, in minutes. */
const RUNS = Number(process.env['EQUAL_READING_RUNS'] ?? 300);
const LONGEST_MS = 10_000 + RUNS * 100;
const NONE = new KeepRule([]);
const MICROSECOND = { numerator: 1n, denominator: 1_000_000n };

/** Deterministic levels: long rests, and bursts of changes. */
function levelAt(channel: number, step: number): 0 | 1 {
  const isBurst = (step >> 6) % 3 === channel % 3;
  return isBurst && ((Math.imul(step >> channel, 2654435761) >>> 28) & 1) === 1 ? 1 : 0;
}

interface TableStyle {
  readonly rows: number;
  readonly stepUnits: number;
  readonly jitter: number;
  readonly startUnits: number;
  readonly places: number;
  readonly separator: string;
  readonly decimal: string;
  readonly endOfLine: string;
  readonly quote: string;
  readonly channels: number;
  readonly numbered: boolean;
  readonly time: 'column' | 'exponent' | 'clock' | 'none';
  /** A column of voltages at the end. */
  readonly hasVolts: boolean;
}

const tableStyle: fc.Arbitrary<TableStyle> = fc.record({
  rows: fc.integer({ min: 70, max: 400 }),
  stepUnits: fc.constantFrom(1, 2, 5, 7, 10, 25, 100, 907, 1000, 20_000, 123_456),
  jitter: fc.constantFrom(0, 0, 0, 1, 3),
  startUnits: fc.constantFrom(0, 0, -1000, 99_000, 999_999_000, 123_456_789),
  places: fc.constantFrom(0, 2, 4, 6, 7, 9),
  separator: fc.constantFrom(',', ';', '\t'),
  decimal: fc.constantFrom('.', '.', ','),
  endOfLine: fc.constantFrom('\n', '\r\n', '\r'),
  quote: fc.constantFrom('', '', '"'),
  channels: fc.integer({ min: 1, max: 9 }),
  numbered: fc.boolean(),
  time: fc.constantFrom('column', 'column', 'column', 'column', 'exponent', 'clock', 'none'),
  hasVolts: fc.constantFrom(false, false, false, false, true),
});

function writeTime({ time, places }: TableStyle, seconds: number): string {
  if (time === 'exponent') return seconds.toExponential(6);
  if (time !== 'clock') return seconds.toFixed(places);
  const day = ((seconds % 86_400) + 86_400) % 86_400;
  const two = (value: number): string => `${Math.floor(value)}`.padStart(2, '0');
  const rest = (day % 60).toFixed(places).padStart(places === 0 ? 2 : places + 3, '0');
  return `${two(day / 3600)}:${two((day / 60) % 60)}:${rest}`;
}

function writeTable(style: TableStyle): string {
  const { quote, separator } = style;
  const decimal = separator === ',' && quote === '' ? '.' : style.decimal;
  const names = Array.from({ length: style.channels }, (_, k) => `D${k}`);
  const lines = [
    [
      ...(style.numbered ? ['Sample'] : []),
      ...(style.time === 'none' ? [] : ['Time (s)']),
      ...names,
      ...(style.hasVolts ? ['A0 (V)'] : []),
    ],
  ];
  for (let row = 0; row < style.rows; row++) {
    const jitter = style.jitter === 0 ? 0 : (row * 7) % (style.jitter + 1);
    const seconds = (style.startUnits + row * style.stepUnits + jitter) / 10 ** style.places;
    const time = style.time === 'none' ? [] : [writeTime(style, seconds).replace('.', decimal)];
    lines.push([
      ...(style.numbered ? [`${row}`] : []),
      ...time,
      ...names.map((_, k) => `${levelAt(k, row)}`),
      ...(style.hasVolts ? [(levelAt(1, row) * 18.5 - 9.25).toFixed(2).replace('.', decimal)] : []),
    ]);
  }
  return lines
    .map((cells) => cells.map((cell) => quote + cell + quote).join(separator) + style.endOfLine)
    .join('');
}

interface DumpStyle {
  readonly stamps: number;
  readonly stepUnits: number;
  readonly startUnits: number;
  readonly codes: readonly string[];
  readonly endOfLine: string;
  readonly busy: number;
}

const dumpStyle: fc.Arbitrary<DumpStyle> = fc.record({
  stamps: fc.integer({ min: 20, max: 400 }),
  stepUnits: fc.constantFrom(1, 3, 10, 500, 7_777, 10_000, 123_456, 100_000_000),
  startUnits: fc.constantFrom(
    0,
    5_000_000,
    99_999_000,
    9_999_990_000,
    123_456_789_012,
    9_007_199_254_700_000,
  ),
  codes: fc.constantFrom(['!', '"', '#'], ['b', '$', '0'], ['!!', '!"', '!'], ['abc', 'abcd', 'a']),
  endOfLine: fc.constantFrom('\n', '\n', '\r\n', ' ', '\t', '\n\n'),
  busy: fc.integer({ min: 0, max: 2 }),
});

function writeDump({ stamps, stepUnits, startUnits, codes, endOfLine, busy }: DumpStyle): string {
  const words = ['$timescale 1 ns $end', ...codes.map((code, k) => `$var wire 1 ${code} v${k} $end`)];
  words.push('$var wire 4 vec v [3:0] $end', '$var real 64 real volt $end', '$enddefinitions $end');
  const levels: number[] = codes.map(() => 2);
  for (let stamp = 0; stamp < stamps; stamp++) {
    words.push(`#${startUnits + stamp * stepUnits}`, `${stamp & 1}${codes[busy]}`);
    codes.forEach((code, k) => {
      if (k === busy || levelAt(k, stamp) === levels[k]) return;
      levels[k] = levelAt(k, stamp);
      words.push(`${levels[k]}${code}`);
    });
    if (stamp % 50 === 20) words.push(`b${(stamp % 16).toString(2)} vec`);
    if (stamp % 70 === 30) words.push('$comment', '#5', `1${codes[0]}`, '$end', `r${stamp / 4} real`);
    if (stamp % 90 === 40)
      words.push(
        '$dumpoff',
        `x${codes[0]}`,
        '$end',
        `#${startUnits + stamp * stepUnits + 1}`,
        '$dumpon',
        `1${codes[0]}`,
        '$end',
      );
  }
  return words.join(endOfLine) + endOfLine;
}

interface Damage {
  readonly kind: 'replace' | 'remove' | 'insert' | 'repeat' | 'cut';
  readonly at: number;
  readonly length: number;
  readonly text: string;
}

const damage: fc.Arbitrary<Damage> = fc.record({
  kind: fc.constantFrom('replace', 'replace', 'replace', 'remove', 'insert', 'repeat', 'cut'),
  at: fc.double({ min: 0, max: 0.999, noNaN: true }),
  length: fc.integer({ min: 1, max: 30 }),
  text: fc.oneof(
    fc.constantFrom(
      '0',
      '1',
      '9',
      '-',
      '.',
      ',',
      ';',
      '\n',
      '\r',
      '"',
      '#',
      ' ',
      'x',
      '#5',
      '0!',
      '\n#1\n',
      '1e3',
      '\0',
      '10',
    ),
    fc.string({ maxLength: 6 }),
  ),
});

function applyDamage(text: string, damages: readonly Damage[]): string {
  let result = text;
  for (const { kind, at, length, text: other } of damages) {
    const start = Math.floor(at * result.length);
    const end = Math.min(result.length, start + length);
    const [before, middle, after] = [result.slice(0, start), result.slice(start, end), result.slice(end)];
    if (kind === 'replace') result = before + other + result.slice(start + other.length);
    else if (kind === 'remove') result = before + after;
    else if (kind === 'insert') result = before + other + middle + after;
    else if (kind === 'repeat') result = before + middle + middle + after;
    else if (start > result.length / 2) result = before;
  }
  return result;
}

const damages = fc.array(damage, { maxLength: 4 });
const chunks = fc.constantFrom(1, 7, 64, 1000, 4096, 1_000_000);

function outcomeOf(reader: FormatReader, bytes: Uint8Array, chunk: number): Capture | string {
  try {
    for (let i = 0; i < bytes.length; i += chunk) reader.push(bytes.subarray(i, i + chunk));
    return reader.finish();
  } catch (error) {
    if (!(error instanceof CaptureError)) throw error;
    return `${error.code}: ${error.message} (${error.where})`;
  }
}

describe('the fast reader of tables', () => {
  it(
    'comes to what the reader cell by cell comes to',
    () => {
      fc.assert(
        fc.property(tableStyle, damages, chunks, (style, harm, chunk) => {
          const bytes = bytesOf(applyDamage(writeTable(style), harm));
          const fast = outcomeOf(new CsvReader(NONE, MICROSECOND), bytes, chunk);
          expect(fast).toEqual(outcomeOf(new CsvReader(NONE, MICROSECOND, false), bytes, 65_536));
        }),
        { numRuns: RUNS },
      );
    },
    LONGEST_MS,
  );
});

describe('the fast reader of dumps', () => {
  it(
    'comes to what the reader word by word comes to',
    () => {
      fc.assert(
        fc.property(dumpStyle, damages, chunks, (style, harm, chunk) => {
          const bytes = bytesOf(applyDamage(writeDump(style), harm));
          const fast = outcomeOf(new VcdReader(NONE), bytes, chunk);
          expect(fast).toEqual(outcomeOf(new VcdReader(NONE, false), bytes, 65_536));
        }),
        { numRuns: RUNS },
      );
    },
    LONGEST_MS,
  );

  it('counts the changes of a clock too busy to be kept as the other does', () => {
    const lines = [
      '$timescale 1 us $end $var wire 1 ! c $end $var wire 1 " d $end $enddefinitions $end',
      '#0',
      '0!',
      '0"',
    ];
    for (let i = 1; i <= 300_000; i++) {
      lines.push(`#${99_700_000 + i * 3}`, `${i & 1}!`);
      if (i % 30_000 === 0)
        lines.push('0!', '1!', `${(i / 30_000) & 1}"`, `#${99_700_000 + i * 3}`, `${(i >> 1) & 1}!`);
    }
    const bytes = bytesOf(`${lines.join('\n')}\n`);
    const fast = outcomeOf(new VcdReader(NONE), bytes, 65_536);
    expect(fast).toEqual(outcomeOf(new VcdReader(NONE, false), bytes, 65_536));
    expect(fast).toMatchObject({ channels: [{ isTooBusy: true }, { isTooBusy: false }] });
  });
});
