import type { LineRole } from '../line/line-map';
import type { ComposedCapture } from './compose';
import { SeededRandom } from './random';
import { channelLevel } from './write-vcd';

export interface CsvLayout {
  /** One row a change, or one a sample. */
  readonly rows: 'changes' | 'samples' | 'volts';
  /** Of `samples` and `volts`. */
  readonly sampleRateHz?: number;
  readonly separator?: ',' | ';' | '\t';
  readonly decimalComma?: boolean;
  /** Unit of the time column; `none` leaves it out and states the rate in a comment line. */
  readonly time?: 's' | 'ms' | 'us' | 'ns' | 'none';
  readonly names?: Partial<Record<LineRole, string>>;
  readonly hasHeader?: boolean;
  readonly lineEnd?: '\n' | '\r\n';
  /** Voltages of a positive and a negative line, and peak noise, for `volts`. */
  readonly volts?: { readonly high: number; readonly low: number; readonly noise: number };
}

const NS_PER_UNIT = { s: 1e9, ms: 1e6, us: 1e3, ns: 1, none: 1 };
const DIGITS = { s: 9, ms: 6, us: 3, ns: 0, none: 0 };

/** A composed capture as CSV. Source: RFC 4180, section 2, and what protocol-facts 8.2 lists. Yields pieces of text. */
export function* writeCsv(capture: ComposedCapture, layout: CsvLayout): Generator<string> {
  const separator = layout.separator ?? ',';
  const end = layout.lineEnd ?? '\n';
  const time = layout.time ?? 's';
  const rate = layout.sampleRateHz ?? 100_000;
  if (time === 'none') yield `# sample rate ${rate} Hz${end}`;
  if (layout.hasHeader !== false) {
    const names = capture.lines.map((line) => layout.names?.[line.role] ?? line.role);
    yield [...(time === 'none' ? [] : [`time (${time})`]), ...names].join(separator) + end;
  }
  const number = (value: number, digits: number): string => {
    const text = value.toFixed(digits);
    return layout.decimalComma === true ? text.replace('.', ',') : text;
  };
  // A generator of its own, so that the same capture always has the same noise.
  const random = new SeededRandom(capture.seed ^ 0x5eed);
  let piece = '';
  for (const [at, levels] of layout.rows === 'changes' ? changeRows(capture) : sampleRows(capture, rate)) {
    const cells =
      layout.rows === 'volts'
        ? levels.map((level) => number(voltsOf(level, layout, random), 3))
        : levels.map(digital);
    const stamp = time === 'none' ? [] : [number(at / NS_PER_UNIT[time], DIGITS[time])];
    piece += [...stamp, ...cells].join(separator) + end;
    if (piece.length > 1 << 16) {
      yield piece;
      piece = '';
    }
  }
  yield piece;
}

function digital(level: number): string {
  return '01x'[level];
}

function voltsOf(level: number, layout: CsvLayout, random: SeededRandom): number {
  const { high, low, noise } = layout.volts ?? { high: 9, low: -9, noise: 0.1 };
  return (level === 1 ? high : level === 0 ? low : 0) + random.signed() * noise;
}

/** One row for each instant at which a line changes, and one for the end. */
function* changeRows(capture: ComposedCapture): Generator<[number, number[]]> {
  const instants = new Set<number>([capture.durationNs]);
  for (const line of capture.lines) for (const [at] of line.changes) instants.add(at);
  yield* rowsAt(
    capture,
    [...instants].sort((a, b) => a - b),
  );
}

function* sampleRows(capture: ComposedCapture, rate: number): Generator<[number, number[]]> {
  const count = Math.floor((capture.durationNs * rate) / 1e9);
  function* instants(): Generator<number> {
    for (let i = 0; i <= count; i++) yield (i * 1e9) / rate;
  }
  yield* rowsAt(capture, instants());
}

/** Channel levels at ascending instants. */
function* rowsAt(capture: ComposedCapture, instants: Iterable<number>): Generator<[number, number[]]> {
  const next = capture.lines.map(() => 0);
  const levels = capture.lines.map(() => 2);
  for (const at of instants) {
    capture.lines.forEach((line, i) => {
      for (; next[i] < line.changes.length && line.changes[next[i]][0] <= at; next[i]++) {
        levels[i] = channelLevel(line.role, line.polarity, line.changes[next[i]][1]);
      }
    });
    yield [at, [...levels]];
  }
}
