const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const TAB = 9;
const SPACE = 32;
const QUOTE = 0x22;

/** Cells of a row that are noted; of more only the number is told. */
const MOST_CELLS = 8192;

/**
 * The cells of one record, as offsets without quotes and blanks around them.
 * Source: RFC 4180 section 2, rules 5 to 7.
 */
export class CsvRow {
  /** Offset of the first byte of the record, and of its end of line. */
  start = 0;
  end = 0;
  readonly starts = new Int32Array(MOST_CELLS);
  readonly ends = new Int32Array(MOST_CELLS);
  cellCount = 0;
  /** Line breaks inside quotes. */
  extraLines = 0;

  /** Splits the record that begins at `start`; it ends at its end of line, or with the bytes. */
  split(bytes: Uint8Array, start: number, separator: number): void {
    const length = bytes.length;
    this.start = start;
    this.extraLines = 0;
    let count = 0;
    let i = start;
    for (;;) {
      while (i < length && bytes[i] === SPACE) i += 1;
      let from = i;
      let to = -1;
      if (bytes[i] === QUOTE) {
        from = i + 1;
        i = this.skipQuoted(bytes, from);
        to = i;
        if (i < length) i += 1;
      }
      let c = i < length ? bytes[i] : LINE_FEED;
      while (c !== separator && c !== LINE_FEED && c !== CARRIAGE_RETURN) {
        i += 1;
        c = i < length ? bytes[i] : LINE_FEED;
      }
      if (to < 0) to = i;
      while (to > from && (bytes[to - 1] === SPACE || bytes[to - 1] === TAB)) to -= 1;
      if (count < MOST_CELLS) {
        this.starts[count] = from;
        this.ends[count] = to;
      }
      count += 1;
      if (i >= length || c !== separator) break;
      i += 1;
    }
    this.cellCount = count;
    this.end = i;
  }

  /** Empty cells behind `fieldCount` are no cells: separators at the end of each row. */
  dropTrailing(fieldCount: number): void {
    while (this.cellCount > fieldCount && this.cellCount <= MOST_CELLS) {
      const last = this.cellCount - 1;
      if (this.ends[last] > this.starts[last]) return;
      this.cellCount = last;
    }
  }

  /** Offset of the first cell that is one too many, or of the end of the row where it has too few. */
  surplusAt(fieldCount: number): number {
    return this.cellCount > fieldCount ? this.starts[fieldCount] : this.end;
  }

  /** The offset of the quote that closes the field. */
  private skipQuoted(bytes: Uint8Array, start: number): number {
    let i = start;
    for (; i < bytes.length; i++) {
      if (bytes[i] === QUOTE) {
        if (bytes[i + 1] !== QUOTE) return i;
        i += 1;
      } else if (bytes[i] === LINE_FEED || (bytes[i] === CARRIAGE_RETURN && bytes[i + 1] !== LINE_FEED)) {
        this.extraLines += 1;
      }
    }
    return i;
  }
}

const CELL_START = 0;
const PLAIN = 1;
const QUOTED = 2;
const QUOTE_SEEN = 3;

/**
 * A record that goes on in the next chunk. Each byte is looked at once, however many chunks and quoted lines it spans: the record
 * is split only when its end is found.
 */
export class UnfinishedRecord {
  length = 0;
  private bytes = new Uint8Array(0);
  private state = CELL_START;

  /** A quote was opened and is not closed yet. */
  get isQuoted(): boolean {
    return this.state === QUOTED;
  }

  /** Takes bytes up to and with the first end of line outside quotes. Returns how many; `isComplete` tells whether it was found. */
  append(chunk: Uint8Array, separator: number): { readonly taken: number; readonly isComplete: boolean } {
    let state = this.state;
    let i = 0;
    let isComplete = false;
    while (i < chunk.length && !isComplete) {
      const c = chunk[i++];
      if (state === QUOTED) {
        if (c === QUOTE) state = QUOTE_SEEN;
      } else if (c === QUOTE && (state === CELL_START || state === QUOTE_SEEN)) {
        state = QUOTED;
      } else if (c === LINE_FEED || c === CARRIAGE_RETURN) {
        isComplete = true;
      } else if (c === separator) {
        state = CELL_START;
      } else if (c !== SPACE || state !== CELL_START) {
        state = PLAIN;
      }
    }
    this.state = state;
    this.store(chunk.subarray(0, i));
    return { taken: i, isComplete };
  }

  /** The bytes so far; the record is empty then. */
  takeBytes(): Uint8Array {
    const bytes = this.bytes.subarray(0, this.length);
    this.bytes = new Uint8Array(0);
    this.length = 0;
    this.state = CELL_START;
    return bytes;
  }

  private store(part: Uint8Array): void {
    if (this.length + part.length > this.bytes.length) {
      const larger = new Uint8Array(Math.max(256, this.length + part.length, this.bytes.length * 2));
      larger.set(this.bytes.subarray(0, this.length));
      this.bytes = larger;
    }
    this.bytes.set(part, this.length);
    this.length += part.length;
  }
}
