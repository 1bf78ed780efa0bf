import { CalendarClock } from './calendar-clock';
import type { Capture, Defect } from './capture';
import { CaptureError } from './capture-error';
import { CsvCells } from './csv-cells';
import { findDialect } from './csv-dialect';
import { CsvRow, UnfinishedRecord } from './csv-row';
import { CsvTable } from './csv-table';
import { DecimalNumber } from './decimal-number';
import type { Place } from './defect-list';
import { DefectList } from './defect-list';
import type { FormatReader, KeepRule } from './format-reader';
import { describeHoles, noteCoarseness, noteJitter } from './sampling-notes';
import type { SampleInterval } from './stated-rate';
import { decodeText, quoteForMessage } from './text-bytes';

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const HASH = 0x23;
const SEMICOLON = 0x3b;
const SLASH = 0x2f;

/** The beginning that is looked at before the first row is taken. */
const EXAMINED_BYTES = 262_144;
const LONGEST_RECORD = 1_048_576;
const MOST_FAILURES = 6;
const LONGEST_STAMP = 64;

/**
 * Reads a table of samples or changes, chunk by chunk.
 * Source: RFC 4180 section 2; what occurs beyond it is practice.
 */
export class CsvReader implements FormatReader {
  private readonly defects = new DefectList();
  private readonly number = new DecimalNumber();
  private readonly row = new CsvRow();
  private readonly unfinished = new UnfinishedRecord();
  private readonly calendar = new CalendarClock();

  private examined: Uint8Array[] = [];
  private examinedLength = 0;
  private table: CsvTable | null = null;
  private cells: CsvCells | null = null;

  private bytesBefore = 0;
  private line = 1;
  private isAfterReturn = false;
  private isStopped = false;
  /** A row whose time is not known was left out since the last good one. */
  private isDoubtful = false;
  /** Where no row looks like the one before the attempt is made for fewer and fewer of them. */
  private predictionFailures = 0;
  private predictionPause = 0;
  /** Digits after the point in the time of the last row; infinite where it was written in another way. */
  private timeScale = Infinity;

  /** `sampleInterval`: what the caller states; wins over what the file states. */
  constructor(
    private readonly keep: KeepRule,
    private readonly sampleInterval: SampleInterval | null,
    /** False: every row is read cell by cell; slower, and what the faster way is checked against. */
    private readonly isPredicting = true,
  ) {}

  push(chunk: Uint8Array): void {
    if (this.table !== null) {
      this.readChunk(this.table, chunk);
      return;
    }
    this.examined.push(chunk.slice());
    this.examinedLength += chunk.length;
    if (this.examinedLength >= EXAMINED_BYTES) this.begin();
  }

  finish(): Capture {
    const table = this.table ?? this.begin();
    if (this.unfinished.length > 0) this.read(table, this.unfinished.takeBytes(), true);
    if (table.spacing.rows === 0) {
      throw new CaptureError('no-rows', 'no row has a time that can be read', {
        line: this.line,
        byte: this.bytesBefore,
      });
    }
    const interval = table.time.kind === 'rows' ? 1 : table.spacing.sampleInterval(table.channels.hasAnalog);
    const notes = this.noteSampling(table, interval);
    return {
      format: 'csv',
      byteLength: this.bytesBefore,
      timeBase: table.timeBase,
      endTicks: table.lastTicks,
      layout: interval === null ? 'transitions' : 'sampled',
      sampleIntervalTicks: interval,
      unitTicks: table.clock.unitTicks,
      channels: table.channels.finish(table.spacing.isUniform ? interval : null),
      gaps: [],
      defects: this.defects.toArray(),
      notes,
      log: null,
    };
  }

  /** What the spacing of the rows is not good enough for. Holes in which an element can hide are defects. */
  private noteSampling(table: CsvTable, interval: number | null): readonly Defect[] {
    const sampling = table.describeSampling(interval);
    const missing = describeHoles(sampling);
    if (missing?.isDamage === true) this.defects.add(missing.note.code, missing.note.message, missing.note);
    return [
      noteCoarseness(sampling.intervalS, table.channels.hasAnalog),
      noteJitter(sampling),
      missing?.isDamage === false ? missing.note : null,
    ].filter((note) => note !== null);
  }

