import type { CsvChannels } from './csv-channels';
import type { TimeSource } from './csv-columns';
import type { CsvRow } from './csv-row';
import type { DecimalClock, LinearScale } from './decimal-clock';
import { fourDigits, isFourDigits } from './digit-words';
import type { DigitalRecorder } from './digital-recorder';
import type { RowShape } from './row-shape';
import { CELL, findRowShape, FIXED } from './row-shape';
import type { RowSpacing } from './row-spacing';

const ZERO = 0x30;
const NINE = 0x39;
const LEAST_ROW = 8;
/** Rows are told apart by words of four bytes. */
const WORD = 4;

/** What of a table the rows need. */
interface PredictedTable {
  readonly time: TimeSource;
  readonly fieldCount: number;
  readonly clock: DecimalClock;
  readonly channels: CsvChannels;
  readonly lastTicks: number;
}

const NO_SHAPE: RowShape = { length: 0, timeStart: 0, timeEnd: 0, cells: [], kinds: new Uint8Array(0) };

/**
 * Reads rows that look like the one before without looking for separators: in a table of samples a row differs from its
 * predecessor in some digits of its time and, rarely, in a level. Whatever looks different in any other way is left to the reader
 * that goes cell by cell, so both come to the same result. Only for tables of digital channels behind their time.
 *
 * The loops are long because a call or an object per row would cost more than the row.
 */
export class PredictedRows {
  /** Ticks of the last row taken. */
  ticks = 0;
  /** Rows taken by the last `take`. */
  rows = 0;

  private shape = NO_SHAPE;
  private scale: LinearScale = { factor: 1, divisor: 1, origin: 0 };
  /** The rows have no times: each is one tick after the one before. */
  private isUntimed = false;
  /** Four digits of the time that count the rows, −1 without; what stands above and below them stays the same for many rows. */
  private window = -1;
  private ticksPerWindowStep = 1;
  /** Cells of the present row that differ from the row before, as indices of channels. */
  private readonly changed: Int32Array;

  constructor(
    private readonly recorders: readonly DigitalRecorder[],
    private readonly spacing: RowSpacing,
  ) {
    this.changed = new Int32Array(recorders.length);
  }

  /**
   * Prepares for rows like the one that was just taken; `next` is the offset behind its end of line, `timeScale` tells the digits
   * after the point of its time. False: rows of this shape must be read cell by cell.
   */
  prepare(bytes: Uint8Array, row: CsvRow, next: number, table: PredictedTable, timeScale: number): boolean {
    if (table.channels.hasAnalog) return false;
    this.isUntimed = table.time.kind === 'rows';
    const timeColumn = table.time.kind === 'rows' ? -1 : table.time.index;
    const timeLength = timeColumn < 0 ? 0 : row.ends[timeColumn] - row.starts[timeColumn];
    if (timeColumn >= 0) {
      if (!isDigit(bytes[row.starts[timeColumn]])) return false;
      const scale = table.clock.linear(timeLength - (timeScale > 0 ? 1 : 0), timeScale);
      if (scale === null) return false;
      this.scale = scale;
    }
    const shape = findRowShape(row, next - row.start, timeColumn, table.channels.sinks, table.fieldCount);
    if (shape === null) return false;
    this.shape = shape;
    this.ticks = table.lastTicks;
    this.window = -1;
    if (!this.isUntimed && shape.length >= LEAST_ROW) this.placeWindow(bytes, row.start);
    return true;
  }

