/** Arguments of one call that are safe on any engine. */
const MOST_ARGUMENTS = 8192;

/** Windows-1252 where it differs from Latin-1 does not matter for names: only µ (B5) and letters with accents occur. */
function decodeLatin1(bytes: Uint8Array): string {
  // Spreading typed arrays would go through their iterator: ten times slower.
  if (bytes.length <= MOST_ARGUMENTS) return textOf(bytes);
  let text = '';
  for (let i = 0; i < bytes.length; i += MOST_ARGUMENTS) {
    text += textOf(bytes.subarray(i, i + MOST_ARGUMENTS));
  }
  return text;
}

function textOf(bytes: Uint8Array): string {
  return Reflect.apply(String.fromCharCode, null, bytes) as string;
}

function isAscii(bytes: Uint8Array): boolean {
  return bytes.every((byte) => byte < 0x80);
}

/**
 * Bytes as text: UTF-8 where they are valid UTF-8, else Latin-1. Meant for short pieces (names, headers, messages).
 * Source: RFC 3629 section 4 (overlong forms, surrogates and values above 10FFFFh are invalid).
 */
export function decodeText(bytes: Uint8Array): string {
  return isAscii(bytes) ? decodeLatin1(bytes) : (decodeUtf8(bytes) ?? decodeLatin1(bytes));
}

export function isUtf8(bytes: Uint8Array): boolean {
  return isAscii(bytes) || decodeUtf8(bytes) !== null;
}

/** A byte no text has: blanks and ends of line are none. */
export function isControl(byte: number): boolean {
  return byte < 32 && byte !== 9 && byte !== 10 && byte !== 12 && byte !== 13;
}

function decodeUtf8(bytes: Uint8Array): string | null {
  let text = '';
  for (let i = 0; i < bytes.length;) {
    const first = bytes[i];
    if (first < 0x80) {
      text += String.fromCharCode(first);
      i += 1;
      continue;
    }
    const length = first >= 0xf0 ? 4 : first >= 0xe0 ? 3 : 2;
    if (first < 0xc2 || first > 0xf4 || i + length > bytes.length) return null;
    let code = first & (0x7f >> length);
    for (let k = 1; k < length; k++) {
      const next = bytes[i + k];
      if ((next & 0xc0) !== 0x80) return null;
      code = (code << 6) | (next & 0x3f);
    }
    const isOverlong = length > 2 && code < (length === 3 ? 0x800 : 0x10000);
    if (isOverlong || (code >= 0xd800 && code <= 0xdfff) || code > 0x10ffff) return null;
    text += String.fromCodePoint(code);
    i += length;
  }
  return text;
}

/** A piece of a file for a message: printable, at most 40 characters. */
export function quoteForMessage(bytes: Uint8Array): string {
  const text = decodeText(bytes.subarray(0, 60));
  const printable = Array.from(text, (c) => (c < ' ' || (c >= '\u007f' && c < '\u00a0') ? '·' : c));
  return bytes.length > 40 || printable.length > 40
    ? `“${printable.slice(0, 40).join('')}…”`
    : `“${printable.join('')}”`;
}
