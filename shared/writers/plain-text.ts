/** Text of a file made safe for a terminal or a letter: control characters as `\x1B`, nothing else changed. */
export function printable(text: string): string {
  // Control characters, bidirectional overrides and the like could make a log read differently from what it says.
  return text.replace(
    /[\p{Cc}\p{Cf}\u2028\u2029]/gu,
    (c) => `\\x${c.codePointAt(0)!.toString(16).toUpperCase().padStart(2, '0')}`,
  );
}

export function hexByte(value: number): string {
  return value.toString(16).toUpperCase().padStart(2, '0');
}

/** `+5`, `−3`, `0`. */
export function signed(value: number): string {
  if (value === 0) return '0';
  return value > 0 ? `+${value}` : `\u2212${-value}`;
}
