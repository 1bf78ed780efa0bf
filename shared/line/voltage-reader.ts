import type { AnalogChannel } from '../capture/capture';
import type { Ticks } from '../time/ticks';
import { countUpTo } from '../time/sorted-search';

/** Instants at which a channel of steps is looked at within a stretch. */
const LOOKS_AT_STEPS = 9;

/** Reads voltages of an analog channel by time. */
export class VoltageReader {
  private scratch = new Float32Array(64);

  constructor(private readonly channel: AnalogChannel) {}

  get count(): number {
    return this.channel.values.length;
  }

  /** Values hold until the next one: there are no samples in between. */
  get isStepped(): boolean {
    return this.channel.isStepped;
  }

  /** Mean interval of the samples, ticks; Infinity below two samples. */
  get stepTicks(): number {
    const { times } = this.channel;
    if (times.kind === 'uniform') return times.stepTicks;
    const n = times.ticks.length;
    return n < 2 ? Infinity : (times.ticks[n - 1] - times.ticks[0]) / (n - 1);
  }

  timeOf(index: number): Ticks {
    const { times } = this.channel;
    return times.kind === 'uniform' ? times.startTicks + index * times.stepTicks : times.ticks[index];
  }

  /** Volts; NaN where the file gives none. */
  valueOf(index: number): number {
    return this.channel.values[index];
  }

  /** Index of the first sample at or after an instant; `count` beyond the last. */
  firstFrom(at: Ticks): number {
    const { times } = this.channel;
    if (times.kind === 'uniform') {
      const index = Math.ceil((at - times.startTicks) / times.stepTicks - 1e-9);
      return Math.min(this.count, Math.max(0, index));
    }
    const index = countUpTo(times.ticks, at);
    return index > 0 && times.ticks[index - 1] === at ? index - 1 : index;
  }

  /** Median of the samples in [from, to); undefined below `least` of them. A channel of steps is looked at nine times. */
  median(from: Ticks, to: Ticks, least: number): number | undefined {
    const values = this.channel.isStepped ? this.looks(from, to) : this.samples(from, to);
    if (values.length < least || values.length === 0) return undefined;
    values.sort();
    const middle = values.length >> 1;
    return values.length % 2 === 1 ? values[middle] : (values[middle - 1] + values[middle]) / 2;
  }

  private samples(from: Ticks, to: Ticks): Float32Array {
    const begin = this.firstFrom(from);
    const end = this.firstFrom(to);
    if (end - begin > this.scratch.length) this.scratch = new Float32Array(2 * (end - begin));
    let n = 0;
    for (let i = begin; i < end; i++) {
      const value = this.channel.values[i];
      if (!Number.isNaN(value)) this.scratch[n++] = value;
    }
    return this.scratch.subarray(0, n);
  }

  private looks(from: Ticks, to: Ticks): Float32Array {
    let n = 0;
    for (let k = 0; k < LOOKS_AT_STEPS; k++) {
      const at = from + ((k + 0.5) * (to - from)) / LOOKS_AT_STEPS;
      const after = this.firstFrom(at);
      const isAt = after < this.count && this.timeOf(after) === at;
      const index = isAt ? after : after - 1;
      if (index >= 0 && !Number.isNaN(this.channel.values[index])) {
        this.scratch[n++] = this.channel.values[index];
      }
    }
    return this.scratch.subarray(0, n);
  }
}
