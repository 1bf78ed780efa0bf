import type { Capture } from './capture';
import { HIGH, LOW, UNKNOWN } from './capture';
import { CaptureError } from './capture-error';
import { CsvChannels } from './csv-channels';
import type { ColumnSink } from './csv-channels';
import { levelOfText } from './csv-columns';
import type { CsvDialect } from './csv-dialect';
import { findDialect } from './csv-dialect';
import { DecimalClock } from './decimal-clock';
import { DecimalNumber } from './decimal-number';
import type { Place } from './defect-list';
import { DefectList } from './defect-list';
import type { RecorderClock } from './digital-recorder';
import { BUSY_SPACING_S } from './digital-recorder';
import type { FormatReader, KeepRule } from './format-reader';
import { PredictedRows } from './predicted-rows';
import { RowSpacing } from './row-times';
import type { SampleInterval } from './stated-rate';
import { decodeText, quoteForMessage } from './text-bytes';

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const SPACE = 32;
const QUOTE = 0x22;
const HASH = 0x23;
const SEMICOLON = 0x3b;
const SLASH = 0x2f;
const ZERO = 0x30;

/** The beginning that is looked at before the first row is taken. */
const EXAMINED_BYTES = 262_144;
const LONGEST_RECORD = 1_048_576;
const MOST_CELLS = 8192;

/** Seconds of one unit of the time source, as an exact ratio, and its decimal places where it has some. */
interface TimeUnit extends SampleInterval {
  readonly places: number;
}

/**
 * Reads a table of samples or changes, chunk by chunk.
 * Source: RFC 4180 section 2; what occurs beyond it is practice.
 */
export class CsvReader implements FormatReader {
  private readonly defects = new DefectList();
  private readonly recorderClock: RecorderClock = { busySpacing: 0 };
  private readonly number = new DecimalNumber();
  private readonly spacing = new RowSpacing();

  private examined: Uint8Array[] = [];
  private examinedLength = 0;
  private table: Table | null = null;

  private carry = new Uint8Array(0);
  private bytesBefore = 0;
  private line = 1;
  private isAfterReturn = false;
  private isStopped = false;

  private readonly starts = new Int32Array(MOST_CELLS);
  private readonly ends = new Int32Array(MOST_CELLS);
  private cellCount = 0;

  private lastTicks = 0;
  /** A row whose time is not known was left out since the last good one. */
  private isDoubtful = false;

  /** `sampleInterval`: what the caller states; wins over what the file states. */
  constructor(
    private readonly isKept: KeepRule,
    private readonly sampleInterval: SampleInterval | null,
    /** False: every row is read cell by cell; slower, and what the faster way is checked against. */
    private readonly isPredicting = true,
  ) {}

  push(chunk: Uint8Array): void {
    if (this.table !== null) {
      this.readChunk(chunk);
      return;
    }
    this.examined.push(chunk.slice());
    this.examinedLength += chunk.length;
    if (this.examinedLength >= EXAMINED_BYTES) this.begin();
  }

  finish(): Capture {
    if (this.table === null) this.begin();
    if (this.carry.length > 0) this.read(this.carry, true);
    const table = this.table;
    if (table === null || this.spacing.rows === 0) {
      throw new CaptureError('no-rows', 'no row has a time that can be read', {
        line: this.line,
        byte: this.bytesBefore,
      });
    }
    const interval = this.spacing.sampleInterval(table.channels.hasAnalog);
    return {
      format: 'csv',
      byteLength: this.bytesBefore,
      timeBase: table.clock.timeBase(table.unit.numerator, table.unit.denominator),
      endTicks: this.lastTicks,
      layout: interval === null ? 'transitions' : 'sampled',
      sampleIntervalTicks: interval,
      unitTicks: table.clock.unitTicks,
      channels: table.channels.finish(this.spacing.isUniform ? interval : null),
      gaps: [],
      defects: this.defects.toArray(),
      log: [],
    };
  }

  /** Finds the dialect and takes what was held back for it. */
  private begin(): void {
    const all = new Uint8Array(this.examinedLength);
    let at = 0;
    for (const part of this.examined) {
      all.set(part, at);
      at += part.length;
    }
    this.examined = [];
    const mark = all[0] === 0xef && all[1] === 0xbb && all[2] === 0xbf ? 3 : 0;
    const dialect = findDialect(all.subarray(mark));
    this.table = this.makeTable(dialect);
    this.line = dialect.dataLine;
    this.bytesBefore = mark + dialect.dataStart;
    this.readChunk(all.subarray(this.bytesBefore));
  }

