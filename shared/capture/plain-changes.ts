import { fourDigits, isFourDigits } from './digit-words';
import type { DigitalRecorder } from './digital-recorder';
import type { TickClock } from './tick-clock';
import type { VcdVariables } from './vcd-variables';

const TAB = 9;
const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const SPACE = 32;
const HASH = 35;
const ZERO = 0x30;
const SMALL_B = 0x62;
/** Longest code that is found without a search. */
const LONGEST_CODE = 3;
/** Stamps of these many digits are compared with the one before by words of four, the first of which holds the `#` too. */
const LEAST_DIGITS = 4;
const MOST_DIGITS = 15;

/**
 * Reads the bulk of a dump, stamps and changes to 0 and 1, without a look at words one by one. Stops in front of the first word that
 * is anything else, which the reader of words takes; both come to the same result. The loops are long because a call or an object
 * per line would cost more than the line.
 */
export class PlainChanges {
  /** Lines that the last `take` went past, and the offset at which the line begins that it stopped in. */
  lines = 0;
  lineStart = 0;
  /** The last `take` met a change. */
  hasChanges = false;
  private ticks = 0;
  /** Where the last stamp stood, and its digits; 0 where it cannot be compared with. */
  private stampAt = 0;
  private stampDigits = 0;

  constructor(
    private readonly variables: VcdVariables,
    private readonly clock: TickClock,
  ) {}

  /** Takes what is plain, beginning with the `#` at `start`. Returns the offset of the word it stopped at. */
  take(bytes: Uint8Array, view: DataView, start: number): number {
    this.lines = 0;
    this.hasChanges = false;
    this.stampDigits = 0;
    const origin = this.clock.narrowOrigin;
    if (origin === null) return start;
    const { indexByShortCode, oneBit } = this.variables;
    const end = bytes.length - 1;
    let ticks = this.clock.roundedTicks();
    let latest: DigitalRecorder | null = null;
    let i = start | 0;
    while (i < end) {
      const first = bytes[i];
      let j = i + 1;
      if (first === HASH) {
        let value = 0;
        let digit = bytes[j] - ZERO;
        while (digit >= 0 && digit <= 9 && j < end) {
          value = value * 10 + digit;
          j += 1;
          digit = bytes[j] - ZERO;
        }
        const digits = j - i - 1;
        const next = value - origin;
        if (digits === 0 || digits > MOST_DIGITS || !isBlank(bytes, j, end) || next < ticks) break;
        ticks = next;
        this.stampAt = i;
        this.stampDigits = digits >= LEAST_DIGITS ? digits : 0;
      } else if (first === ZERO || first === ZERO + 1) {
        let key = bytes[j] - SPACE;
        if (bytes[j + 1] === LINE_FEED && key > 0 && key < 95) j += 1;
        else [key, j] = [this.keyOf(bytes, j, end), this.wordEnd];
        const index = key < 0 ? -1 : indexByShortCode[key] - 1;
        const recorder = index < 0 ? null : oneBit[index];
        if (recorder === null) break;
        recorder.change(ticks, first - ZERO);
        this.hasChanges = true;
        if (recorder === latest && this.isPair(bytes, i, j)) {
          this.ticks = ticks;
          const repeats = this.takeRepeats(bytes, view, i, j, recorder);
          if (repeats > 0) {
            ticks = this.ticks;
            i = repeats;
            continue;
          }
        }
        latest = recorder;
      } else {
        j = first === SMALL_B ? this.takeVector(bytes, i, end, ticks) : -1;
        if (j < 0) break;
      }
      // Past the blank.
      const blank = bytes[j];
      i = (blank === CARRIAGE_RETURN ? j + 2 : j + 1) | 0;
      if (blank !== SPACE && blank !== TAB) {
        this.lines += 1;
        this.lineStart = i;
      }
    }
    this.clock.moveTo(ticks);
    return i;
  }

  /** Offset of the blank behind the code looked for last. */
  private wordEnd = 0;

  /** Offset of the blank behind the vector change at `at`; −1 where it is not plain. */
  private takeVector(bytes: Uint8Array, at: number, end: number, ticks: number): number {
    let j = at + 1;
    while (j < end && (bytes[j] & 0xfe) === ZERO) j += 1;
    const digits = j - at - 1;
    if (digits === 0 || j >= end || bytes[j] !== SPACE) return -1;
    const key = this.keyOf(bytes, j + 1, end);
    const index = key < 0 ? -1 : this.variables.indexByShortCode[key] - 1;
    if (index < 0) return -1;
    const variable = this.variables.list[index];
    if (variable.kind !== 'bits') return -1;
    const { bits } = variable;
    const surplus = digits - bits.length;
    for (let k = 0; k < bits.length; k++) {
      const level = k + surplus < 0 ? 0 : bytes[at + 1 + k + surplus] - ZERO;
      if (level !== bits[k].level) bits[k].change(ticks, level);
    }
    this.hasChanges = true;
    return this.wordEnd;
  }

