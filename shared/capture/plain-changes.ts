import type { DigitalRecorder } from './digital-recorder';
import { HIGH, LOW } from './capture';
import { fourDigits, isFourDigits } from './digit-words';
import type { TickClock } from './tick-clock';
import type { VcdVariables } from './vcd-variables';

const LINE_FEED = 10;
const HASH = 35;
const ZERO = 0x30;
/** Stamps of this many digits are read as three parts: four digits each below, the rest above. */
const LEAST_DIGITS = 8;
const MOST_DIGITS = 15;

/**
 * Reads the bulk of a dump, lines of `#` digits and lines of one-bit changes, without looking at words one by one: most digits of
 * a stamp are those of the stamp before. Stops in front of the first word that is anything else, which the reader of words takes;
 * both come to the same result. One loop, because a call or an object per line would cost more than the line.
 */
export class PlainChanges {
  /** Lines that the last `take` went past, and the offset at which the line begins that it stopped in. */
  lines = 0;
  lineStart = 0;
  private ticks = 0;
  /** The last `take` met a change. */
  hasChanges = false;

  constructor(
    private readonly variables: VcdVariables,
    private readonly clock: TickClock,
  ) {}

  /** Takes what is plain, beginning with the `#` at `start`, which must begin a line. Returns the offset of the word it stopped at. */
  take(bytes: Uint8Array, view: DataView, start: number): number {
    this.lines = 0;
    this.lineStart = start;
    const origin = this.clock.narrowOrigin;
    if (origin === null) return start;
    const { oneBit, indexByShortCode } = this.variables;
    const end = bytes.length - 1;
    let ticks = this.clock.roundedTicks();
    let digits = 0;
    let upper = 0;
    let upperWord = 0;
    let secondWord = 0;
    let middle = 0;
    let middleWord = 0;
    let i = start | 0;
    let lines = 0;
    let lineStart = start;
    let hasChanges = false;
    let latest: DigitalRecorder | null = null;
    while (i < end) {
      const first = bytes[i];
      let j = i + 1;
      if (first === HASH) {
        let value = -1;
        if (digits !== 0 && j + digits < end && bytes[j + digits] === LINE_FEED) {
          const word = view.getInt32(j + digits - 4, true);
          const above = view.getInt32(j + digits - 8, true);
          const isSame = digits <= 12 || view.getInt32(j + digits - 12, true) === secondWord;
          if (isSame && view.getInt32(j, true) === upperWord && isFourDigits(word)) {
            if (above !== middleWord && isFourDigits(above)) {
              middleWord = above;
              middle = fourDigits(above);
            }
            if (above === middleWord) value = upper + middle * 10_000 + fourDigits(word);
          }
          j += digits;
        }
        if (value < 0) {
          j = i + 1;
          let digit = bytes[j] - ZERO;
          value = 0;
          while (digit >= 0 && digit <= 9 && j < end) {
            value = value * 10 + digit;
            j += 1;
            digit = bytes[j] - ZERO;
          }
          digits = j - i - 1;
          if (digits === 0 || digits > MOST_DIGITS || bytes[j] !== LINE_FEED) break;
          if (digits < LEAST_DIGITS) {
            digits = 0;
          } else {
            upperWord = view.getInt32(i + 1, true);
            middleWord = view.getInt32(j - 8, true);
            middle = fourDigits(middleWord);
            // Words overlap where there are less than twelve digits; a carry into the shared ones changes both.
            upper = value - fourDigits(view.getInt32(j - 4, true)) - middle * 10_000;
            if (digits > 12) secondWord = view.getInt32(j - 12, true);
          }
        }
        const next = value - origin;
        if (next < ticks) break;
        ticks = next;
      } else {
        let key = 0;
        let byte = bytes[j];
        while (byte > 32 && byte < 127 && j < end && j - i <= 3) {
          key = key * 95 + byte - 32;
          j += 1;
          byte = bytes[j];
        }
        if (byte !== LINE_FEED || (first !== ZERO && first !== ZERO + 1)) break;
        const index = indexByShortCode[key];
        if (index === 0) break;
        const recorder = oneBit[index - 1];
        if (recorder === null) break;
        recorder.change(ticks, first === ZERO ? LOW : HIGH);
        hasChanges = true;
        if (recorder === latest && j === i + 2 && digits !== 0) {
          this.ticks = ticks;
          const stop = this.takeRepeats(view, j + 1, digits, recorder, bytes[i + 1]);
          if (stop > j + 1) {
            ticks = this.ticks;
            lines += (2 * (stop - j - 1)) / (digits + 5);
            j = stop - 1;
            digits = 0;
          }
        }
        latest = recorder;
      }
      i = (j + 1) | 0;
      lines += 1;
      lineStart = i;
    }
    this.clock.moveTo(ticks);
    this.lines = lines;
    this.lineStart = lineStart;
    this.hasChanges = hasChanges;
    return i;
  }

  /**
   * Takes pairs of lines, a stamp of `digits` digits and a change of one and the same variable, as a clock writes them by the million.
   * `this.ticks` is the time before and after. Returns the offset behind the last whole pair that fits.
   */
  private takeRepeats(
    view: DataView,
    start: number,
    digits: number,
    recorder: DigitalRecorder,
    code: number,
  ): number {
    const length = (digits + 5) | 0;
    const before = start - length;
    const last = view.byteLength - length;
    const lowAt = (digits - 3) | 0;
    const middleAt = (digits - 7) | 0;
    // The words overlap where there are less than fifteen digits, so that each digit is looked at.
    const secondAt = Math.max(0, digits - 11) | 0;
    if (before < 0 || start > last) return start;
    const head = view.getInt32(before, true);
    const second = view.getInt32(before + secondAt, true);
    let middle = view.getInt32(before + middleAt, true);
    const end = LINE_FEED | (ZERO << 8) | (code << 16) | (LINE_FEED << 24);
    let low = fourDigits(view.getInt32(before + lowAt, true));
    let base = this.ticks - low;
    const isBusy = recorder.isTooBusy;
    let level = recorder.level;
    let changes = 0;
    let changeTicks = 0;
    let i = start | 0;
    for (; i <= last; i = (i + length) | 0) {
      if (((view.getInt32(i, true) ^ head) | (view.getInt32(i + secondAt, true) ^ second)) !== 0) break;
      const change = view.getInt32(i + digits + 1, true) ^ end;
      const word = view.getInt32(i + lowAt, true);
      if ((change & ~0x100) !== 0 || !isFourDigits(word)) break;
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
      const nextLevel = change >>> 8;
      if (!isBusy) {
        recorder.change(base + low, nextLevel);
      } else if (nextLevel !== level) {
        level = nextLevel;
        changes = (changes + 1) | 0;
        changeTicks = base + low;
      }
    }
    if (changes > 0) recorder.countBusyChanges(changes, changeTicks, level);
    this.ticks = base + low;
    return i;
  }
}