  /** Finds the four digits of the time that count the rows. */
  private placeWindow(bytes: Uint8Array, start: number): void {
    const { scale, shape } = this;
    let zeros = 0;
    // Digits below the step of the samples never change.
    let step = (this.spacing.usual * scale.divisor) / scale.factor;
    for (; step >= 10 && step % 10 === 0; step /= 10) zeros += 1;
    const ticksPerWindowStep = (scale.factor * 10 ** zeros) / scale.divisor;
    const window = shape.timeEnd - zeros - WORD;
    if (!Number.isInteger(ticksPerWindowStep) || window < shape.timeStart) return;
    for (let i = window; i < shape.timeEnd; i++) if (!isDigit(bytes[start + i])) return;
    this.window = window;
    this.ticksPerWindowStep = ticksPerWindowStep;
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
      if (skips > 0 || this.window < 0) {
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
    if (start > last || start - length + window < WORD) return start;
    const before = start - length;
    // Words that must not change. Above the window; one that begins before the row covers the end of the row in front, which is equal.
    const upper = window - WORD;
    const upperWord = view.getInt32(before + upper, true);
    const head = window > WORD ? 0 : upper;
    const headWord = view.getInt32(before + head, true);
    // Below it: where less than a word is left, the bytes of the window are masked out.
    const hasLower = window + 2 * WORD <= length;
    const lower = hasLower ? window + WORD : length - WORD;
    const lowerMask = hasLower ? -1 : -1 << (8 * (window + WORD - lower));
    const lowerWord = view.getInt32(before + lower, true) & lowerMask;
    const tail = hasLower ? length - WORD : upper;
    const tailWord = view.getInt32(before + tail, true);
    const hasMiddle = window > 2 * WORD || length - (window + WORD) > 2 * WORD;

    // Where the interval is no whole number of steps no spacing can equal it.
    const usual = spacing.usual / ticksPerWindowStep;
    const usualStep = Number.isInteger(usual) && usual < 10_000 ? usual | 0 : -1;
    // Without a carry the next time is the same text with the last digit `step` higher.
    const wordStep = usualStep > 0 && usualStep < 10 ? usualStep << 24 : 0x7f000000;
    let word = view.getInt32(before + window, true);
    const first = fourDigits(word);
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
        spacing.takeUnusual(
          step * ticksPerWindowStep,
          (i - start) / length,
          this.ticks + (next - first) * ticksPerWindowStep,
        );
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
    for (let k = WORD; k < this.window - WORD; k++) if (bytes[start + k] !== bytes[before + k]) return false;
    for (let k = this.window + 2 * WORD; k < length - WORD; k++) {
      if (bytes[start + k] !== bytes[before + k]) return false;
    }
    return true;
  }

  /** One row of the same shape in which more of the time or a level differs. Returns `start` where it has another shape. */
  private takeChanged(bytes: Uint8Array, start: number): number {
    const { length, timeStart, timeEnd, cells, kinds } = this.shape;
    const { recorders, changed } = this;
    const end = start + length;
    if (end > bytes.length) return start;
    let changes = 0;
    for (let k = 0; k < length; k++) {
      const byte = bytes[start + k];
      const old = bytes[start + k - length];
      if (byte === old) continue;
      const kind = kinds[k];
      if (kind === FIXED) return start;
      if (kind >= CELL) {
        if (byte !== ZERO && byte !== ZERO + 1) return start;
        changed[changes++] = kind - CELL;
      } else if (!isDigit(byte) || !isDigit(old)) {
        return start;
      }
    }
    let { ticks } = this;
    if (this.isUntimed) {
      ticks += 1;
    } else {
      let digits = 0;
      for (let k = start + timeStart; k < start + timeEnd; k++) {
        const digit = bytes[k] - ZERO;
        if (digit >= 0 && digit <= 9) digits = digits * 10 + digit;
      }
      ticks = (digits * this.scale.factor) / this.scale.divisor - this.scale.origin;
      if (ticks < this.ticks || !Number.isInteger(ticks)) return start;
    }
    let isUnchanged = true;
    for (let k = 0; k < changes; k++) {
      const recorder = recorders[changed[k]];
      const level = bytes[start + cells[changed[k]]] - ZERO;
      if (level === recorder.level) continue;
      recorder.change(ticks, level);
      isUnchanged = false;
    }
    this.spacing.take(ticks, isUnchanged);
    this.ticks = ticks;
    this.rows += 1;
    return end;
  }
}

function isDigit(byte: number): boolean {
  return byte >= ZERO && byte <= NINE;
}
