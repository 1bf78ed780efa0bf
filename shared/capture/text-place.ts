import { CaptureError } from './capture-error';
import type { Place } from './defect-list';

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;

/** Keeps count of the lines of a file that is read in chunks. CR, LF and CR LF end a line. */
export class TextPlace {
  /** Bytes of the file in front of the present chunk. */
  bytesBefore = 0;
  private line = 1;
  private lineStart = 0;
  private isAfterReturn = false;

  /** A blank or control character stands at `offset` of the chunk. */
  passBlank(byte: number, offset: number): void {
    if (byte === LINE_FEED || byte === CARRIAGE_RETURN) {
      if (byte === CARRIAGE_RETURN || !this.isAfterReturn) this.line += 1;
      this.lineStart = this.bytesBefore + offset + 1;
    }
    this.isAfterReturn = byte === CARRIAGE_RETURN;
  }

  passWord(): void {
    this.isAfterReturn = false;
  }

  /** `lines` ends of line, all LF, were passed; the present line begins at `lineStart` of the chunk. */
  passLines(lines: number, lineStart: number): void {
    if (lines === 0) return;
    this.line += lines;
    this.lineStart = this.bytesBefore + lineStart;
  }

  at(offset: number): Place {
    const byte = this.bytesBefore + offset;
    return { line: this.line, column: byte - this.lineStart + 1, byte };
  }
}

export function errorAt(code: string, message: string, { line, column, byte }: Place): CaptureError {
  const place = { line: line ?? undefined, column: column ?? undefined, byte: byte ?? undefined };
  return new CaptureError(code, message, place);
}
