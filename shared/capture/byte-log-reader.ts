import { ByteLogRecorder } from './byte-log';
import { CalendarClock } from './calendar-clock';
import type { Capture } from './capture';
import { CaptureError } from './capture-error';
import { DecimalClock } from './decimal-clock';
import { DecimalNumber } from './decimal-number';
import { DefectList } from './defect-list';
import type { FormatReader } from './format-reader';
import type { LogLayout } from './log-layout';
import { findLogLayout, isAboutControlLine, isLogComment, parsePayload } from './log-layout';
import type { LogStamp } from './log-line';
import { splitLogLine } from './log-line';
import { LineSplitter } from './line-splitter';
import { CHARACTER_TIME_BASE, noTimes } from './raw-bytes-reader';
import { SNIFFED_BYTES } from './sniff';
import { decodeText, quoteForMessage } from './text-bytes';

const EXAMINED_BYTES = 65_536;
/** Two hundred days at 1200 bit/s. */
const MOST_BYTES = 2_000_000_000;
/** Reads an adapter's log: a line with the time, who sent, and the bytes, each of which may be missing but the last. */
export class ByteLogReader implements FormatReader {
  private readonly defects = new DefectList();
  private readonly recorder = new ByteLogRecorder();
  private readonly calendar = new CalendarClock();
  private readonly number = new DecimalNumber();
  private readonly lines = new LineSplitter();
  private layout: LogLayout | null = null;
  private held: Uint8Array[] = [];
  private heldLength = 0;
  private clock: DecimalClock | null = null;
  private latest = 0;
  private rows = 0;
  private unitPlaces = 0;

  push(chunk: Uint8Array): void {
    if (this.layout !== null) {
      this.lines.push(chunk, (line, isEnded) => this.takeLine(line, isEnded));
      return;
    }
    this.held.push(chunk.slice());
    this.heldLength += chunk.length;
    if (this.heldLength >= EXAMINED_BYTES) this.begin();
  }

  finish(): Capture {
    const layout = this.layout ?? this.begin();
    this.lines.finish((line, isEnded) => this.takeLine(line, isEnded));
    if (this.recorder.count === 0)
      throw new CaptureError('no-bytes', 'no line of the log holds bytes', { line: 1 });
    if (!layout.hasStamps) noTimes(this.defects);
    const log = this.recorder.finish(layout.hasStamps);
    return {
      format: 'bytes',
      byteLength: this.lines.byteLength,
      timeBase: this.clock?.timeBase(1n, 10n ** BigInt(this.unitPlaces)) ?? CHARACTER_TIME_BASE,
      endTicks: layout.hasStamps ? this.latest : log.count,
      layout: 'transitions',
      sampleIntervalTicks: null,
      unitTicks: this.clock?.unitTicks ?? 1,
      channels: [],
      gaps: [],
      defects: this.defects.toArray(),
      notes: [],
      log,
    };
  }

  private begin(): LogLayout {
    const all = new Uint8Array(this.heldLength);
    let at = 0;
    for (const part of this.held) {
      all.set(part, at);
      at += part.length;
    }
    this.held = [];
    // Further on a log may have been damaged.
    const layout =
      findLogLayout(decodeText(all)) ?? findLogLayout(decodeText(all.subarray(0, SNIFFED_BYTES)));
    if (layout === null)
      throw new CaptureError('not-a-capture', 'the file is no log of bytes', { line: 1, byte: 0 });
    this.layout = layout;
    if (layout.hasStamps) {
      this.unitPlaces = layout.places;
      this.clock = new DecimalClock(layout.places, (scale) => {
        this.recorder.scaleTimes(scale);
        this.latest = scale(this.latest);
      });
    }
    this.lines.push(all, (line, isEnded) => this.takeLine(line, isEnded));
    return layout;
  }

  /** `isEnded`: an end of line follows; without one the file may have been cut. */
  private takeLine(bytes: Uint8Array, isEnded: boolean): void {
    const { layout } = this;
    const line = decodeText(bytes);
    if (layout === null || line.trim() === '' || isLogComment(line)) return;
    this.rows += 1;
    if (this.rows <= layout.headerLines) return;
    const { stamp, sender, payload, payloadAt } = splitLogLine(line, layout);
    if (isAboutControlLine(payload)) return;
    const read = parsePayload(payload, layout.notation);
    if (read.badAt >= 0 || read.values.length === 0) {
      const code = !isEnded ? 'cut-short' : read.values.length === 0 ? 'bad-line' : 'bad-byte';
      const at = payloadAt + Math.max(0, read.badAt);
      const shown = quoteForMessage(bytes.subarray(Math.min(at, bytes.length)));
      this.report(code, at, payload === '' ? 'the line holds no bytes' : `${shown} is no byte`);
      if (read.values.length === 0) return;
    }
    const ticks = this.timeOf(stamp, line, layout);
    const isFromHost = (sender ?? read.sender) === 'host';
    for (const value of read.values) {
      if (this.recorder.count >= MOST_BYTES) return;
      this.recorder.add(layout.hasStamps ? ticks : this.recorder.count, value, isFromHost);
    }
  }

  /** A line without a time goes on with the one before. */
  private timeOf(stamp: LogStamp | null, line: string, layout: LogLayout): number {
    if (stamp === null || this.clock === null) return this.latest;
    const ticks = this.parseStamp(stamp, layout);
    const at = Math.max(0, line.indexOf(stamp.text));
    if (Number.isNaN(ticks)) {
      this.report(
        'bad-time',
        at,
        `“${stamp.text}” is no time that can be used: the time before it stands for it`,
      );
    } else if (ticks < this.latest) {
      this.report(
        'time-backwards',
        at,
        `the time “${stamp.text}” lies before that of the line above, which stands for it`,
      );
    } else {
      this.latest = ticks;
      this.clock.accept(ticks);
    }
    return this.latest;
  }

  private parseStamp(stamp: LogStamp, layout: LogLayout): number {
    const { clock, number } = this;
    const text = stamp.kind === 'clock' ? this.calendar.toSeconds(stamp.text) : stamp.text;
    if (clock === null || text === null) return NaN;
    if (!number.parseText(text)) return NaN;
    // One unit of the file, another of this line.
    number.scale += (stamp.places ?? layout.places) - layout.places;
    return clock.toTicks(number);
  }

  private report(code: string, offset: number, message: string): void {
    const { line, lineStart, pieceStart } = this.lines;
    const byte = pieceStart + offset;
    this.defects.add(code, message, { line, column: byte - lineStart + 1, byte });
  }
}
