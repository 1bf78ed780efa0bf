/** Where samples are missing between rows that otherwise stand at one interval. */
export class SampleHoles {
  count = 0;
  /** Samples that are missing in all of them. */
  missing = 0;
  /** From row to row across the longest one, in ticks. */
  longest = 0;
  /** The row behind the first one: its 1-based line and its time in ticks. */
  firstLine = 0;
  firstTicks = 0;

  /** `delta`: from the row before the hole to the one behind it, which stands on `line` at `ticks`. */
  add(delta: number, interval: number, line: number, ticks: number): void {
    if (this.count === 0) {
      this.firstLine = line;
      this.firstTicks = ticks;
    }
    this.count += 1;
    this.missing += Math.max(1, Math.round(delta / interval) - 1);
    if (delta > this.longest) this.longest = delta;
  }

  scale(scale: (time: number) => number): void {
    this.longest = scale(this.longest);
    this.firstTicks = scale(this.firstTicks);
  }
}
