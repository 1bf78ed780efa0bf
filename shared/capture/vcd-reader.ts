import type { Capture, Channel } from './capture';
import { HIGH, LOW, UNKNOWN } from './capture';
import { CaptureError } from './capture-error';
import type { Place } from './defect-list';
import { DefectList } from './defect-list';
import type { DigitalRecorder, RecorderClock } from './digital-recorder';
import { BUSY_SPACING_S } from './digital-recorder';
import type { FormatReader, KeepRule } from './format-reader';
import { PlainChanges } from './plain-changes';
import { decodeText, quoteForMessage } from './text-bytes';
import { TickClock } from './tick-clock';
import { VcdGaps } from './vcd-gaps';
import { VcdHeader } from './vcd-header';
import { VcdVariables } from './vcd-variables';

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const SPACE = 32;
const HASH = 35;
const DOLLAR = 36;

/** Longest word that may be needed whole. A vector value may be longer: of it only the end counts. */
const LONGEST_WORD = 4_194_304;
const MOST_WORDS = 16;
const LONGEST_STAMP = 40;

const END = [0x24, 0x65, 0x6e, 0x64];

const NO_CODE = 0;
const VECTOR_CODE = 1;
const REAL_CODE = 2;
const STRING_CODE = 3;

/** Level by the character of a value change; 255 where it is none. Source: IEEE 1364-2005 §18.2.2; nine-valued levels: practice. */
const LEVELS = new Uint8Array(256).fill(255);
for (const c of '0lL') LEVELS[c.charCodeAt(0)] = LOW;
for (const c of '1hH') LEVELS[c.charCodeAt(0)] = HIGH;
for (const c of 'xXzZuUwW-') LEVELS[c.charCodeAt(0)] = UNKNOWN;

const DECLARATIONS = new Set(['$timescale', '$scope', '$upscope', '$var', '$enddefinitions']);

/**
 * Reads a value change dump, chunk by chunk.
 * Source: IEEE 1364-2005 §18.2; what occurs beyond it is practice.
 */
export class VcdReader implements FormatReader {
  private readonly defects = new DefectList();
  private readonly recorderClock: RecorderClock = { busySpacing: 0 };
  private readonly variables: VcdVariables;
  private readonly header: VcdHeader;
  private readonly gaps = new VcdGaps();
  private readonly clock: TickClock;

  private carry = new Uint8Array(0);
  private bytesBefore = 0;
  private line = 1;
  private lineStart = 0;
  private isAfterReturn = false;

  private isInBody = false;
  private hasChanges = false;
  /** Command whose `$end` has not come yet. */
  private command: string | null = null;
  private commandPlace: Place = { line: 1, column: 1, byte: 0 };
  private words: Uint8Array[] = [];
  private isOff = false;

  /** A value is read, its code comes next. */
  private awaited = NO_CODE;
  private vector: Uint8Array = new Uint8Array(0);
  private real = 0;

  /** Values whose time is not known because their stamp lies before the one in front of it. */
  private doubtful: Map<DigitalRecorder, number> | null = null;
  private isStopped = false;

  private readonly plain: PlainChanges;

  constructor(
    isKept: KeepRule,
    /** False: every word is looked at by itself; slower, and what the faster way is checked against. */
    private readonly isFast = true,
  ) {
    this.variables = new VcdVariables(this.recorderClock, isKept);
    this.header = new VcdHeader(this.variables, this.defects);
    const { variables, gaps } = this;
    this.clock = new TickClock(function* () {
      yield* variables.digital;
      yield* variables.analog;
      yield gaps;
    });
    this.plain = new PlainChanges(variables, this.clock);
  }

  push(chunk: Uint8Array): void {
    if (this.isStopped) {
      this.bytesBefore += chunk.length;
      return;
    }
    let rest = chunk;
    if (this.carry.length > 0) {
      let cut = 0;
      while (cut < chunk.length && chunk[cut] > SPACE) cut += 1;
      const joined = new Uint8Array(this.carry.length + cut);
      joined.set(this.carry);
      joined.set(chunk.subarray(0, cut), this.carry.length);
      if (cut === chunk.length) {
        this.carry = this.bounded(joined);
        return;
      }
      this.carry = new Uint8Array(0);
      this.read(joined, true, false);
      rest = chunk.subarray(cut);
    }
    const used = this.read(rest, false, false);
    this.carry = this.bounded(rest.slice(used));
  }

