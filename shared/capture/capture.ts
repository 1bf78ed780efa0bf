import type { ByteLog } from './byte-log';
import type { Span, Ticks } from '../time/ticks';
import type { TimeBase } from '../time/time-base';

/** What a digital channel showed. */
export const LOW = 0;
export const HIGH = 1;
/** Undefined (x, z), not yet recorded, or inside a gap of the recording. */
export const UNKNOWN = 2;
export type Level = 0 | 1 | 2;

/** A channel of two levels, stored as its changes. `ticks` strictly increases, and each level differs from the one before. */
export interface DigitalChannel {
  readonly kind: 'digital';
  readonly name: string;
  /** Other names of the same signal in the file. */
  readonly aliases: readonly string[];
  /** Level from tick 0 until the first change. */
  readonly initialLevel: Level;
  readonly ticks: Float64Array;
  /** `levels[i]` holds from `ticks[i]` on. */
  readonly levels: Uint8Array;
  /** Changes seen in the file. Larger than `ticks.length` only where the reader stopped keeping a channel that is too busy to be a line. */
  readonly edgeCount: number;
  /** The reader gave up keeping the changes: see `edgeCount`. */
  readonly isTooBusy: boolean;
}

/** When the samples of analog channels were taken. */
export type SampleTimes =
  | {
      readonly kind: 'uniform';
      readonly startTicks: Ticks;
      readonly stepTicks: number;
      readonly count: number;
    }
  | { readonly kind: 'listed'; readonly ticks: Float64Array };

/** A channel of voltages. NaN where the file gives no value. */
export interface AnalogChannel {
  readonly kind: 'analog';
  readonly name: string;
  readonly aliases: readonly string[];
  readonly times: SampleTimes;
  /** Volts (or millivolts turned into volts where the header says so). */
  readonly values: Float32Array;
  /** True: a value holds until the next one (VCD reals); false: a straight line joins samples. */
  readonly isStepped: boolean;
}

export type Channel = DigitalChannel | AnalogChannel;

/** Something wrong with the file, with its place. The capture is what could be read in spite of it. */
export interface Defect {
  /** Stable word such as `time-backwards`, `row-too-short`, `cut-short`. */
  readonly code: string;
  /** 1-based; null where unknown or meaningless. */
  readonly line: number | null;
  readonly column: number | null;
  /** 0-based offset from the beginning of the (unpacked) file. */
  readonly byte: number | null;
  readonly message: string;
}

/** What a capture file holds, free of its format. */
export interface Capture {
  readonly format: 'vcd' | 'csv' | 'bytes';
  /** Bytes read. */
  readonly byteLength: number;
  readonly timeBase: TimeBase;
  /** The last instant of the record; the first is tick 0. */
  readonly endTicks: Ticks;
  /** `sampled`: a row per sample at an even interval; `transitions`: a record per change. */
  readonly layout: 'sampled' | 'transitions';
  /** Interval of `sampled` records, in ticks; null for `transitions`. */
  readonly sampleIntervalTicks: number | null;
  /** The smallest step the file can write down, in ticks. */
  readonly unitTicks: number;
  readonly channels: readonly Channel[];
  /** Stretches where the recording was switched off: nothing is known there. */
  readonly gaps: readonly Span[];
  readonly defects: readonly Defect[];
  /** What the recording is not good enough for, and what would do: no damage, and no reason to doubt what was read. */
  readonly notes: readonly Defect[];
  /** Only for `bytes`, which have no channels; else null. */
  readonly log: ByteLog | null;
}
