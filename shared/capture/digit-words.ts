/** True: the four bytes of the word, the first in its lowest byte, are all digits. */
export function isFourDigits(word: number): boolean {
  return (((word & 0xf0f0f0f0) ^ 0x30303030) | (((word & 0x0f0f0f0f) + 0x06060606) & 0x10101010)) === 0;
}

/** Four digits, the first in the lowest byte, as a number: pairs first, then both pairs. */
export function fourDigits(word: number): number {
  const digits = word & 0x0f0f0f0f;
  const pairs = (Math.imul(digits, 10) + (digits >>> 8)) & 0x00ff00ff;
  return (Math.imul(pairs, 100) + (pairs >>> 16)) & 0xffff;
}