  /** Finds the dialect and takes what was held back for it. */
  private begin(): CsvTable {
    const all = new Uint8Array(this.examinedLength);
    let at = 0;
    for (const part of this.examined) {
      all.set(part, at);
      at += part.length;
    }
    this.examined = [];
    const mark = all[0] === 0xef && all[1] === 0xbb && all[2] === 0xbf ? 3 : 0;
    const dialect = findDialect(all.subarray(mark));
    const table = new CsvTable(dialect, this.sampleInterval, this.keep);
    this.table = table;
    this.cells = new CsvCells(table.channels, table.hasComma, (code, from, to, name) =>
      this.report(
        code,
        from,
        (shown) => `${shown} is no ${code === 'bad-level' ? 'level' : 'voltage'} of ${name}`,
        to,
      ),
    );
    this.line = dialect.dataLine;
    this.bytesBefore = mark + dialect.dataStart;
    this.readChunk(table, all.subarray(this.bytesBefore));
    return table;
  }

  private readChunk(table: CsvTable, chunk: Uint8Array): void {
    let rest = chunk;
    while (rest.length > 0 && !this.isStopped) {
      if (this.unfinished.length === 0) rest = rest.subarray(this.read(table, rest, false));
      if (rest.length === 0 || this.isStopped) break;
      const { taken, isComplete } = this.unfinished.append(rest, table.separator);
      rest = rest.subarray(taken);
      if (isComplete) this.read(table, this.unfinished.takeBytes(), false);
      else this.refuseEndless();
    }
    if (this.isStopped) this.bytesBefore += rest.length;
  }

  private refuseEndless(): void {
    const { length, isQuoted } = this.unfinished;
    if (length <= LONGEST_RECORD) return;
    const code = isQuoted ? 'unclosed-quote' : 'record-too-long';
    const what = isQuoted ? 'a quote is opened and not closed again' : 'a line does not end';
    const message = `${what} within ${LONGEST_RECORD} bytes: nothing is read from here on`;
    this.defects.add(code, message, { line: this.line, column: 1, byte: this.bytesBefore });
    this.isStopped = true;
    this.bytesBefore += this.unfinished.takeBytes().length;
  }

