import { decodeText } from './text-bytes';

const MINUS = 0x2d;
const PLUS = 0x2b;
const POINT = 0x2e;
const COMMA = 0x2c;

/** Digits that always fit a double exactly. */
const SAFE_DIGITS = 15;
const LONGEST_NUMBER = 60;
/** Digits after the point of a number that only a printed binary fraction has: finer than a femtosecond tells nothing. */
const FINEST_FRACTION = 15;

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

  setInteger(value: number): void {
    this.mantissa = value;
    this.wide = null;
    this.scale = 0;
    this.exponent = null;
  }

  /** Parses `bytes[start, end)`. False: that is no finite number. `comma`: a comma is taken for the decimal sign too. */
  parse(bytes: Uint8Array, start: number, end: number, comma: boolean): boolean {
    let i = start;
    const isNegative = bytes[i] === MINUS;
    if (isNegative || bytes[i] === PLUS) i += 1;
    if (end - i > SAFE_DIGITS + 1 || end === i) return this.parseSlowly(bytes, start, end, comma);
    let value = 0;
    let point = -1;
    for (; i < end; i++) {
      const digit = bytes[i] - 48;
      if (digit >= 0 && digit <= 9) value = value * 10 + digit;
      else if (point < 0 && (bytes[i] === POINT || (comma && bytes[i] === COMMA))) point = i;
      else return this.parseSlowly(bytes, start, end, comma);
    }
    if (point >= 0 && end - start === (isNegative ? 2 : 1)) return false;
    this.mantissa = isNegative ? -value : value;
    this.wide = null;
    this.scale = point < 0 ? 0 : end - point - 1;
    this.exponent = null;
    return true;
  }

  /** Takes zeros at the end of the fraction away. */
  stripZeros(): void {
    if (this.wide !== null) return;
    while (this.scale > 0 && this.mantissa % 10 === 0) {
      this.mantissa /= 10;
      this.scale -= 1;
    }
  }

  private parseSlowly(bytes: Uint8Array, start: number, end: number, comma: boolean): boolean {
    if (end - start > LONGEST_NUMBER) return false;
    let text = decodeText(bytes.subarray(start, end));
    // Where both signs occur the last one is the decimal sign, and the others stand between thousands.
    if (comma && /^[+-]?\d{1,3}(\.\d{3})+,\d*$/.test(text)) text = text.replaceAll('.', '');
    else if (/^[+-]?\d{1,3}(,\d{3})+\.\d*$/.test(text)) text = text.replaceAll(',', '');
    if (comma) text = text.replace(',', '.');
    const parts = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d{1,3}))?$/.exec(text);
    if (parts === null) return false;
    const [, sign, whole, fraction = '', exponent] = parts;
    if (whole + fraction === '') return false;
    this.exponent = exponent === undefined ? null : Number(exponent);
    this.setDigits(sign === '-', whole + fraction, fraction.length - (this.exponent ?? 0));
    return true;
  }

  private setDigits(isNegative: boolean, digits: string, scale: number): void {
    let significant = digits.replace(/^0+/, '');
    let left = scale;
    if (scale > 0 && significant.length > SAFE_DIGITS) {
      [significant, left] = withoutNoise(significant, scale);
    }
    if (left > FINEST_FRACTION && left > significant.length - 1 + FINEST_FRACTION) {
      significant = '0';
      left = 0;
    }
    this.mantissa = Number(significant) * (isNegative ? -1 : 1);
    this.wide = significant.length > SAFE_DIGITS ? BigInt(significant) * (isNegative ? -1n : 1n) : null;
    this.scale = left;
    if (this.mantissa === 0) this.scale = 0;
  }
}

/**
 * A double printed in full, 0.18000000000000002, means 0.18: where rounding to 15 digits leaves zeros at the end they were noise.
 * Without such a run of zeros all 16 or 17 digits may be meant (seconds since 1970 with microseconds).
 */
function withoutNoise(digits: string, scale: number): [string, number] {
  const surplus = digits.length - SAFE_DIGITS;
  if (digits.length > 17 || surplus > scale) return [digits, scale];
  const half = 5n * 10n ** BigInt(surplus - 1);
  const rounded = String((BigInt(digits) + half) / 10n ** BigInt(surplus));
  const short = rounded.replace(/0+$/, '');
  const zeros = rounded.length - short.length;
  if (zeros >= 3) {
    const kept = Math.min(zeros, scale - surplus);
    return [rounded.slice(0, rounded.length - kept), scale - surplus - kept];
  }
  return scale > FINEST_FRACTION ? [rounded, scale - surplus] : [digits, scale];
}