  private makeTable(dialect: CsvDialect): Table {
    const { columns } = dialect;
    if (columns.channels.length === 0) {
      throw new CaptureError('no-channels', 'the table has no column beside the time', {
        line: dialect.dataLine,
      });
    }
    const unit = this.findUnit(dialect);
    const clock = new DecimalClock(unit.places, (scale) => this.scaleTimes(scale));
    const channels = new CsvChannels(columns.channels, this.recorderClock, this.isKept);
    const unitsPerSecond = Number(unit.denominator) / Number(unit.numerator);
    this.recorderClock.busySpacing = BUSY_SPACING_S * unitsPerSecond;
    return {
      dialect,
      unit,
      clock,
      channels,
      predicted: new PredictedRows(channels.digital, this.spacing),
      separator: dialect.separator.charCodeAt(0),
      comma: dialect.decimal === ',' || (dialect.decimal === null && dialect.separator !== ','),
    };
  }

  private findUnit(dialect: CsvDialect): TimeUnit {
    const { time } = dialect.columns;
    const interval = this.sampleInterval ?? dialect.statedInterval;
    if (time.kind === 'column') {
      const places = time.places ?? dialect.statedPlaces;
      if (places === null && time.isInteger && interval !== null) return { ...interval, places: 9 };
      return { numerator: 1n, denominator: 10n ** BigInt(places ?? 0), places: places ?? 0 };
    }
    if (interval === null) {
      const what = time.kind === 'counts' ? 'the time column counts samples' : 'there is no time column';
      const message = `${what} and no sample rate is stated: state it with --sample-rate`;
      throw new CaptureError('no-sample-rate', message, { line: dialect.dataLine });
    }
    return { ...interval, places: 9 };
  }

  private scaleTimes(scale: (time: number) => number): void {
    this.table?.channels.scaleTimes(scale);
    this.spacing.scale(scale);
    this.lastTicks = scale(this.lastTicks);
    this.recorderClock.busySpacing = scale(this.recorderClock.busySpacing);
  }

  private readChunk(chunk: Uint8Array): void {
    if (this.isStopped) {
      this.bytesBefore += chunk.length;
      return;
    }
    let rest = chunk;
    while (this.carry.length > 0 && rest.length > 0) {
      let cut = 0;
      while (cut < rest.length && rest[cut] !== LINE_FEED && rest[cut] !== CARRIAGE_RETURN) cut += 1;
      cut = Math.min(rest.length, cut + 1);
      const joined = new Uint8Array(this.carry.length + cut);
      joined.set(this.carry);
      joined.set(rest.subarray(0, cut), this.carry.length);
      rest = rest.subarray(cut);
      this.carry = this.bounded(joined.slice(this.read(joined, false)));
    }
    if (rest.length === 0) return;
    this.carry = this.bounded(rest.slice(this.read(rest, false)));
  }

  private bounded(record: Uint8Array<ArrayBuffer>): Uint8Array<ArrayBuffer> {
    if (record.length <= LONGEST_RECORD) return record;
    const isQuoted = record.includes(QUOTE);
    const code = isQuoted ? 'unclosed-quote' : 'record-too-long';
    const what = isQuoted ? 'a quote is opened and not closed again' : 'a line does not end';
    const message = `${what} within ${LONGEST_RECORD} bytes`;
    if (this.spacing.rows === 0)
      throw new CaptureError(code, message, { line: this.line, byte: this.bytesBefore });
    this.defects.add(code, `${message}: nothing is read from here on`, {
      line: this.line,
      column: 1,
      byte: this.bytesBefore,
    });
    this.isStopped = true;
    this.bytesBefore += record.length;
    return new Uint8Array(0);
  }

  /** Reads whole records; returns how many bytes are done with. */
  private read(bytes: Uint8Array, isFinal: boolean): number {
    const table = this.table as Table;
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
    let i = 0;
    while (i < bytes.length && !this.isStopped) {
      const c = bytes[i];
      if (c === LINE_FEED || c === CARRIAGE_RETURN) {
        if (c === CARRIAGE_RETURN || !this.isAfterReturn) this.line += 1;
        this.isAfterReturn = c === CARRIAGE_RETURN;
        i += 1;
        continue;
      }
      this.isAfterReturn = false;
      const end = this.splitRow(bytes, i, table.separator);
      if (end === bytes.length && !isFinal) break;
      const rows = this.spacing.rows;
      if (!isComment(bytes, i, table.separator)) this.takeRow(table, bytes, i, end, end === bytes.length);
      this.line += this.extraLines;
      const isPlain =
        this.spacing.rows > rows && this.extraLines === 0 && this.cellCount === table.dialect.fieldCount;
      i = isPlain && this.isPredicting ? this.takeSimilarRows(table, bytes, view, i, end) : end;
    }
    const done = this.isStopped ? bytes.length : i;
    this.bytesBefore += done;
    return done;
  }

