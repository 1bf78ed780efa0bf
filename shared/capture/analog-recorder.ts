import type { AnalogChannel, SampleTimes } from './capture';
import { float32List, float64List } from './number-list';

/** Collects the values of one analog channel that changes at its own times (VCD reals). Of several values at one time the last counts. */
export class SteppedRecorder {
  readonly aliases: string[] = [];
  private readonly times = float64List();
  private readonly values = float32List();
  private pendingTime = -1;
  private value = NaN;

  constructor(readonly name: string) {}

  get length(): number {
    return this.times.length;
  }

  change(time: number, value: number): void {
    if (time !== this.pendingTime) {
      if (Object.is(value, this.value)) return;
      this.commit();
      this.pendingTime = time;
    }
    this.value = value;
  }

  scaleTimes(scale: (time: number) => number): void {
    this.times.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) chunk[i] = scale(chunk[i]);
    });
    if (this.pendingTime > 0) this.pendingTime = scale(this.pendingTime);
  }

  forEachTime(visit: (time: number) => void): void {
    this.times.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) visit(chunk[i]);
    });
    if (this.pendingTime > 0) visit(this.pendingTime);
  }

  finish(): AnalogChannel {
    this.commit();
    const times: SampleTimes = { kind: 'listed', ticks: this.times.toArray() };
    return {
      kind: 'analog',
      name: this.name,
      aliases: this.aliases,
      times,
      values: this.values.toArray(),
      isStepped: true,
    };
  }

  private commit(): void {
    if (this.pendingTime < 0) return;
    this.times.push(this.pendingTime);
    this.values.push(this.value);
  }
}