  /** Key in `indexByShortCode` of the word at `at`, and sets `wordEnd`; −1 where it is long or not followed by a blank. */
  private keyOf(bytes: Uint8Array, at: number, end: number): number {
    let key = 0;
    let j = at;
    let byte = bytes[j];
    while (byte > SPACE && byte < 127 && j < end && j - at < LONGEST_CODE) {
      key = key * 95 + byte - SPACE;
      j += 1;
      byte = bytes[j];
    }
    this.wordEnd = j;
    return isBlank(bytes, j, end) ? key : -1;
  }

  /** The change at `at`, which ends at `wordEnd`, stands in the line behind the last stamp, and ends with a line feed. */
  private isPair(bytes: Uint8Array, at: number, wordEnd: number): boolean {
    if (this.stampDigits === 0 || bytes[at - 1] !== LINE_FEED) return false;
    const distance = at - this.stampAt - 1 - this.stampDigits;
    const isNext = distance === 1 || (distance === 2 && bytes[at - 2] === CARRIAGE_RETURN);
    return isNext && bytes[wordEnd] !== SPACE && bytes[wordEnd] !== TAB;
  }

  /**
   * Takes pairs of lines, a stamp and a change of one and the same variable, as a clock writes them by the million: pairs that differ
   * from the one in front, whose change stands at `changeAt` and is taken already, only in the last eight digits of the time and in
   * the level. Returns the offset behind the last of them; 0 where there are none.
   */
  private takeRepeats(
    bytes: Uint8Array,
    view: DataView,
    changeAt: number,
    wordEnd: number,
    recorder: DigitalRecorder,
  ): number {
    const digits = this.stampDigits;
    const before = this.stampAt;
    const start = wordEnd + (bytes[wordEnd] === CARRIAGE_RETURN ? 2 : 1);
    const length = (start - before) | 0;
    const last = bytes.length - length;
    // The words overlap where there are less than fifteen digits, so that each digit is looked at.
    const lowAt = (digits - 3) | 0;
    const middleAt = Math.max(0, digits - 7) | 0;
    const secondAt = Math.max(0, digits - 11) | 0;
    const levelAt = (changeAt - before) | 0;
    if (start > last || view.byteLength < start + length) return 0;
    const head = view.getInt32(before, true);
    const second = view.getInt32(before + secondAt, true);
    const change = view.getInt32(before + levelAt - 1, true);
    const hasMore = levelAt > digits + 2 || length > levelAt + 3;
    let middle = view.getInt32(before + middleAt, true);
    let low = fourDigits(view.getInt32(before + lowAt, true));
    let base = this.ticks - low;
    const isBusy = recorder.isTooBusy;
    let { level } = recorder;
    let changes = 0;
    let changeTicks = 0;
    let i = start | 0;
    for (; i <= last; i = (i + length) | 0) {
      if (((view.getInt32(i, true) ^ head) | (view.getInt32(i + secondAt, true) ^ second)) !== 0) break;
      const difference = view.getInt32(i + levelAt - 1, true) ^ change;
      const word = view.getInt32(i + lowAt, true);
      if ((difference & ~0x100) !== 0 || !isFourDigits(word)) break;
      if (hasMore && !isSameEnd(bytes, i, length, digits, levelAt)) break;
      const next = fourDigits(word);
      const above = view.getInt32(i + middleAt, true);
      if (above !== middle) {
        const step = (fourDigits(above) - fourDigits(middle)) | 0;
        if (step < 0 || !isFourDigits(above)) break;
        base += step * 10_000;
        middle = above;
      } else if (next <= low) {
        break;
      }
      low = next;
      const nextLevel = bytes[i + levelAt] - ZERO;
      if (!isBusy) {
        recorder.change(base + low, nextLevel);
      } else if (nextLevel !== level) {
        level = nextLevel;
        changes = (changes + 1) | 0;
        changeTicks = base + low;
      }
    }
    if (i === start) return 0;
    if (changes > 0) recorder.countBusyChanges(changes, changeTicks, level);
    this.ticks = base + low;
    this.stampAt = i - length;
    this.lines += (2 * (i - before)) / length - 1;
    this.lineStart = i;
    return i;
  }
}

/** A blank, or an end of line that is whole. */
function isBlank(bytes: Uint8Array, at: number, end: number): boolean {
  const byte = bytes[at];
  if (byte === LINE_FEED || byte === SPACE || byte === TAB) return true;
  return byte === CARRIAGE_RETURN && at < end && bytes[at + 1] === LINE_FEED;
}

/** What the words leave out: CR behind the stamp, and the end of the line of the change. */
function isSameEnd(bytes: Uint8Array, at: number, length: number, digits: number, levelAt: number): boolean {
  const before = at - length;
  for (let k = digits + 1; k < levelAt; k++) if (bytes[at + k] !== bytes[before + k]) return false;
  for (let k = levelAt + 1; k < length; k++) if (bytes[at + k] !== bytes[before + k]) return false;
  return true;
}