  finish(): Capture {
    if (this.carry.length > 0) this.read(this.carry, true, true);
    this.noteCut();
    this.refuseUnusable();
    const digital: Channel[] = this.variables.digital.map((recorder) => recorder.finish());
    const analog: Channel[] = this.variables.analog.map((recorder) => recorder.finish());
    const endTicks = this.clock.endTicks();
    const { numerator, denominator } = this.header.timescale ?? { numerator: 1n, denominator: 1n };
    return {
      format: 'vcd',
      byteLength: this.bytesBefore,
      timeBase: this.clock.timeBase(numerator, denominator),
      endTicks,
      layout: 'transitions',
      sampleIntervalTicks: null,
      unitTicks: 1 / Number(this.clock.divisor),
      channels: [...digital, ...analog],
      gaps: this.gaps.toSpans(endTicks),
      defects: this.defects.toArray(),
      log: [],
    };
  }

  /** Keeps a word that goes on in the next chunk from growing without bound. */
  private bounded(word: Uint8Array<ArrayBuffer>): Uint8Array<ArrayBuffer> {
    if (word.length <= LONGEST_WORD) return word;
    const message = `a word of more than ${LONGEST_WORD} characters`;
    if (!this.hasChanges)
      throw new CaptureError('word-too-long', message, { line: this.line, byte: this.bytesBefore });
    this.defects.add('word-too-long', `${message}: reading stops here`, this.placeOf(0));
    this.isStopped = true;
    this.bytesBefore += word.length;
    return new Uint8Array(0);
  }

  private noteCut(): void {
    const place = { line: this.line, column: this.bytesBefore - this.lineStart + 1, byte: this.bytesBefore };
    if (this.isStopped) return;
    if (!this.isInBody) return;
    if (this.awaited !== NO_CODE) {
      this.defects.add('cut-short', 'the file ends between a value and its code', place);
    } else if (this.command !== null) {
      this.defects.add('cut-short', `the file ends inside ${this.command}`, this.commandPlace);
    }
  }

  private refuseUnusable(): void {
    const place = { line: this.line, byte: this.bytesBefore };
    if (!this.isInBody && this.command !== null) {
      const { line, column, byte } = this.commandPlace;
      const where = { line: line ?? undefined, column: column ?? undefined, byte: byte ?? undefined };
      throw new CaptureError('cut-short', `the file ends inside ${this.command}, before any value`, where);
    }
    if (this.header.declarationCount === 0) {
      throw new CaptureError('no-channels', 'the dump declares no variables', place);
    }
    if (this.variables.channelCount === 0) {
      throw new CaptureError('no-channels', 'none of the declared variables can be a channel', place);
    }
    if (!this.clock.isStarted || !this.hasChanges) {
      throw new CaptureError('no-changes', 'the file ends before the first value change', place);
    }
  }

  private placeOf(offset: number): Place {
    const byte = this.bytesBefore + offset;
    return { line: this.line, column: byte - this.lineStart + 1, byte };
  }

