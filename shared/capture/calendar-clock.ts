const SECONDS_PER_DAY = 86_400;
/** A clock without a date that falls back by more than this has passed midnight, seconds. */
const MIDNIGHT_FALL_S = SECONDS_PER_DAY / 2;

const DATE = String.raw`(?:(\d{4})[-/.](\d{1,2})[-/.](\d{1,2})|(\d{1,2})([./-])(\d{1,2})[./-](\d{4}))`;
const CLOCK = String.raw`(?:(\d{1,3}):)?(\d{1,2}):(\d{1,2})(?:[.,:](\d{1,12}))?\s*([ap]m)?`;
const ZONE = String.raw`(Z|[+-]\d{2}:?(?:\d{2})?)?`;
const STAMP = new RegExp(`^(?:${DATE}(?:T|\\s+|_))?${CLOCK}\\s*${ZONE}$`, 'i');
/** What may follow a stamp that ends with its second. */
const FRACTION = /^[.,]\d{1,12}$/;
const SECOND = /:\d{1,2}:\d{2}$/;
const DATE_ALONE = new RegExp(`^${DATE}$`);

/** Whether a text is a time of day, with or without a date, such as `2031-04-05 12:30:00,25` or `12:30:00.25`. */
export function isClockText(text: string): boolean {
  return text.length < 64 && text.includes(':') && secondsOfClock(text) !== null;
}

/** Whether a text is a date without a time of day. */
export function isDateText(text: string): boolean {
  const match = text.length > 10 ? null : DATE_ALONE.exec(text);
  return match !== null && dayNumber(match) !== null;
}

interface ClockTime {
  /** Whole seconds since 1970 where there is a date, else since midnight. */
  readonly seconds: number;
  /** Digits behind the point. */
  readonly fraction: string;
  readonly hasDate: boolean;
}

/** Source: ISO 8601 for year-first dates and zones; the other orders, `12:30:00:250` and am/pm are practice. */
function secondsOfClock(text: string): ClockTime | null {
  const match = STAMP.exec(text.trim());
  if (match === null) return null;
  const hasDate = (match[1] ?? match[7]) !== undefined;
  const [hours, minutes, seconds, fraction = '', half, zone] = match.slice(8);
  const hour = hourOf(Number(hours ?? 0), half?.toLowerCase());
  // Two parts are minutes and seconds only where a fraction shows that the last part is seconds.
  if (hours === undefined && fraction === '') return null;
  if (Number(minutes) > 59 || Number(seconds) > 60 || hour === null || (hasDate && hour > 24)) return null;
  const day = hasDate ? dayNumber(match) : 0;
  if (day === null) return null;
  const whole = day * SECONDS_PER_DAY + hour * 3600 + Number(minutes) * 60 + Number(seconds);
  return { seconds: whole - secondsOfZone(zone), fraction, hasDate };
}

function hourOf(hour: number, half: string | undefined): number | null {
  if (half === undefined) return hour;
  return hour < 1 || hour > 12 ? null : (hour % 12) + (half === 'pm' ? 12 : 0);
}

/** Days since 1970; null where the calendar has no such day. `a/b/year` is month first unless only day first is possible. */
function dayNumber(match: RegExpExecArray): number | null {
  const isYearFirst = match[1] !== undefined;
  const year = Number(isYearFirst ? match[1] : match[7]);
  const [first, second] = isYearFirst ? [match[2], match[3]] : [match[4], match[6]];
  const isDayFirst = !isYearFirst && (match[5] !== '/' || Number(first) > 12);
  const month = Number(isDayFirst ? second : first);
  const day = Number(isDayFirst ? first : second);
  const at = new Date(Date.UTC(year, month - 1, day));
  const isReal = at.getUTCMonth() === month - 1 && at.getUTCDate() === day && at.getUTCFullYear() === year;
  return isReal ? at.getTime() / 1000 / SECONDS_PER_DAY : null;
}

function secondsOfZone(zone: string | undefined): number {
  if (zone === undefined || zone.toUpperCase() === 'Z') return 0;
  const digits = zone.replace(/\D/g, '').padEnd(4, '0');
  const seconds = Number(digits.slice(0, 2)) * 3600 + Number(digits.slice(2)) * 60;
  return zone.startsWith('-') ? -seconds : seconds;
}

/** Turns the stamps of one file into seconds. A clock without a date goes on counting past midnight. */
export class CalendarClock {
  private latest = -Infinity;
  private days = 0;
  /** The last stamp up to its second, and what that came to: most stamps differ in their fraction only. */
  private prefix = '';
  private prefixSeconds = 0;

  /** Seconds as a decimal number, exact; null where the text is no stamp. */
  toSeconds(text: string): string | null {
    const { prefix } = this;
    if (prefix !== '' && text.startsWith(prefix) && FRACTION.test(text.slice(prefix.length))) {
      return `${this.prefixSeconds}.${text.slice(prefix.length + 1)}`;
    }
    const time = secondsOfClock(text);
    if (time === null) return null;
    if (!time.hasDate) {
      if (time.seconds < this.latest - MIDNIGHT_FALL_S) this.days += 1;
      this.latest = time.seconds;
    }
    const seconds = time.seconds + this.days * SECONDS_PER_DAY;
    if (time.fraction === '') return `${seconds}`;
    const end = text.length - time.fraction.length - 1;
    this.prefix = seconds >= 0 && SECOND.test(text.slice(0, end)) ? text.slice(0, end) : '';
    this.prefixSeconds = seconds;
    if (seconds >= 0) return `${seconds}.${time.fraction}`;
    // Before 1970: −5 s and 0.25 s are −4.75 s.
    const places = 10n ** BigInt(time.fraction.length);
    const exact = (BigInt(seconds) * places + BigInt(time.fraction)) * -1n;
    return `-${exact / places}.${(exact % places).toString().padStart(time.fraction.length, '0')}`;
  }
}