  /**
   * Takes the rows behind the one in `[start, end)` as long as they look like it. Returns the offset of what comes next: the end of
   * line at `end` where there are none.
   */
  private takeSimilarRows(
    table: Table,
    bytes: Uint8Array,
    view: DataView,
    start: number,
    end: number,
  ): number {
    const { time } = table.dialect.columns;
    const isPair = bytes[end] === CARRIAGE_RETURN && bytes[end + 1] === LINE_FEED;
    const next = end + (isPair ? 2 : 1);
    if (time.kind !== 'column' || !this.spacing.isSettled || bytes.length - next < next - start) return end;
    const timeStart = this.starts[time.index];
    const timeEnd = this.ends[time.index];
    const scale = table.clock.linear(timeEnd - timeStart, this.timeScale);
    if (scale === null) return end;
    const cells: number[] = [];
    for (const { column } of table.channels.sinks) {
      const cell = this.starts[column.index];
      if (this.ends[column.index] !== cell + 1 || cell < timeEnd) return end;
      cells.push(cell - start);
    }
    const shape = { length: next - start, timeStart: timeStart - start, timeEnd: timeEnd - start, cells };
    if (!table.predicted.prepare(bytes, start, shape, scale, this.lastTicks)) return end;
    const stop = table.predicted.take(bytes, view, next);
    this.line += table.predicted.rows + 1;
    this.lastTicks = table.predicted.ticks;
    table.clock.accept(this.lastTicks);
    this.isAfterReturn = bytes[stop - 1] === CARRIAGE_RETURN;
    return stop;
  }

  /** Digits after the point in the time of the last row. */
  private timeScale = 0;

  /** Line breaks inside the quotes of the record last split. */
  private extraLines = 0;

  /** Notes where the cells of a record stand, without quotes and blanks around them. Returns the offset of its end of line. */
  private splitRow(bytes: Uint8Array, start: number, separator: number): number {
    const length = bytes.length;
    this.extraLines = 0;
    let count = 0;
    let i = start;
    for (;;) {
      while (i < length && bytes[i] === SPACE) i += 1;
      let from = i;
      let to = -1;
      if (bytes[i] === QUOTE) {
        from = i + 1;
        i = this.skipQuoted(bytes, from);
        to = i;
        if (i < length) i += 1;
      }
      while (i < length && bytes[i] !== separator && bytes[i] !== LINE_FEED && bytes[i] !== CARRIAGE_RETURN)
        i += 1;
      if (to < 0) to = i;
      while (to > from && bytes[to - 1] <= SPACE) to -= 1;
      if (count < MOST_CELLS) {
        this.starts[count] = from;
        this.ends[count] = to;
        count += 1;
      }
      if (i >= length || bytes[i] !== separator) break;
      i += 1;
    }
    this.cellCount = count;
    return i;
  }

  /** The offset of the quote that closes the field. Source: RFC 4180 section 2, rules 6 and 7. */
  private skipQuoted(bytes: Uint8Array, start: number): number {
    let i = start;
    for (; i < bytes.length; i++) {
      if (bytes[i] === QUOTE) {
        if (bytes[i + 1] !== QUOTE) return i;
        i += 1;
      } else if (bytes[i] === LINE_FEED || (bytes[i] === CARRIAGE_RETURN && bytes[i + 1] !== LINE_FEED)) {
        this.extraLines += 1;
      }
    }
    return i;
  }

  private placeOf(rowStart: number, offset: number): Place {
    return { line: this.line, column: offset - rowStart + 1, byte: this.bytesBefore + offset };
  }

  private takeRow(table: Table, bytes: Uint8Array, start: number, end: number, isCut: boolean): void {
    const { fieldCount } = table.dialect;
    while (this.cellCount > fieldCount && this.ends[this.cellCount - 1] <= this.starts[this.cellCount - 1])
      this.cellCount -= 1;
    const ticks = this.timeOfRow(table, bytes, start);
    if (ticks === null) return;
    if (this.cellCount !== fieldCount) {
      this.takeRaggedRow(table, start, end, ticks, isCut);
      return;
    }
    if (this.isDoubtful) {
      if (ticks > this.lastTicks + 1) table.channels.forget(this.lastTicks + 1);
      this.isDoubtful = false;
    }
    let isUnchanged = true;
    for (const sink of table.channels.sinks) {
      if (!this.takeCell(table, sink, bytes, start, ticks)) isUnchanged = false;
    }
    table.channels.pushAnalog(ticks);
    this.spacing.take(ticks, isUnchanged);
    table.clock.accept(ticks);
    this.lastTicks = ticks;
  }

