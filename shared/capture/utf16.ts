/** Turns UTF-16 into UTF-8, chunk by chunk. Lone surrogates become the replacement character. Source: RFC 2781, RFC 3629. */
export class Utf16Transcoder {
  private odd = -1;
  private highSurrogate = 0;
  private isFirst = true;

  constructor(private readonly isLittleEndian: boolean) {}

  convert(chunk: Uint8Array): Uint8Array {
    const out = new Uint8Array((chunk.length + 4) * 2);
    let at = 0;
    let i = 0;
    const put = (code: number): void => {
      at = putCode(out, at, code);
    };
    while (i < chunk.length) {
      if (this.odd < 0) {
        this.odd = chunk[i++];
        continue;
      }
      const unit = this.isLittleEndian ? this.odd | (chunk[i] << 8) : (this.odd << 8) | chunk[i];
      i += 1;
      this.odd = -1;
      this.takeUnit(unit, put);
    }
    return out.subarray(0, at);
  }

  private takeUnit(unit: number, put: (code: number) => void): void {
    const isFirst = this.isFirst;
    this.isFirst = false;
    if (isFirst && unit === 0xfeff) return;
    const isLow = unit >= 0xdc00 && unit < 0xe000;
    if (this.highSurrogate !== 0) {
      const high = this.highSurrogate;
      this.highSurrogate = 0;
      put(isLow ? 0x10000 + ((high - 0xd800) << 10) + (unit - 0xdc00) : 0xfffd);
      if (isLow) return;
    }
    if (unit >= 0xd800 && unit < 0xdc00) this.highSurrogate = unit;
    else put(isLow ? 0xfffd : unit);
  }
}

function putCode(out: Uint8Array, at: number, code: number): number {
  if (code < 0x80) {
    out[at] = code;
    return at + 1;
  }
  const length = code < 0x800 ? 2 : code < 0x10000 ? 3 : 4;
  for (let k = length - 1; k > 0; k--) {
    out[at + k] = 0x80 | (code & 0x3f);
    code >>= 6;
  }
  out[at] = ((0xf00 >> length) & 0xff) | code;
  return at + length;
}
