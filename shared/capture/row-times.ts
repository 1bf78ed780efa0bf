import type { SampleTimes } from './capture';
import { float64List } from './number-list';

/** Times of all rows, kept only for files with analog channels. */
export class RowTimes {
  private readonly times = float64List();

  get length(): number {
    return this.times.length;
  }

  push(ticks: number): void {
    this.times.push(ticks);
  }

  scale(scale: (time: number) => number): void {
    this.times.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) chunk[i] = scale(chunk[i]);
    });
  }

  /** `stepTicks`: the interval where all rows stand at it, else null. */
  finish(stepTicks: number | null): SampleTimes {
    if (stepTicks === null) return { kind: 'listed', ticks: this.times.toArray() };
    const count = this.times.length;
    this.times.clear();
    return { kind: 'uniform', startTicks: 0, stepTicks, count };
  }
}
