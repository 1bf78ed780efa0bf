const DOLLAR = 36;
const END = [DOLLAR, 0x65, 0x6e, 0x64];

/** Commands that may stand among the values; a second header does where two dumps were joined. */
const BODY_COMMANDS =
  /^\$(comment|date|version|timescale|scope|upscope|var|enddefinitions|attrbegin|attrend)$/;
/** Commands whose words mean something. */
const DECLARATIONS = new Set(['$timescale', '$scope', '$upscope', '$var', '$enddefinitions']);

export function isEnd(bytes: Uint8Array, start: number, end: number): boolean {
  return end - start === END.length && END.every((byte, k) => bytes[start + k] === byte);
}

/** `$` followed by a letter. A code may begin with `$` too, but a code never begins a word of the file. */
export function isKeyword(bytes: Uint8Array, start: number, end: number): boolean {
  const letter = bytes[start + 1] | 0x20;
  return bytes[start] === DOLLAR && end - start > 1 && letter >= 0x61 && letter <= 0x7a;
}

export function isBodyCommand(keyword: string): boolean {
  return BODY_COMMANDS.test(keyword);
}

/** Source: IEEE 1364-2005 §18.2.3.9 to 12. */
export function isBlockOfValues(keyword: string): boolean {
  return /^\$dump(vars|all|on|off)$/.test(keyword);
}

export function isDeclaration(command: string): boolean {
  return DECLARATIONS.has(command);
}

/** Digits of a stamp as a number, or as a big integer where they are many; null where they are no digits. */
export function parseStamp(bytes: Uint8Array, start: number, end: number): number | bigint | null {
  if (end === start || end - start > LONGEST_STAMP) return null;
  let value = 0;
  for (let i = start; i < end; i++) {
    const digit = bytes[i] - 48;
    if (digit < 0 || digit > 9) return null;
    value = value * 10 + digit;
  }
  if (end - start <= EXACT_DIGITS) return value;
  return BigInt(String.fromCharCode(...bytes.subarray(start, end)));
}

const LONGEST_STAMP = 39;
/** So many digits are always exact as a number. */
const EXACT_DIGITS = 15;
