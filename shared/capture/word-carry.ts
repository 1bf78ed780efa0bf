const SPACE = 32;
/** Longest word that is taken whole: a vector value of some million digits. */
const LONGEST_WORD = 4_194_304;

/** A word that goes on in the next chunk. Grows by doubling, so that chunks of one byte cost no more than large ones. */
export class WordCarry {
  length = 0;
  private bytes = new Uint8Array(64);

  get isTooLong(): boolean {
    return this.length > LONGEST_WORD;
  }

  /** Takes bytes up to the first white space; returns how many. */
  append(chunk: Uint8Array): number {
    let taken = 0;
    while (taken < chunk.length && chunk[taken] > SPACE) taken += 1;
    const length = this.length + taken;
    if (length > this.bytes.length) {
      const larger = new Uint8Array(Math.max(length, this.bytes.length * 2));
      larger.set(this.bytes.subarray(0, this.length));
      this.bytes = larger;
    }
    this.bytes.set(chunk.subarray(0, taken), this.length);
    this.length = length;
    return taken;
  }

  /** The bytes so far, which may be overwritten by the next `append`; the carry is empty then. */
  takeBytes(): Uint8Array {
    const bytes = this.bytes.subarray(0, this.length);
    this.length = 0;
    return bytes;
  }
}
