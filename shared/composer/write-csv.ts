import type { LineRole } from '../line/line-map';
import type { ComposedCapture } from './compose';
import { LineVoltage } from './line-voltage';
import type { VoltsLayout } from './line-voltage';
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
  /** Of `volts`. */
  readonly volts?: VoltsLayout;
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
  const noise = layout.volts?.noise ?? 0.1;
  const rows: Iterable<[number, string[]]> =
    layout.rows === 'volts'
      ? voltRows(capture, rate, layout.volts, (volts) => number(volts + random.signed() * noise, 3))
      : digitalRows(capture, layout.rows === 'changes' ? undefined : rate);
  let piece = '';
  for (const [at, cells] of rows) {
    const stamp = time === 'none' ? [] : [number(at / NS_PER_UNIT[time], DIGITS[time])];
    piece += [...stamp, ...cells].join(separator) + end;
    if (piece.length > 1 << 16) {
      yield piece;
      piece = '';
    }
  }
  yield piece;
}

function* digitalRows(capture: ComposedCapture, rate: number | undefined): Generator<[number, string[]]> {
  for (const [at, levels] of rate === undefined ? changeRows(capture) : sampleRows(capture, rate)) {
    yield [at, levels.map((level) => '01x'[level])];
  }
}

function* voltRows(
  capture: ComposedCapture,
  rate: number,
  layout: VoltsLayout | undefined,
  write: (volts: number) => string,
): Generator<[number, string[]]> {
  const lines = capture.lines.map((line) => new LineVoltage(line, layout));
  for (const at of sampleInstants(capture, rate)) yield [at, lines.map((line) => write(line.at(at)))];
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

function sampleRows(capture: ComposedCapture, rate: number): Generator<[number, number[]]> {
  return rowsAt(capture, sampleInstants(capture, rate));
}

function* sampleInstants(capture: ComposedCapture, rate: number): Generator<number> {
  const count = Math.floor((capture.durationNs * rate) / 1e9);
  for (let i = 0; i <= count; i++) yield (i * 1e9) / rate;
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