  /** A row with missing or surplus cells: its time holds, what the channels do there is not known. */
  private takeRaggedRow(table: Table, start: number, end: number, ticks: number, isCut: boolean): void {
    const { fieldCount } = table.dialect;
    const isShort = this.cellCount < fieldCount;
    const code = isShort ? (isCut ? 'cut-short' : 'row-too-short') : 'row-too-long';
    const message = `the row has ${this.cellCount} field${this.cellCount === 1 ? '' : 's'} instead of ${fieldCount}`;
    this.defects.add(
      code,
      isCut && isShort ? `the file ends inside a row: ${message}` : message,
      this.placeOf(start, isShort ? end : this.starts[fieldCount]),
    );
    if (isCut) return;
    table.channels.forget(this.isDoubtful ? this.lastTicks + 1 : ticks);
    this.isDoubtful = false;
    this.spacing.take(ticks, false);
    table.clock.accept(ticks);
    this.lastTicks = ticks;
  }

  /** Time of the row in ticks; null where it has none that can be used, which is then reported. */
  private timeOfRow(table: Table, bytes: Uint8Array, start: number): number | null {
    const { time } = table.dialect.columns;
    const number = this.number;
    if (time.kind === 'rows') {
      number.mantissa = this.spacing.rows;
      number.wide = null;
      number.scale = 0;
      number.exponent = null;
      return table.clock.toTicks(number);
    }
    const from = this.starts[time.index];
    const to = this.ends[time.index];
    if (time.index >= this.cellCount || !number.parse(bytes, from, to, table.comma)) {
      const isMissing = time.index >= this.cellCount || from === to;
      const shown = isMissing
        ? 'the time is missing'
        : `${quoteForMessage(bytes.subarray(from, to))} is no time`;
      this.defects.add(
        isMissing ? 'no-time' : 'bad-time',
        `${shown}: the row is left out`,
        this.placeOf(start, isMissing ? start : from),
      );
      this.isDoubtful = true;
      return null;
    }
    this.timeScale = number.exponent === null && number.wide === null ? number.scale : Infinity;
    const ticks = table.clock.toTicks(number);
    if (ticks >= this.lastTicks) return ticks;
    const shown = quoteForMessage(bytes.subarray(from, to));
    if (this.isDoubtful) {
      this.defects.add(
        'time-backwards',
        `the time ${shown} stays behind: nothing is read from here on`,
        this.placeOf(start, from),
      );
      this.isStopped = true;
    } else {
      this.defects.add(
        'time-backwards',
        `the time ${shown} lies before that of the row above: the row is left out`,
        this.placeOf(start, from),
      );
      this.isDoubtful = true;
    }
    return null;
  }

  /** True: the channel did not change. */
  private takeCell(table: Table, sink: ColumnSink, bytes: Uint8Array, start: number, ticks: number): boolean {
    const from = this.starts[sink.column.index];
    const to = this.ends[sink.column.index];
    if (to <= from) return true;
    if (sink.digital === null) return this.takeVolts(table, sink, bytes, start);
    const before = sink.digital.level;
    const byte = bytes[from];
    let level: number | undefined;
    if (to - from === 1 && (byte === ZERO || byte === ZERO + 1)) level = byte === ZERO ? LOW : HIGH;
    else level = levelOfText(decodeText(bytes.subarray(from, Math.min(to, from + 32))));
    if (level === undefined) {
      const shown = quoteForMessage(bytes.subarray(from, to));
      this.defects.add('bad-level', `${shown} is no level of ${sink.column.name}`, this.placeOf(start, from));
      level = UNKNOWN;
    }
    sink.digital.change(ticks, level);
    return level === before;
  }

  private takeVolts(table: Table, sink: ColumnSink, bytes: Uint8Array, start: number): boolean {
    const from = this.starts[sink.column.index];
    const to = this.ends[sink.column.index];
    const number = this.number;
    const before = sink.value;
    if (number.parse(bytes, from, to, table.comma)) {
      sink.value = number.mantissa * 10 ** -number.scale * sink.column.voltsPerUnit;
    } else {
      const text = decodeText(bytes.subarray(from, Math.min(to, from + 32)));
      if (!/^[+-]?(nan|inf(inity)?|-+)$/i.test(text)) {
        const shown = quoteForMessage(bytes.subarray(from, to));
        this.defects.add(
          'bad-value',
          `${shown} is no voltage of ${sink.column.name}`,
          this.placeOf(start, from),
        );
      }
      sink.value = NaN;
    }
    return sink.value === before;
  }
}

interface Table {
  readonly dialect: CsvDialect;
  readonly unit: TimeUnit;
  readonly clock: DecimalClock;
  readonly channels: CsvChannels;
  readonly predicted: PredictedRows;
  readonly separator: number;
  /** A comma is a decimal sign. */
  readonly comma: boolean;
}

function isComment(bytes: Uint8Array, start: number, separator: number): boolean {
  const first = bytes[start];
  return (
    first === HASH ||
    (first === SEMICOLON && separator !== SEMICOLON) ||
    (first === SLASH && bytes[start + 1] === SLASH)
  );
}
