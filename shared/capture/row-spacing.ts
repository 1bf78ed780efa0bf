/** Rows that deviate less than this from the usual interval count as evenly spaced. */
const EVEN_SHARE = 0.01;
/** Rounding of printed times moves a row by up to one unit either way, which means nothing where the interval is hardly larger. */
const EVEN_UNITS = 1.5;
const LARGEST_EVEN_SHARE = 0.4;

/** Shares of rows without any change that speak for samples, and numbers of spacings that make chance unlikely (house). */
const OFTEN_UNCHANGED = 0.3;
const SOMETIMES_UNCHANGED = 0.02;
const FEW_SPACINGS = 15;
const MANY_SPACINGS = 100;

/** The usual interval is the median of the first spacings. */
const EARLY_ROWS = 64;

/** Spacing of the rows of a file: is there a row per sample, and at which interval? */
export class RowSpacing {
  rows = 0;
  private unchangedRows = 0;
  private evenRows = 0;
  private evenSum = 0;
  private last = 0;
  private early: number[] = [];
  private tolerance = 0;
  /** The interval most rows have, in ticks; 0 until enough rows are seen. */
  usual = 0;

  /** `unitTicks`: the smallest step that times are written in, in ticks. */
  constructor(private readonly unitTicks: () => number) {}

  /** A row at `ticks`. `isUnchanged`: no channel changed with it. */
  take(ticks: number, isUnchanged: boolean): void {
    this.rows += 1;
    if (isUnchanged) this.unchangedRows += 1;
    if (this.rows === 1) {
      this.last = ticks;
      return;
    }
    const delta = ticks - this.last;
    this.last = ticks;
    if (this.early.length < EARLY_ROWS) {
      this.early.push(delta);
      if (this.early.length === EARLY_ROWS) this.settle();
    } else if (this.isEven(delta)) {
      this.evenRows += 1;
      this.evenSum += delta;
    }
  }

  /** The interval is known: `usual` may be relied on. */
  get isSettled(): boolean {
    return this.early.length >= EARLY_ROWS;
  }

  /** `count` spacings equal to `usual`; their rows are told to `addUnchanged`. */
  takeUsual(count: number): void {
    if (this.usual === 0) return;
    this.evenRows += count;
    this.evenSum += count * this.usual;
  }

  /** A spacing that differs from `usual`; its row is told to `addUnchanged`. */
  takeUnusual(delta: number): void {
    if (!this.isEven(delta)) return;
    this.evenRows += 1;
    this.evenSum += delta;
  }

  /** Rows without any change whose spacings were told before; the last stands at `ticks`. */
  addUnchanged(count: number, ticks: number): void {
    this.rows += count;
    this.unchangedRows += count;
    this.last = ticks;
  }

  scale(scale: (time: number) => number): void {
    this.early = this.early.map(scale);
    this.last = scale(this.last);
    this.usual = scale(this.usual);
    this.setTolerance();
    this.evenSum = scale(this.evenSum);
  }

  /**
   * Interval of the samples in ticks; null where the rows are changes. A table of changes has a change in each row and no even
   * spacing; one of samples has both only by chance.
   */
  sampleInterval(hasAnalog: boolean): number | null {
    if (this.usual === 0) this.settle();
    const spacings = this.rows - 1;
    if (spacings < 2 || this.evenRows === 0) return null;
    const even = this.evenRows / spacings;
    const unchanged = this.unchangedRows / this.rows;
    const isRepeating = hasAnalog || unchanged >= OFTEN_UNCHANGED;
    const leastEven =
      spacings < FEW_SPACINGS ? 1 : isRepeating ? 0.5 : unchanged >= SOMETIMES_UNCHANGED ? 0.995 : 1;
    const isSampled = even >= leastEven && (isRepeating || spacings >= MANY_SPACINGS);
    return isSampled ? this.evenSum / this.evenRows : null;
  }

  /** All rows stand at the interval. */
  get isUniform(): boolean {
    return this.evenRows === this.rows - 1;
  }

  private settle(): void {
    const sorted = [...this.early].sort((a, b) => a - b);
    this.usual = sorted[sorted.length >> 1] ?? 0;
    this.setTolerance();
    for (const delta of this.early) {
      if (!this.isEven(delta)) continue;
      this.evenRows += 1;
      this.evenSum += delta;
    }
  }

  private setTolerance(): void {
    const rounding = Math.min(EVEN_UNITS * this.unitTicks(), this.usual * LARGEST_EVEN_SHARE);
    this.tolerance = Math.max(rounding, this.usual * EVEN_SHARE);
  }

  private isEven(delta: number): boolean {
    return delta > 0 && Math.abs(delta - this.usual) <= this.tolerance;
  }
}
