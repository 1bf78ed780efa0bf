const FIRST_CHUNK = 1024;
const LARGEST_CHUNK = 65536;

type NumberArray = Float64Array | Float32Array | Uint8Array;

const NO_FLOAT64 = new Float64Array(0);
const NO_FLOAT32 = new Float32Array(0);
const NO_UINT8 = new Uint8Array(0);

/** A growing list of numbers kept as a list of chunks: it never copies what it already holds until `toArray`. */
export class NumberList<A extends NumberArray> {
  private full: A[] | null = null;
  private current: A;
  private used = 0;
  private before = 0;

  /** `empty`: an array of length 0, shared by all lists of a kind: most channels of a large dump never change. */
  constructor(
    private readonly allocate: (length: number) => A,
    private readonly empty: A,
  ) {
    this.current = empty;
  }

  get length(): number {
    return this.before + this.used;
  }

  /** Adds a number. True: a chunk is full now, a good moment for checks that should be rare. */
  push(value: number): boolean {
    if (this.used === this.current.length) this.grow();
    this.current[this.used++] = value;
    return this.used === this.current.length;
  }

  /** The numbers of the chunk that is being filled. */
  get lastChunk(): A {
    return this.current;
  }

  replaceLast(value: number): void {
    this.current[this.used - 1] = value;
  }

  /** Calls `visit` with each chunk and the count of numbers used in it. Chunks may be changed in place. */
  forEachChunk(visit: (chunk: A, count: number) => void): void {
    for (const chunk of this.full ?? []) visit(chunk, chunk.length);
    visit(this.current, this.used);
  }

  /** All numbers as one array. Empties the list: each chunk is let go as soon as it is copied. */
  toArray(): A {
    const all = this.allocate(this.length);
    let at = 0;
    const full = (this.full ?? []).reverse();
    for (let chunk = full.pop(); chunk !== undefined; chunk = full.pop()) {
      all.set(chunk, at);
      at += chunk.length;
    }
    all.set(this.current.subarray(0, this.used), at);
    this.clear();
    return all;
  }

  clear(): void {
    this.full = null;
    this.current = this.empty;
    this.used = 0;
    this.before = 0;
  }

  private grow(): void {
    if (this.used > 0) (this.full ??= []).push(this.current);
    this.before += this.used;
    this.current = this.allocate(Math.min(LARGEST_CHUNK, Math.max(FIRST_CHUNK, this.before)));
    this.used = 0;
  }
}

export function float64List(): NumberList<Float64Array> {
  return new NumberList((length) => new Float64Array(length), NO_FLOAT64);
}

export function float32List(): NumberList<Float32Array> {
  return new NumberList((length) => new Float32Array(length), NO_FLOAT32);
}

export function uint8List(): NumberList<Uint8Array> {
  return new NumberList((length) => new Uint8Array(length), NO_UINT8);
}
