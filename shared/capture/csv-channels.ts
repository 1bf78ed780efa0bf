import type { Channel, SampleTimes } from './capture';
import { UNKNOWN } from './capture';
import type { CsvColumn } from './csv-columns';
import type { RecorderClock } from './digital-recorder';
import { DigitalRecorder } from './digital-recorder';
import type { KeepRule } from './format-reader';
import type { NumberList } from './number-list';
import { float32List } from './number-list';
import { RowTimes } from './row-times';

/** Where the cells of one column go. */
export interface ColumnSink {
  readonly column: CsvColumn;
  readonly digital: DigitalRecorder | null;
  readonly analog: NumberList<Float32Array> | null;
  /** The value of the row before, in volts. */
  value: number;
}

/** The channels of a table while it is read. */
export class CsvChannels {
  readonly sinks: readonly ColumnSink[];
  readonly hasAnalog: boolean;
  readonly digital: readonly DigitalRecorder[];
  private readonly rowTimes = new RowTimes();
  private lastAnalogTime = -1;

  constructor(columns: readonly CsvColumn[], clock: RecorderClock, keep: KeepRule) {
    this.sinks = columns.map((column) => ({
      column,
      digital:
        column.kind === 'digital' ? new DigitalRecorder(column.name, clock, keep.isKept(column.name)) : null,
      analog: column.kind === 'analog' ? float32List() : null,
      value: NaN,
    }));
    this.digital = this.sinks.flatMap(({ digital }) => (digital === null ? [] : [digital]));
    this.hasAnalog = this.sinks.some(({ analog }) => analog !== null);
  }

  /** Nothing is known from `ticks` on. */
  forget(ticks: number): void {
    for (const sink of this.sinks) {
      sink.value = NaN;
      sink.digital?.change(ticks, UNKNOWN);
    }
    this.pushAnalog(ticks);
  }

  /** Stores the present values of all analog columns for the row at `ticks`. Of several rows at one time the last counts. */
  pushAnalog(ticks: number): void {
    if (!this.hasAnalog) return;
    const isSameTime = ticks === this.lastAnalogTime;
    this.lastAnalogTime = ticks;
    if (!isSameTime) this.rowTimes.push(ticks);
    for (const { analog, value } of this.sinks) {
      if (analog === null) continue;
      if (isSameTime) analog.replaceLast(value);
      else analog.push(value);
    }
  }

  scaleTimes(scale: (time: number) => number): void {
    for (const { digital } of this.sinks) digital?.scaleTimes(scale);
    this.rowTimes.scale(scale);
    if (this.lastAnalogTime > 0) this.lastAnalogTime = scale(this.lastAnalogTime);
  }

  /** `stepTicks`: interval of all samples where they stand evenly, else null. */
  finish(stepTicks: number | null): readonly Channel[] {
    const times: SampleTimes = this.hasAnalog
      ? this.rowTimes.finish(stepTicks)
      : { kind: 'listed', ticks: new Float64Array(0) };
    return this.sinks.map(({ column, digital, analog }): Channel => {
      if (digital !== null) return digital.finish();
      const values = analog?.toArray() ?? new Float32Array(0);
      return { kind: 'analog', name: column.name, aliases: [], times, values, isStepped: false };
    });
  }
}
