import type { CsvChannels } from './csv-channels';
import type { TimeSource } from './csv-columns';
import type { CsvRow } from './csv-row';
import type { DecimalClock, LinearScale } from './decimal-clock';
import { fourDigits, isFourDigits } from './digit-words';
import type { DigitalRecorder } from './digital-recorder';
import type { RowSpacing } from './row-spacing';

const ZERO = 0x30;
const NINE = 0x39;

/** Where the parts of a row stand that was read cell by cell, as offsets from its first byte. */
interface RowShape {
  /** Bytes of the row with its end of line. */
  readonly length: number;
  /** The time cell, without quotes. All channel cells stand behind it. */
  readonly timeStart: number;
  readonly timeEnd: number;
  /** Place of the only character of each channel's cell, in rising order. */
  readonly cells: readonly number[];
  /** 1 for each byte of a column that is no channel: other digits there mean nothing. */
  readonly ignored: Uint8Array;
}

/** What of a table the rows need. */
interface PredictedTable {
  readonly time: TimeSource;
  readonly fieldCount: number;
  readonly clock: DecimalClock;
  readonly channels: CsvChannels;
  readonly lastTicks: number;
}

/**
 * Reads rows that look like the one before without looking for separators: in a table of samples a row differs from its
 * predecessor in some digits of its time and, rarely, in a level. Whatever looks different in any other way is left to the reader
 * that goes cell by cell, so both come to the same result. Only for tables of digital channels behind a time column.
 *
 * The loops are long because a call or an object per row would cost more than the row.
 */
export class PredictedRows {
  /** Ticks of the last row taken. */
  ticks = 0;
  /** Rows taken by the last `take`. */
  rows = 0;

  private shape: RowShape = { length: 0, timeStart: 0, timeEnd: 0, cells: [], ignored: new Uint8Array(0) };
  private scale: LinearScale = { factor: 1, divisor: 1, origin: 0 };
  /** Four digits of the time that count the rows; what stands above and below them stays the same for many rows. */
  private window = 0;
  private ticksPerWindowStep = 1;

  constructor(
    private readonly recorders: readonly DigitalRecorder[],
    private readonly spacing: RowSpacing,
  ) {}

  /**
   * Prepares for rows like the one that was just taken; `next` is the offset behind its end of line, `timeScale` tells the digits
   * after the point of its time. False: rows of this shape must be read cell by cell.
   */
  prepare(bytes: Uint8Array, row: CsvRow, next: number, table: PredictedTable, timeScale: number): boolean {
    if (table.time.kind !== 'column' || table.channels.hasAnalog || next - row.start < 8) return false;
    const timeStart = row.starts[table.time.index] - row.start;
    const timeEnd = row.ends[table.time.index] - row.start;
    const scale = table.clock.linear(timeEnd - timeStart, timeScale);
    if (scale === null || !isDigit(bytes[row.start + timeStart])) return false;
    const shape = findShape(row, next - row.start, timeStart, timeEnd, table);
    if (shape === null || !this.placeWindow(bytes, row.start, shape, scale)) return false;
    this.shape = shape;
    this.scale = scale;
    this.ticks = table.lastTicks;
    return true;
  }

  /** Finds the four digits of the time that count the rows. */
  private placeWindow(bytes: Uint8Array, start: number, shape: RowShape, scale: LinearScale): boolean {
    let zeros = 0;
    // Digits below the step of the samples never change.
    let step = (this.spacing.usual * scale.divisor) / scale.factor;
    for (; step >= 10 && step % 10 === 0; step /= 10) zeros += 1;
    const ticksPerWindowStep = (scale.factor * 10 ** zeros) / scale.divisor;
    const window = shape.timeEnd - zeros - 4;
    if (!Number.isInteger(ticksPerWindowStep) || window < shape.timeStart) return false;
    for (let i = window; i < shape.timeEnd; i++) if (!isDigit(bytes[start + i])) return false;
    this.window = window;
    this.ticksPerWindowStep = ticksPerWindowStep;
    return true;
  }

  /**
   * Takes as many rows as fit, beginning with the one at `start`; the row before it stands directly in front and is the one that
   * was prepared or taken last. Returns the offset of the first row that does not fit.
   */
  take(bytes: Uint8Array, view: DataView, start: number): number {
    this.rows = 0;
    let i = start;
    // Where rows never repeat the search for repetitions is left out for more and more of them.
    let skips = 0;
    let failures = 0;
    for (;;) {
      if (skips > 0) {
        skips -= 1;
      } else {
        const repeated = this.takeUnchanged(bytes, view, i);
        failures = repeated === i ? Math.min(failures + 1, 6) : 0;
        skips = failures < 3 ? 0 : 1 << failures;
        i = repeated;
      }
      const next = this.takeChanged(bytes, i);
      if (next === i) return i;
      i = next;
    }
  }

