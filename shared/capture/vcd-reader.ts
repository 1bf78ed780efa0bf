import type { Capture } from './capture';
import { CaptureError } from './capture-error';
import { DecimalNumber } from './decimal-number';
import type { Place } from './defect-list';
import { DefectList } from './defect-list';
import type { RecorderClock } from './digital-recorder';
import { BUSY_SPACING_S } from './digital-recorder';
import type { FormatReader, KeepRule } from './format-reader';
import { PlainChanges } from './plain-changes';
import { noteCoarseness } from './sampling-notes';
import { decodeText, quoteForMessage } from './text-bytes';
import { errorAt, TextPlace } from './text-place';
import { VcdHeader } from './vcd-header';
import { LEVELS, VcdSignals } from './vcd-signals';
import { VcdVariables } from './vcd-variables';
import { isBlockOfValues, isBodyCommand, isDeclaration, isEnd, isKeyword, parseStamp } from './vcd-words';
import { WordCarry } from './word-carry';

const TAB = 9;
const CARRIAGE_RETURN = 13;
const SPACE = 32;
const HASH = 35;

/** Of the words of one declaration; more are not needed. */
const MOST_WORDS = 16;

const NO_CODE = 0;
const VECTOR_CODE = 1;
const REAL_CODE = 2;
const STRING_CODE = 3;

/**
 * Reads a value change dump, chunk by chunk.
 * Source: IEEE 1364-2005 §18.2; what occurs beyond it is practice.
 */
export class VcdReader implements FormatReader {
  private readonly defects = new DefectList();
  private readonly recorderClock: RecorderClock = { busySpacing: 0 };
  private readonly variables: VcdVariables;
  private readonly header: VcdHeader;
  private readonly signals: VcdSignals;
  private readonly plain: PlainChanges;

  private readonly carry = new WordCarry();
  private readonly place = new TextPlace();
  private isAfterControl = false;
  private isStopped = false;

  private isInBody = false;
  /** Command whose `$end` has not come yet. */
  private command: string | null = null;
  private commandPlace: Place = { line: 1, column: 1, byte: 0 };
  private words: Uint8Array[] = [];
  /** A block of values such as `$dumpvars` whose `$end` has not come yet. */
  private block: string | null = null;

  /** A value is read, its code comes next. */
  private awaited = NO_CODE;
  private vector: Uint8Array = new Uint8Array(0);
  private real = 0;
  private readonly number = new DecimalNumber();

  constructor(
    keep: KeepRule,
    /** False: every word is looked at by itself; slower, and what the faster way is checked against. */
    private readonly isFast = true,
  ) {
    this.variables = new VcdVariables(this.recorderClock, keep);
    this.header = new VcdHeader(this.variables, this.defects);
    this.signals = new VcdSignals(this.variables);
    this.plain = new PlainChanges(this.variables, this.signals.clock);
  }

  push(chunk: Uint8Array): void {
    let rest = chunk;
    if (!this.isStopped && this.carry.length > 0) {
      const taken = this.carry.append(rest);
      rest = rest.subarray(taken);
      if (rest.length > 0) this.read(this.carry.takeBytes(), true, false);
    }
    if (!this.isStopped) {
      const used = this.read(rest, false, false);
      if (used < rest.length) this.carry.append(rest.subarray(used));
      if (this.carry.isTooLong) this.refuseEndlessWord();
    } else {
      this.place.bytesBefore += rest.length;
    }
  }

  finish(): Capture {
    if (this.carry.length > 0) this.read(this.carry.takeBytes(), true, true);
    this.refuseUnusable();
    this.noteCut();
    const { numerator, denominator } = this.header.timescale ?? { numerator: 1n, denominator: 1n };
    const { clock } = this.signals;
    const { channels, endTicks, gaps } = this.signals.finish();
    const coarse = noteCoarseness(Number(numerator) / Number(denominator), false);
    return {
      format: 'vcd',
      byteLength: this.place.bytesBefore,
      timeBase: clock.timeBase(numerator, denominator),
      endTicks,
      layout: 'transitions',
      sampleIntervalTicks: null,
      unitTicks: 1 / Number(clock.divisor),
      channels,
      gaps,
      defects: this.defects.toArray(),
      notes: coarse === null ? [] : [coarse],
      log: null,
    };
  }

  private refuseEndlessWord(): void {
    this.report('word-too-long', 0, () => 'a word of millions of characters: nothing is read from here on');
    this.place.bytesBefore += this.carry.takeBytes().length;
    this.isStopped = true;
  }

