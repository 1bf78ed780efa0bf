import { SampleHoles } from './sample-holes';

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

/** A row so many intervals behind the one before has lost samples in front of it; one nearer than the other comes too early (house). */
const HOLE = 1.5;
const NEAREST = 0.5;
/** Share of rows at or near the interval that makes a table one of samples, though they jitter. */
const MOSTLY_NEAR = 0.9;
/** Share of rows that deviate from the interval which makes it a jitter. */
const OFTEN_OFF = 0.05;

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
  /** Rows off the interval by less than a hole, and their nearest and farthest spacings. */
  private nearRows = 0;
  private nearest = Infinity;
  private farthest = 0;
  readonly holes = new SampleHoles();
  /** Line of the next row less its number. */
  lineOffset = 0;
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
    } else {
      this.takeUnusual(delta, -1, ticks);
    }
  }

  /** The interval is known: `usual` may be relied on. */
  get isSettled(): boolean {
    return this.early.length >= EARLY_ROWS;
  }

  /** Rows in front of the one at `ticks` were left out, and told: they are no hole. */
  skipTo(ticks: number): void {
    if (this.usual > 0) this.last = Math.max(this.last, ticks - this.usual);
  }

  /** `count` spacings equal to `usual`; their rows are told to `addUnchanged`. */
  takeUsual(count: number): void {
    if (this.usual === 0) return;
    this.evenRows += count;
    this.evenSum += count * this.usual;
  }

  /**
   * A spacing that differs from `usual`; its row is told to `addUnchanged`. The row stands at `ticks`, `ahead` rows behind the next one
   * to be counted.
   */
  takeUnusual(delta: number, ahead: number, ticks: number): void {
    const { usual } = this;
    if (usual <= 0) return;
    if (this.isEven(delta)) {
      this.evenRows += 1;
      this.evenSum += delta;
    } else if (delta >= usual * HOLE) {
      this.holes.add(delta, usual, this.lineOffset + this.rows + ahead, ticks);
    } else if (delta >= usual * NEAREST) {
      this.nearRows += 1;
      if (delta < this.nearest) this.nearest = delta;
      if (delta > this.farthest) this.farthest = delta;
    }
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
    this.farthest = scale(this.farthest);
    if (this.nearRows > 0) this.nearest = scale(this.nearest);
    this.holes.scale(scale);
  }

  /**
   * Interval of the samples in ticks; null where the rows are changes. A table of changes has a change in each row and no even
   * spacing; one of samples has both only by chance.
   */
  sampleInterval(hasAnalog: boolean): number | null {
    if (this.usual === 0) this.settle();
    const spacings = this.rows - 1;
    if (spacings < 2) return null;
    const even = this.evenRows / spacings;
    const unchanged = this.unchangedRows / this.rows;
    const isRepeating = hasAnalog || unchanged >= OFTEN_UNCHANGED;
    const leastEven =
      spacings < FEW_SPACINGS ? 1 : isRepeating ? 0.5 : unchanged >= SOMETIMES_UNCHANGED ? 0.995 : 1;
    const isEven = this.evenRows > 0 && even >= leastEven && (isRepeating || spacings >= MANY_SPACINGS);
    if (isEven && !this.isJittering) return this.evenSum / this.evenRows;
    const isNear = isRepeating && spacings >= MANY_SPACINGS && this.nearShare >= MOSTLY_NEAR;
    return isEven || isNear ? Math.max(this.farthest, this.usual) : null;
  }

  /** Many rows stand off the interval. */
  get isJittering(): boolean {
    return this.nearRows > (this.rows - 1) * OFTEN_OFF;
  }

  /** The nearest and farthest two rows without a hole between them. */
  get range(): { readonly nearest: number; readonly farthest: number } {
    return { nearest: Math.min(this.nearest, this.usual), farthest: Math.max(this.farthest, this.usual) };
  }

  /** Holes are told only of rows that keep to their interval: others may have left out what did not change. */
  get hasHoles(): boolean {
    return this.holes.count > 0 && this.nearShare >= MOSTLY_NEAR;
  }

  private get nearShare(): number {
    return (this.evenRows + this.nearRows) / (this.rows - 1);
  }

  /** All rows stand at the interval. */
  get isUniform(): boolean {
    return this.evenRows === this.rows - 1;
  }

  private settle(): void {
    const sorted = [...this.early].sort((a, b) => a - b);
    this.usual = sorted[sorted.length >> 1] ?? 0;
    this.setTolerance();
    let ticks = 0;
    this.early.forEach((delta, i) => {
      ticks += delta;
      this.takeUnusual(delta, i + 1 - this.rows, ticks);
    });
  }

  private setTolerance(): void {
    const rounding = Math.min(EVEN_UNITS * this.unitTicks(), this.usual * LARGEST_EVEN_SHARE);
    this.tolerance = Math.max(rounding, this.usual * EVEN_SHARE);
  }

  private isEven(delta: number): boolean {
    return delta > 0 && Math.abs(delta - this.usual) <= this.tolerance;
  }
}
