import { plainNumber } from './number-text';
import { decodeText } from './text-bytes';

const MINUS = 0x2d;
const PLUS = 0x2b;
const POINT = 0x2e;
const COMMA = 0x2c;
const SMALL_E = 0x65;

/** Significant digits that always fit a double exactly; a printed double has up to 17. */
const SAFE_DIGITS = 15;
const DOUBLE_DIGITS = 17;
const LONGEST_NUMBER = 60;
/** Digits after the point of a number that only a printed binary fraction has: finer than a femtosecond tells nothing. */
const FINEST_FRACTION = 15;
/** So many zeros at the end of 15 rounded digits are no chance: what came after them was noise. */
const NOISE_ZEROS = 1000;
/** Noise of a printed double has at least so many digits behind the point; microseconds beside seconds since 1970 have fewer. */
const NOISE_PLACES = 10;

/** Looking a power up is faster than computing it. */
const POWERS = Array.from({ length: 16 }, (_, i) => 10 ** i);

/**
 * A decimal number taken apart without rounding: value = mantissa · 10^(−scale). One object is used for all numbers of a file, so
 * that reading a million of them makes no garbage.
 */
export class DecimalNumber {
  /** Signed; exact. */
  mantissa = 0;
  /** Set where the mantissa passes 15 digits; then `mantissa` is only near it. */
  wide: bigint | null = null;
  /** Digits after the point; negative for `1e6`. */
  scale = 0;
  /** Power of ten of the exponent as written; null without one. */
  exponent: number | null = null;
  private readonly digits = new Uint8Array(LONGEST_NUMBER);

  setInteger(value: number): void {
    this.mantissa = value;
    this.wide = null;
    this.scale = 0;
    this.exponent = null;
  }

  /**
   * Parses `bytes[start, end)`. False: that is no finite number. `comma`: a comma is taken for the decimal sign too. One loop, since
   * tables of voltages are made of little else.
   */
  parse(bytes: Uint8Array, start: number, end: number, comma: boolean): boolean {
    if (end - start > LONGEST_NUMBER) return false;
    let i = start;
    const isNegative = bytes[i] === MINUS;
    if (isNegative || bytes[i] === PLUS) i += 1;
    let high = 0;
    let highDigits = 0;
    let low = 0;
    let lowDigits = 0;
    let digits = 0;
    let point = -1;
    for (; i < end; i++) {
      const byte = bytes[i];
      const digit = byte - 48;
      if (digit >= 0 && digit <= 9) {
        digits += 1;
        if (highDigits < SAFE_DIGITS) {
          high = high * 10 + digit;
          if (high !== 0) highDigits += 1;
        } else {
          low = low * 10 + digit;
          lowDigits += 1;
        }
      } else if (point < 0 && (byte === POINT || (comma && byte === COMMA))) {
        point = i;
      } else {
        break;
      }
    }
    if (digits === 0) return bytes[start] >= 0x80 && this.parseOther(bytes, start, end, comma);
    this.exponent = null;
    this.scale = point < 0 ? 0 : i - point - 1;
    if (i < end && !this.parseExponent(bytes, i, end)) return this.parseOther(bytes, start, end, comma);
    this.wide = null;
    this.mantissa = isNegative ? -high : high;
    if (lowDigits > SAFE_DIGITS) this.takeAllDigits(bytes, start, end);
    else if (lowDigits > 0) this.addDigits(isNegative, high, low, lowDigits);
    if (this.scale - highDigits >= FINEST_FRACTION || this.mantissa === 0) {
      this.mantissa = 0;
      this.scale = Math.max(0, Math.min(this.scale, FINEST_FRACTION));
    }
    return true;
  }

  /** As `parse`, for a text of ASCII. */
  parseText(text: string): boolean {
    const { length } = text;
    if (length > LONGEST_NUMBER) return false;
    for (let i = 0; i < length; i++) this.digits[i] = text.charCodeAt(i);
    return this.parse(this.digits, 0, length, true);
  }

  /** The nearest double, give or take its last place. */
  toDouble(): number {
    const { mantissa, scale } = this;
    return scale >= 0 && scale < POWERS.length ? mantissa / POWERS[scale] : mantissa * 10 ** -scale;
  }

  /** Takes zeros at the end of the fraction away. */
  stripZeros(): void {
    if (this.wide !== null) return;
    while (this.scale > 0 && this.mantissa % 10 === 0) {
      this.mantissa /= 10;
      this.scale -= 1;
    }
  }

  private parseExponent(bytes: Uint8Array, at: number, end: number): boolean {
    if ((bytes[at] | 0x20) !== SMALL_E) return false;
    let i = at + 1;
    const isNegative = bytes[i] === MINUS;
    if (isNegative || bytes[i] === PLUS) i += 1;
    if (i === end || end - i > 3) return false;
    let exponent = 0;
    for (; i < end; i++) {
      const digit = bytes[i] - 48;
      if (digit < 0 || digit > 9) return false;
      exponent = exponent * 10 + digit;
    }
    this.exponent = isNegative ? -exponent : exponent;
    this.scale -= this.exponent;
    return true;
  }

  /**
   * More than 15 digits. A double printed in full, 0.18000000000000002, means 0.18: where rounding to 15 digits leaves zeros at the
   * end the rest was noise. Without such a run of zeros all digits may be meant (seconds since 1970 with microseconds).
   */
  private addDigits(isNegative: boolean, high: number, low: number, lowDigits: number): void {
    const sign = isNegative ? -1 : 1;
    if (SAFE_DIGITS + lowDigits <= DOUBLE_DIGITS && lowDigits <= this.scale) {
      let rounded = high + (2 * low >= 10 ** lowDigits ? 1 : 0);
      let places = this.scale - lowDigits;
      const isNoise = rounded % NOISE_ZEROS === 0 && this.scale >= NOISE_PLACES;
      if (isNoise || places >= FINEST_FRACTION) {
        for (; places > 0 && rounded % 10 === 0; places -= 1) rounded /= 10;
        this.mantissa = sign * rounded;
        this.scale = places;
        return;
      }
    }
    const exact = BigInt(high) * 10n ** BigInt(lowDigits) + BigInt(low);
    this.wide = isNegative ? -exact : exact;
    this.mantissa = Number(this.wide);
  }

  /** More than 30 digits, which no instrument writes. */
  private takeAllDigits(bytes: Uint8Array, start: number, end: number): void {
    const [mantissa] = decodeText(bytes.subarray(start, end)).toLowerCase().split('e');
    const exact = BigInt(mantissa.replace(/[^0-9]/g, ''));
    this.wide = mantissa.startsWith('-') ? -exact : exact;
    this.mantissa = Number(this.wide);
  }

  /**
   * What other lands write, and thousands apart, `1.234,5` or `1,234.5`: where both signs occur the last one is the decimal sign.
   */
  private parseOther(bytes: Uint8Array, start: number, end: number, comma: boolean): boolean {
    const text = decodeText(bytes.subarray(start, end));
    const isGerman = comma && /^[+-]?\d{1,3}(\.\d{3})+,\d*$/.test(text);
    const isEnglish = /^[+-]?\d{1,3}(,\d{3})+\.\d*$/.test(text);
    const plain = isGerman
      ? text.replaceAll('.', '')
      : isEnglish
        ? text.replaceAll(',', '')
        : plainNumber(text);
    if (plain === text) return false;
    const digits = Uint8Array.from(plain, (c) => Math.min(255, c.charCodeAt(0)));
    return this.parse(digits, 0, digits.length, comma);
  }
}