  /** Reads whole records; returns how many bytes are done with. `isFinal`: the file ends with the bytes. */
  private read(table: CsvTable, bytes: Uint8Array, isFinal: boolean): number {
    const { row } = this;
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
    this.current = bytes;
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
      row.split(bytes, i, table.separator);
      if (row.end === bytes.length && !isFinal) break;
      table.spacing.lineOffset = this.line - table.spacing.rows;
      const isTaken = !isComment(bytes, i, table.separator) && this.takeRow(table, bytes);
      this.line += row.extraLines;
      const hasSuccessors = isTaken && this.isPredicting && row.extraLines === 0;
      i = hasSuccessors ? this.takeSimilarRows(table, bytes, view) : row.end;
    }
    const done = this.isStopped ? bytes.length : i;
    this.bytesBefore += done;
    return done;
  }

  /**
   * Takes the rows behind the present one as long as they look like it. Returns the offset of what comes next: the end of line of
   * the present row where there are none.
   */
  private takeSimilarRows(table: CsvTable, bytes: Uint8Array, view: DataView): number {
    const { predicted } = table;
    const { end } = this.row;
    const isPair = bytes[end] === CARRIAGE_RETURN && bytes[end + 1] === LINE_FEED;
    const next = end + (isPair ? 2 : 1);
    if (!table.spacing.isSettled || next + (next - this.row.start) > bytes.length) return end;
    if (this.predictionPause > 0) {
      this.predictionPause -= 1;
      return end;
    }
    const isReady =
      this.cells?.hasBadCell === false && predicted.prepare(bytes, this.row, next, table, this.timeScale);
    table.spacing.lineOffset = this.line + 1 - table.spacing.rows;
    const stop = isReady ? predicted.take(bytes, view, next) : next;
    this.predictionFailures = stop > next ? 0 : Math.min(this.predictionFailures + 1, MOST_FAILURES);
    if (this.predictionFailures > 2) this.predictionPause = 1 << this.predictionFailures;
    if (!isReady) return end;
    this.line += predicted.rows + 1;
    table.accept(predicted.ticks);
    this.isAfterReturn = bytes[stop - 1] === CARRIAGE_RETURN;
    return stop;
  }

  /** True: the row holds and was taken. */
  private takeRow(table: CsvTable, bytes: Uint8Array): boolean {
    const { row } = this;
    row.dropTrailing(table.fieldCount);
    if (row.cellCount !== table.fieldCount) {
      this.takeRaggedRow(table, bytes);
      return false;
    }
    const ticks = this.timeOfRow(table, bytes);
    if (ticks === null) return false;
    if (this.isDoubtful) {
      if (ticks > table.lastTicks + 1) table.channels.forget(table.lastTicks + 1);
      table.spacing.skipTo(ticks);
      this.isDoubtful = false;
    }
    const isUnchanged = this.cells?.take(bytes, row, ticks) ?? true;
    table.spacing.take(ticks, isUnchanged);
    table.accept(ticks);
    return true;
  }

  /** A row with missing or surplus cells: what the channels do there is not known; its time is used where it holds. */
  private takeRaggedRow(table: CsvTable, bytes: Uint8Array): void {
    const { row } = this;
    const isCut = row.end === bytes.length && row.cellCount < table.fieldCount;
    const code = isCut ? 'cut-short' : row.cellCount < table.fieldCount ? 'row-too-short' : 'row-too-long';
    const fields = `${row.cellCount} field${row.cellCount === 1 ? '' : 's'} instead of ${table.fieldCount}`;
    const message = isCut ? `the file ends inside a row: it has ${fields}` : `the row has ${fields}`;
    this.report(code, row.surplusAt(table.fieldCount), () => message);
    if (isCut) return;
    const ticks = this.parseTime(table, bytes);
    if (!(ticks >= table.lastTicks)) {
      this.isDoubtful = true;
      return;
    }
    table.channels.forget(this.isDoubtful ? table.lastTicks + 1 : ticks);
    this.isDoubtful = false;
    table.spacing.take(ticks, false);
    table.accept(ticks);
  }

  /** Time of the row in ticks, NaN where it has none. */
  private parseTime(table: CsvTable, bytes: Uint8Array): number {
    const { time, spacing, clock } = table;
    const { number, row } = this;
    if (time.kind === 'rows') {
      number.setInteger(spacing.rows);
      return clock.toTicks(number);
    }
    if (time.index >= row.cellCount) return NaN;
    if (time.kind === 'column' && time.isClock)
      return this.parseClock(table, bytes.subarray(row.starts[time.index], row.ends[time.index]));
    if (!number.parse(bytes, row.starts[time.index], row.ends[time.index], table.hasComma)) return NaN;
    this.timeScale = number.exponent === null && number.wide === null ? number.scale : NaN;
    return clock.toTicks(number);
  }

  private parseClock(table: CsvTable, cell: Uint8Array): number {
    const seconds = cell.length > LONGEST_STAMP ? null : this.calendar.toSeconds(decodeText(cell));
    if (seconds === null) return NaN;
    // Times of day are not predicted from row to row.
    this.timeScale = NaN;
    return this.number.parseText(seconds) ? table.clock.toTicks(this.number) : NaN;
  }

  /** Time of the row in ticks; null where it has none that can be used, which is then reported. */
  private timeOfRow(table: CsvTable, bytes: Uint8Array): number | null {
    const { row } = this;
    const ticks = this.parseTime(table, bytes);
    if (ticks >= table.lastTicks) return ticks;
    const index = table.time.kind === 'rows' ? 0 : table.time.index;
    const from = row.starts[index];
    const isMissing = row.ends[index] <= from;
    const code = isMissing ? 'no-time' : Number.isNaN(ticks) ? 'bad-time' : 'time-backwards';
    const isBackwards = code === 'time-backwards';
    const stops = isBackwards && this.isDoubtful;
    this.report(
      code,
      from,
      (shown) => {
        if (isMissing) return 'the time is missing: the row is left out';
        if (!isBackwards) return `${shown} is no time that can be used: the row is left out`;
        return stops
          ? `the time ${shown} stays behind: nothing is read from here on`
          : `the time ${shown} lies before that of the row above: the row is left out`;
      },
      row.ends[index],
    );
    this.isStopped = stops;
    this.isDoubtful = true;
    return null;
  }

  /** Bytes that are being read, for messages. */
  private current: Uint8Array = new Uint8Array(0);

  private report(code: string, from: number, describe: (shown: string) => string, to = from): void {
    if (this.defects.isFull) {
      this.defects.addUntold();
      return;
    }
    const place: Place = {
      line: this.line,
      column: from - this.row.start + 1,
      byte: this.bytesBefore + from,
    };
    this.defects.add(code, describe(quoteForMessage(this.current.subarray(from, to))), place);
  }
}

function isComment(bytes: Uint8Array, start: number, separator: number): boolean {
  const first = bytes[start];
  return (
    first === HASH ||
    (first === SEMICOLON && separator !== SEMICOLON) ||
    (first === SLASH && bytes[start + 1] === SLASH)
  );
}
