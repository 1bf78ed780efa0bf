const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
/** A longer line is handed over in pieces of so many bytes. */
const LONGEST_LINE = 1_048_576;

/** Told of each line without its end; `isEnded`: it has one. */
export type LineTaker = (line: Uint8Array, isEnded: boolean) => void;

/** Cuts the chunks of a text into lines. CR, LF and CR LF end a line. */
export class LineSplitter {
  /** 1-based number of the line being handed over; offsets of its first byte and of what is handed over in the file. */
  line = 1;
  lineStart = 0;
  pieceStart = 0;
  private kept = new Uint8Array(256);
  private length = 0;
  private isAfterReturn = false;

  /** Bytes of the file so far. */
  get byteLength(): number {
    return this.pieceStart + this.length;
  }

  push(chunk: Uint8Array, take: LineTaker): void {
    let from = 0;
    for (let i = 0; i < chunk.length; i++) {
      const byte = chunk[i];
      if (byte !== LINE_FEED && byte !== CARRIAGE_RETURN) {
        this.isAfterReturn = false;
        continue;
      }
      if (byte === LINE_FEED && this.isAfterReturn) this.skip();
      else this.endLine(chunk.subarray(from, i), take);
      this.isAfterReturn = byte === CARRIAGE_RETURN;
      from = i + 1;
    }
    this.keep(chunk.subarray(from), take);
  }

  /** The file is at its end. */
  finish(take: LineTaker): void {
    if (this.length === 0) return;
    take(this.kept.slice(0, this.length), false);
    this.pieceStart += this.length;
    this.length = 0;
  }

  /** The line feed behind a carriage return. */
  private skip(): void {
    this.pieceStart += 1;
    this.lineStart = this.pieceStart;
  }

  private endLine(rest: Uint8Array, take: LineTaker): void {
    this.keep(rest, take);
    take(this.kept.slice(0, this.length), true);
    this.pieceStart += this.length + 1;
    this.length = 0;
    this.line += 1;
    this.lineStart = this.pieceStart;
  }

  private keep(bytes: Uint8Array, take: LineTaker): void {
    let rest = bytes;
    while (this.length + rest.length > LONGEST_LINE) {
      const fitting = rest.subarray(0, LONGEST_LINE - this.length);
      this.store(fitting);
      rest = rest.subarray(fitting.length);
      take(this.kept.slice(0, this.length), false);
      this.pieceStart += this.length;
      this.length = 0;
    }
    this.store(rest);
  }

  private store(bytes: Uint8Array): void {
    if (this.length + bytes.length > this.kept.length) {
      const larger = new Uint8Array(Math.max(this.length + bytes.length, this.kept.length * 2));
      larger.set(this.kept.subarray(0, this.length));
      this.kept = larger;
    }
    this.kept.set(bytes, this.length);
    this.length += bytes.length;
  }
}
