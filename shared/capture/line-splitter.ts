const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
/** A longer line is handed over in pieces. */
const LONGEST_LINE = 1_048_576;

/** Told of each line without its end; `isEnded`: it has one. */
export type LineTaker = (line: Uint8Array, isEnded: boolean) => void;

/** Cuts the chunks of a text into lines. CR, LF and CR LF end a line. */
export class LineSplitter {
  /** 1-based number of the line being handed over, and the offset of its first byte in the file. */
  line = 0;
  lineStart = 0;
  private kept = new Uint8Array(256);
  private length = 0;
  private taken = 0;
  private isAfterReturn = false;

  /** Bytes of the file so far. */
  get byteLength(): number {
    return this.taken + this.length;
  }

  push(chunk: Uint8Array, take: LineTaker): void {
    let from = 0;
    for (let i = 0; i < chunk.length; i++) {
      const byte = chunk[i];
      if (this.isAfterReturn && byte === LINE_FEED && i === from && this.length === 0) {
        this.taken += 1;
        from = i + 1;
        this.isAfterReturn = false;
        continue;
      }
      if (byte !== LINE_FEED && byte !== CARRIAGE_RETURN) continue;
      this.hand(chunk.subarray(from, i), true, take);
      this.taken += 1;
      this.isAfterReturn = byte === CARRIAGE_RETURN;
      from = i + 1;
    }
    this.keep(chunk.subarray(from));
    if (this.length > LONGEST_LINE) this.hand(new Uint8Array(0), false, take);
  }

  /** The file is at its end. */
  finish(take: LineTaker): void {
    if (this.length > 0) this.hand(new Uint8Array(0), false, take);
  }

  private hand(rest: Uint8Array, isEnded: boolean, take: LineTaker): void {
    this.line += 1;
    this.lineStart = this.taken;
    if (this.length === 0) {
      this.taken += rest.length;
      take(rest, isEnded);
      return;
    }
    this.keep(rest);
    const line = this.kept.slice(0, this.length);
    this.taken += this.length;
    this.length = 0;
    take(line, isEnded);
  }

  private keep(bytes: Uint8Array): void {
    if (bytes.length > 0) this.isAfterReturn = false;
    if (this.length + bytes.length > this.kept.length) {
      const larger = new Uint8Array(Math.max(this.length + bytes.length, this.kept.length * 2));
      larger.set(this.kept.subarray(0, this.length));
      this.kept = larger;
    }
    this.kept.set(bytes, this.length);
    this.length += bytes.length;
  }
}