  /** The file ends where a well-formed one cannot. */
  private noteCut(): void {
    if (this.isStopped) return;
    if (this.awaited !== NO_CODE) {
      this.report('cut-short', 0, () => 'the file ends between a value and its code');
    } else if (this.command !== null || this.block !== null) {
      this.defects.add('cut-short', `the file ends inside ${this.command ?? this.block}`, this.commandPlace);
    }
  }

  private refuseUnusable(): void {
    if (!this.isInBody && this.command !== null) {
      throw errorAt('cut-short', `the file ends inside ${this.command}, before any value`, this.commandPlace);
    }
    const place = this.place.at(0);
    if (this.header.declarationCount === 0)
      throw errorAt('no-channels', 'the dump declares no variables', place);
    if (this.variables.channelCount === 0) {
      throw errorAt('no-channels', 'none of the declared variables can be a channel', place);
    }
    if (!this.signals.clock.isStarted || !this.signals.hasChanges) {
      throw errorAt('no-changes', 'the file ends before the first value change', place);
    }
  }

  private report(code: string, offset: number, describe: () => string): void {
    if (this.defects.isFull) this.defects.addUntold();
    else this.defects.add(code, describe(), this.place.at(offset));
  }

  /** Reads whole words; returns how many bytes are done with. `isWhole`: the last word ends with the bytes; `isFinal`: so does the file. */
  private read(bytes: Uint8Array, isWhole: boolean, isFinal: boolean): number {
    const end = bytes.length;
    const view = new DataView(bytes.buffer, bytes.byteOffset, end);
    let i = 0;
    while (i < end && !this.isStopped) {
      const c = bytes[i];
      if (c <= SPACE) {
        this.takeBlank(c, i);
        i += 1;
        continue;
      }
      this.place.passWord();
      this.isAfterControl = false;
      if (c === HASH && this.isPlain()) {
        const stop = this.takePlain(bytes, view, i);
        if (stop > i) {
          i = stop;
          continue;
        }
      }
      let j = i + 1;
      while (j < end && bytes[j] > SPACE) j += 1;
      if (j === end && !isWhole) break;
      this.takeWord(bytes, i, j, isFinal && j === end);
      i = j;
    }
    const done = this.isStopped ? end : i;
    this.place.bytesBefore += done;
    return done;
  }

  private takeBlank(c: number, offset: number): void {
    if (c !== SPACE && (c < TAB || c > CARRIAGE_RETURN) && !this.isAfterControl) {
      // Lost blocks of a file are often filled with zeros.
      this.report('control-character', offset, () => `control characters (${c}) stand between the words`);
      this.isAfterControl = true;
    }
    this.place.passBlank(c, offset);
  }

  /** Nothing is under way that a plain stamp or change would mean something else for. */
  private isPlain(): boolean {
    const { signals } = this;
    const isIdle = this.awaited === NO_CODE && this.command === null;
    return this.isFast && this.isInBody && isIdle && signals.isTimeKnown && !signals.isOff;
  }

  private takePlain(bytes: Uint8Array, view: DataView, start: number): number {
    const { plain } = this;
    const stop = plain.take(bytes, view, start);
    if (stop > start) this.endBlock();
    this.place.passLines(plain.lines, plain.lineStart);
    if (plain.hasChanges) this.signals.hasChanges = true;
    return stop;
  }

  private takeWord(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    if (this.command !== null) {
      this.continueCommand(bytes, start, end);
      return;
    }
    try {
      const first = bytes[start];
      if (this.awaited !== NO_CODE) this.takeCode(bytes, start, end);
      else if (first === HASH) this.takeStamp(bytes, start, end, isLast);
      else if (isKeyword(bytes, start, end)) this.startCommand(bytes, start, end, isLast);
      else this.takeValue(bytes, start, end, isLast);
    } catch (error) {
      // Times that cannot be kept exact beside those before: what stands before is kept.
      if (!(error instanceof CaptureError) || error.code !== 'time-range') throw error;
      this.report('time-range', start, () => `${error.message}: nothing is read from here on`);
      this.isStopped = true;
    }
  }

  private startCommand(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    const keyword = decodeText(bytes.subarray(start, Math.min(end, start + 64)));
    const place = this.place.at(start);
    if (keyword === '$end') {
      this.endBlock();
    } else if (isBlockOfValues(keyword)) {
      this.enterBody(place);
      this.block = keyword;
      this.commandPlace = place;
      if (keyword === '$dumpon') this.signals.switchOn();
      if (keyword === '$dumpoff') this.signals.switchOff();
    } else if (this.isInBody && !isBodyCommand(keyword)) {
      this.reportUnknown(bytes, start, end, isLast);
    } else {
      this.command = keyword;
      this.commandPlace = place;
      this.words = [];
    }
  }