  /** Rows that differ from the one before only in the window, rising. */
  private takeUnchanged(bytes: Uint8Array, view: DataView, start: number): number {
    const { length } = this.shape;
    const { window, ticksPerWindowStep, spacing } = this;
    const last = bytes.length - length;
    if (start > last || start - length + window < 4) return start;
    const before = start - length;
    // Words that must not change. Above the window; one that begins before the row covers the end of the row in front, which is equal.
    const upper = window - 4;
    const upperWord = view.getInt32(before + upper, true);
    const head = window > 4 ? 0 : upper;
    const headWord = view.getInt32(before + head, true);
    // Below it: where less than a word is left, the bytes of the window are masked out.
    const hasLower = window + 8 <= length;
    const lower = hasLower ? window + 4 : length - 4;
    const lowerMask = hasLower ? -1 : -1 << (8 * (window + 4 - lower));
    const lowerWord = view.getInt32(before + lower, true) & lowerMask;
    const tail = hasLower ? length - 4 : upper;
    const tailWord = view.getInt32(before + tail, true);
    const hasMiddle = window > 8 || length - (window + 4) > 8;

    // Where the interval is no whole number of steps no spacing can equal it.
    const usual = spacing.usual / ticksPerWindowStep;
    const usualStep = Number.isInteger(usual) && usual < 10_000 ? usual | 0 : -1;
    // Without a carry the next time is the same text with the last digit `step` higher.
    const wordStep = usualStep > 0 && usualStep < 10 ? usualStep << 24 : 0x7f000000;
    const first = fourDigits(view.getInt32(before + window, true));
    let word = view.getInt32(before + window, true);
    let value = first;
    let unusualRows = 0;
    let i = start | 0;
    for (; i <= last; i = (i + length) | 0) {
      if (((view.getInt32(i + tail, true) ^ tailWord) | (view.getInt32(i + upper, true) ^ upperWord)) !== 0)
        break;
      if (
        ((view.getInt32(i + head, true) ^ headWord) |
          ((view.getInt32(i + lower, true) & lowerMask) ^ lowerWord)) !==
        0
      )
        break;
      if (hasMiddle && !this.isMiddleEqual(bytes, i)) break;
      const expected = (word + wordStep) | 0;
      word = view.getInt32(i + window, true);
      if (word === expected && word >> 24 <= NINE) {
        value = (value + usualStep) | 0;
        continue;
      }
      if (!isFourDigits(word)) break;
      const next = fourDigits(word);
      const step = (next - value) | 0;
      if (step !== usualStep) {
        if (step < 0) break;
        spacing.takeUnusual(step * ticksPerWindowStep);
        unusualRows = (unusualRows + 1) | 0;
      }
      value = next;
    }
    const rows = (i - start) / length;
    spacing.takeUsual(rows - unusualRows);
    this.ticks += (value - first) * ticksPerWindowStep;
    spacing.addUnchanged(rows, this.ticks);
    this.rows += rows;
    return i;
  }

  /** For long rows: the bytes that the words at both ends do not cover. */
  private isMiddleEqual(bytes: Uint8Array, start: number): boolean {
    const { length } = this.shape;
    const before = start - length;
    for (let k = 4; k < this.window - 4; k++) if (bytes[start + k] !== bytes[before + k]) return false;
    for (let k = this.window + 8; k < length - 4; k++)
      if (bytes[start + k] !== bytes[before + k]) return false;
    return true;
  }

  /** One row of the same shape in which more of the time or a level differs. Returns `start` where it has another shape. */
  private takeChanged(bytes: Uint8Array, start: number): number {
    const { length, timeStart, timeEnd, cells, ignored } = this.shape;
    const { recorders, spacing } = this;
    const end = start + length;
    if (end > bytes.length) return start;
    const before = start - length;
    let digits = 0;
    for (let k = timeStart; k < timeEnd; k++) {
      const byte = bytes[start + k];
      if (isDigit(byte) && isDigit(bytes[before + k])) digits = digits * 10 + byte - ZERO;
      else if (byte !== bytes[before + k]) return start;
    }
    const ticks = (digits * this.scale.factor) / this.scale.divisor - this.scale.origin;
    if (ticks < this.ticks || !Number.isInteger(ticks)) return start;
    let cell = 0;
    for (let k = 0; k < length; k++) {
      const byte = bytes[start + k];
      if (k === timeStart) {
        k = timeEnd - 1;
      } else if (k === cells[cell]) {
        if (byte !== ZERO && byte !== ZERO + 1) return start;
        cell += 1;
      } else if (byte !== bytes[before + k]) {
        if (ignored[k] === 0 || !isDigit(byte) || !isDigit(bytes[before + k])) return start;
      }
    }
    let isUnchanged = true;
    for (let k = 0; k < recorders.length; k++) {
      const level = bytes[start + cells[k]] - ZERO;
      if (level === recorders[k].level) continue;
      recorders[k].change(ticks, level);
      isUnchanged = false;
    }
    spacing.take(ticks, isUnchanged);
    this.ticks = ticks;
    this.rows += 1;
    return end;
  }
}

function isDigit(byte: number): boolean {
  return byte >= ZERO && byte <= ZERO + 9;
}

/** Null: the row is not one of single characters behind a time. */
function findShape(
  row: CsvRow,
  length: number,
  timeStart: number,
  timeEnd: number,
  table: PredictedTable,
): RowShape | null {
  const cells: number[] = [];
  const ignored = new Uint8Array(length).fill(0);
  const { sinks } = table.channels;
  for (let index = 0; index < table.fieldCount; index++) {
    const from = row.starts[index] - row.start;
    const to = row.ends[index] - row.start;
    if (from === timeStart) continue;
    if (sinks[cells.length]?.column.index !== index) {
      ignored.fill(1, from, to);
      continue;
    }
    if (to !== from + 1 || from < timeEnd) return null;
    cells.push(from);
  }
  return { length, timeStart, timeEnd, cells, ignored };
}