  /** Reads whole words; returns how many bytes are done with. `isWhole`: the last word ends with the bytes; `isFinal`: so does the file. */
  private read(bytes: Uint8Array, isWhole: boolean, isFinal: boolean): number {
    const end = bytes.length;
    const view = new DataView(bytes.buffer, bytes.byteOffset, end);
    let i = 0;
    while (i < end && !this.isStopped) {
      const c = bytes[i];
      if (c <= SPACE) {
        if (c === LINE_FEED) {
          if (!this.isAfterReturn) this.line += 1;
          this.lineStart = this.bytesBefore + i + 1;
        } else if (c === CARRIAGE_RETURN) {
          this.line += 1;
          this.lineStart = this.bytesBefore + i + 1;
        }
        this.isAfterReturn = c === CARRIAGE_RETURN;
        i += 1;
        continue;
      }
      this.isAfterReturn = false;
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
    this.bytesBefore += done;
    return done;
  }

  /** Nothing is under way that a plain stamp or change would mean something else for. */
  private isPlain(): boolean {
    return (
      this.isFast &&
      this.isInBody &&
      this.awaited === NO_CODE &&
      this.command === null &&
      this.doubtful === null &&
      !this.isOff
    );
  }

  private takePlain(bytes: Uint8Array, view: DataView, start: number): number {
    const { plain } = this;
    const stop = plain.take(bytes, view, start);
    if (plain.lines > 0) {
      this.line += plain.lines;
      this.lineStart = this.bytesBefore + plain.lineStart;
    }
    if (plain.hasChanges) this.hasChanges = true;
    return stop;
  }

  private takeWord(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    if (this.awaited !== NO_CODE) {
      this.takeCode(bytes, start, end);
      return;
    }
    if (this.command !== null) {
      this.continueCommand(bytes, start, end);
      return;
    }
    const first = bytes[start];
    if (first === HASH) {
      this.takeStamp(bytes, start, end);
    } else if (first === DOLLAR && isKeyword(bytes, start, end)) {
      this.startCommand(decodeText(bytes.subarray(start, end)), this.placeOf(start));
    } else {
      this.takeValue(bytes, start, end, isLast);
    }
  }

  private startCommand(keyword: string, place: Place): void {
    if (keyword === '$end') {
      this.isOff = false;
      return;
    }
    if (keyword === '$dumpvars' || keyword === '$dumpall' || keyword === '$dumpon') {
      this.enterBody(place);
      if (keyword === '$dumpon') this.gaps.close(this.clock.ticks());
      return;
    }
    if (keyword === '$dumpoff') {
      this.enterBody(place);
      this.switchOff();
      return;
    }
    this.command = keyword;
    this.commandPlace = place;
    this.words = [];
  }

  private continueCommand(bytes: Uint8Array, start: number, end: number): void {
    const isEnd = end - start === 4 && END.every((c, k) => bytes[start + k] === c);
    const command = this.command ?? '';
    if (!isEnd) {
      const isWanted = DECLARATIONS.has(command) && !this.isInBody && this.words.length < MOST_WORDS;
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
    const where = {
      line: place.line ?? undefined,
      column: place.column ?? undefined,
      byte: place.byte ?? undefined,
    };
    if (this.header.declarationCount === 0) {
      throw new CaptureError('no-channels', 'the dump declares no variables', where);
    }
    const scale = this.header.timescale;
    if (scale === null) throw new CaptureError('no-timescale', 'the dump states no timescale', where);
    this.recorderClock.busySpacing = (BUSY_SPACING_S * Number(scale.denominator)) / Number(scale.numerator);
  }

  private switchOff(): void {
    this.isOff = true;
    const ticks = this.clock.ticks();
    this.gaps.open(ticks);
    for (const recorder of this.variables.digital) recorder.change(ticks, UNKNOWN);
    for (const recorder of this.variables.analog) recorder.change(ticks, NaN);
  }

  private takeStamp(bytes: Uint8Array, start: number, end: number): void {
    let value = 0;
    let isNumber = end - start > 1;
    for (let i = start + 1; i < end; i++) {
      const digit = bytes[i] - 48;
      if (digit < 0 || digit > 9) isNumber = false;
      value = value * 10 + digit;
    }
    if (!this.isInBody) this.enterBody(this.placeOf(start));
    if (!isNumber || end - start > LONGEST_STAMP) {
      const shown = quoteForMessage(bytes.subarray(start, end));
      this.defects.add('bad-time', `${shown} is no time stamp`, this.placeOf(start));
      this.doubtful ??= new Map();
      return;
    }
    const isExact = end - start <= 16;
    const stamp = isExact ? value : BigInt(decodeText(bytes.subarray(start + 1, end)));
    this.moveTo(stamp, start);
  }

  private moveTo(stamp: number | bigint, offset: number): void {
    const before = this.clock.isStarted ? this.clock.roundedTicks() : 0;
    if (this.clock.advance(stamp)) {
      if (this.doubtful !== null) this.settleDoubt(before);
      return;
    }
    const place = this.placeOf(offset);
    if (this.doubtful !== null) {
      this.defects.add('time-backwards', 'the time stays behind: nothing is read from here on', place);
      this.isStopped = true;
      return;
    }
    this.defects.add('time-backwards', `the time stamp ${stamp} lies before the one in front of it`, place);
    this.doubtful = new Map();
  }

  /** The time is known again: what changed since is unknown up to here and known from here on. */
  private settleDoubt(before: number): void {
    const now = this.clock.ticks();
    for (const [recorder, level] of this.doubtful ?? []) {
      if (now > before) recorder.change(before + 1, UNKNOWN);
      recorder.change(now, level);
    }
    this.doubtful = null;
  }

  private takeValue(bytes: Uint8Array, start: number, end: number, isLast: boolean): void {
    const first = bytes[start];
    if (!this.isInBody) {
      if (!startsValue(first)) {
        const shown = quoteForMessage(bytes.subarray(start, end));
        this.defects.add('unknown-word', `${shown} is no command`, this.placeOf(start));
        return;
      }
      this.enterBody(this.placeOf(start));
    }
    if (first === 0x62 || first === 0x42) {
      this.vector = bytes.slice(start + 1, end);
      this.awaited = VECTOR_CODE;
    } else if (first === 0x72 || first === 0x52) {
      this.real = parseReal(decodeText(bytes.subarray(start + 1, Math.min(end, start + 64))));
      this.awaited = REAL_CODE;
    } else if (first === 0x73 || first === 0x53) {
      this.awaited = STRING_CODE;
    } else if (LEVELS[first] !== 255) {
      if (end - start === 1) {
        const code = isLast ? 'cut-short' : 'bad-value';
        const message = isLast ? 'the file ends inside a value change' : 'a value change without a code';
        this.defects.add(code, message, this.placeOf(start));
        return;
      }
      this.changeScalar(this.findVariable(bytes, start + 1, end), LEVELS[first]);
    } else {
      const shown = quoteForMessage(bytes.subarray(start, end));
      const code = isLast ? 'cut-short' : 'unknown-word';
      this.defects.add(code, `${shown} is neither a time, a value change nor a command`, this.placeOf(start));
    }
  }

  private takeCode(bytes: Uint8Array, start: number, end: number): void {
    const kind = this.awaited;
    this.awaited = NO_CODE;
    const index = this.findVariable(bytes, start, end);
    if (index < 0 || kind === STRING_CODE) return;
    const variable = this.variables.list[index];
    if (variable.kind === 'real') {
      if (kind === REAL_CODE) this.changeReal(index, this.real);
      return;
    }
    if (variable.kind !== 'bits' || kind !== VECTOR_CODE) return;
    this.changeVector(variable.bits, start);
  }

  private findVariable(bytes: Uint8Array, start: number, end: number): number {
    const index = this.variables.find(bytes, start, end);
    if (index < 0) {
      const shown = quoteForMessage(bytes.subarray(start, end));
      this.defects.add('unknown-code', `no variable is declared with the code ${shown}`, this.placeOf(start));
    }
    return index;
  }

  private changeScalar(index: number, level: number): void {
    if (index < 0) return;
    const variable = this.variables.list[index];
    if (variable.kind !== 'bits') return;
    const fill = level === HIGH ? LOW : level;
    const last = variable.bits.length - 1;
    for (let i = 0; i < last; i++) this.change(variable.bits[i], fill);
    this.change(variable.bits[last], level);
  }

  /** Source: IEEE 1364-2005 §18.2.2: a value shorter than its vector is extended to the left, by 0 after 0 or 1, else by its first digit. */
  private changeVector(bits: readonly DigitalRecorder[], offset: number): void {
    const digits = this.vector;
    const surplus = digits.length - bits.length;
    const first = digits.length === 0 ? 255 : LEVELS[digits[0]];
    const fill = first === HIGH ? LOW : first;
    for (let i = 0; i < bits.length; i++) {
      const at = i + surplus;
      const level = at < 0 ? fill : LEVELS[digits[at]];
      if (level === 255) {
        this.defects.add('bad-value', `b${quoteForMessage(digits)} is no vector value`, this.placeOf(offset));
        return;
      }
      this.change(bits[i], level);
    }
  }

  private changeReal(index: number, value: number): void {
    const variable = this.variables.list[index];
    if (variable.kind !== 'real' || this.isOff) return;
    this.hasChanges = true;
    if (this.doubtful !== null) return;
    variable.recorder.change(this.clock.ticks(), value);
  }

  private change(recorder: DigitalRecorder, level: number): void {
    this.hasChanges = true;
    if (this.isOff) return;
    if (this.doubtful !== null) this.doubtful.set(recorder, level);
    else recorder.change(recorder.isTooBusy ? this.clock.roundedTicks() : this.clock.ticks(), level);
  }
}

/** `$` followed by a letter. A code may begin with `$` too, but a code never begins a word of the file. */
function isKeyword(bytes: Uint8Array, start: number, end: number): boolean {
  const letter = bytes[start + 1] | 0x20;
  return end - start > 1 && letter >= 0x61 && letter <= 0x7a;
}

function startsValue(first: number): boolean {
  return LEVELS[first] !== 255 || 'bBrRsS'.includes(String.fromCharCode(first));
}

/** `NaN` and `inf` are what printf writes; neither is a voltage. */
function parseReal(text: string): number {
  const value = Number(text);
  return text !== '' && Number.isFinite(value) ? value : NaN;
}