  private endBlock(): void {
    this.block = null;
    this.signals.isOff = false;
  }

  private continueCommand(bytes: Uint8Array, start: number, end: number): void {
    const command = this.command ?? '';
    if (!isEnd(bytes, start, end)) {
      const isWanted = isDeclaration(command) && !this.isInBody && this.words.length < MOST_WORDS;
      if (isWanted) this.words.push(bytes.slice(start, Math.min(end, start + 65_536)));
      return;
    }
    this.command = null;
    if (this.isInBody) return;
    if (command === '$enddefinitions') this.enterBody(this.commandPlace);
    else this.header.take(command, this.words, this.commandPlace);
    this.words = [];
  }

  /** The header ends with `$enddefinitions`, or where a stamp or value stands without it. */
  private enterBody(place: Place): void {
    if (this.isInBody) return;
    this.isInBody = true;
    if (this.header.declarationCount === 0)
      throw errorAt('no-channels', 'the dump declares no variables', place);
    const scale = this.header.timescale;
    if (scale === null) throw errorAt('no-timescale', 'the dump states no timescale', place);
    this.recorderClock.busySpacing = (BUSY_SPACING_S * Number(scale.denominator)) / Number(scale.numerator);
  }

  private takeStamp(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    this.enterBody(this.place.at(start));
    // No stamp stands inside a block: its end was forgotten.
    this.endBlock();
    const stamp = parseStamp(bytes, start + 1, end);
    if (stamp === null) {
      const code = isLast ? 'cut-short' : 'bad-time';
      this.report(code, start, () => `${quoteForMessage(bytes.subarray(start, end))} is no time stamp`);
      this.signals.loseTime();
      return;
    }
    const result = this.signals.moveTo(stamp);
    if (result === 'taken') return;
    if (isLast) {
      const shown = (): string => `the file ends inside the time stamp ${stamp}, or the time runs backwards`;
      this.report('cut-short', start, shown);
      return;
    }
    this.isStopped = result === 'still-backwards';
    const message = this.isStopped
      ? 'the time stays behind: nothing is read from here on'
      : `the time stamp ${stamp} lies before the one in front of it`;
    this.report('time-backwards', start, () => message);
  }

  private takeValue(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    const first = bytes[start];
    const kind = first | 0x20;
    const isScalar = LEVELS[first] !== 255;
    const isLonger = kind === 0x62 || kind === 0x72 || kind === 0x73;
    if (!isScalar && !isLonger) {
      this.reportUnknown(bytes, start, end, isLast);
      return;
    }
    this.enterBody(this.place.at(start));
    if (isScalar) {
      this.takeScalar(bytes, start, end, isLast);
    } else if (kind === 0x62) {
      this.vector = bytes.slice(start + 1, end);
      this.awaited = VECTOR_CODE;
    } else if (kind === 0x72) {
      // `NaN` and `inf` are what printf writes; neither is a voltage.
      this.real = this.number.parse(bytes, start + 1, end, false) ? this.number.toDouble() : NaN;
      this.awaited = REAL_CODE;
    } else {
      this.awaited = STRING_CODE;
    }
  }

  private reportUnknown(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    const isCut = isLast && this.isInBody;
    const what = this.isInBody ? 'neither a time, a value change nor a command' : 'no command';
    const shown = (): string => `${quoteForMessage(bytes.subarray(start, end))} is ${what}`;
    this.report(isCut ? 'cut-short' : 'unknown-word', start, shown);
  }

  private takeScalar(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    if (end - start === 1) {
      const message = isLast ? 'the file ends inside a value change' : 'a value change without a code';
      this.report(isLast ? 'cut-short' : 'bad-value', start, () => message);
      return;
    }
    const index = this.findVariable(bytes, start + 1, end);
    if (index >= 0) this.signals.changeScalar(index, LEVELS[bytes[start]]);
  }

  private takeCode(bytes: Uint8Array, start: number, end: number): void {
    const kind = this.awaited;
    this.awaited = NO_CODE;
    const index = this.findVariable(bytes, start, end);
    if (index < 0) return;
    if (kind === REAL_CODE) this.signals.changeReal(index, this.real);
    if (kind !== VECTOR_CODE || this.signals.changeVector(index, this.vector)) return;
    this.report('bad-value', start, () => `b${quoteForMessage(this.vector)} is no value of a vector`);
  }

  private findVariable(bytes: Uint8Array, start: number, end: number): number {
    const index = this.variables.find(bytes, start, end);
    if (index < 0) {
      const shown = (): string => quoteForMessage(bytes.subarray(start, end));
      this.report('unknown-code', start, () => `no variable is declared with the code ${shown()}`);
    }
    return index;
  }
}
