import type { DigitalChannel, Level } from './capture';
import { UNKNOWN } from './capture';
import { float64List, uint8List } from './number-list';

/** A channel with more changes than this is looked at: can it be a serial line at all? */
const MANY_CHANGES = 200_000;
/** Changes closer than this, for most of a long record, are no serial line of a pointing device: its shortest bit lasts 52 µs. */
export const BUSY_SPACING_S = 20e-6;

/** What all recorders of one file know about its time. */
export interface RecorderClock {
  /** `BUSY_SPACING_S` in the units in which times are handed over now. */
  busySpacing: number;
}

/**
 * Collects the changes of one digital channel. Times are whole numbers that never decrease, 0 is the first instant of the record.
 * Of several changes at the same time the last one counts; a change to the level that holds already is none.
 */
export class DigitalRecorder {
  readonly aliases: string[] = [];
  /** The level after the last change. */
  level: number = UNKNOWN;
  isTooBusy = false;
  private readonly times = float64List();
  private readonly levels = uint8List();
  private initialLevel: number = UNKNOWN;
  private committedLevel: number = UNKNOWN;
  private pendingTime = 0;
  private edgeCount = 0;
  private shortSpacings = 0;

  constructor(
    readonly name: string,
    private readonly clock: RecorderClock,
    /** Keep the changes whatever their number. */
    public isKept: boolean,
  ) {}

  /** The channel has `level` from `time` on. */
  change(time: number, level: number): void {
    if (time !== this.pendingTime) {
      if (level === this.level) return;
      this.commit();
      this.pendingTime = time;
    }
    this.level = level;
  }

  /** Only for a channel too busy to be kept: `count` changes, each at its own time, the last at `time` to `level`. */
  countBusyChanges(count: number, time: number, level: number): void {
    this.commit();
    this.edgeCount += count - 1;
    this.committedLevel = count === 1 ? this.level : 1 - level;
    this.pendingTime = time;
    this.level = level;
  }

  /** Multiplies all times (a finer unit was needed) or divides them (`factor` < 1), rounding to whole numbers. */
  scaleTimes(scale: (time: number) => number): void {
    this.times.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) chunk[i] = scale(chunk[i]);
    });
    this.pendingTime = scale(this.pendingTime);
  }

  /** Calls `visit` with each time that is kept. */
  forEachTime(visit: (time: number) => void): void {
    if (this.isTooBusy) return;
    this.times.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) visit(chunk[i]);
    });
    visit(this.pendingTime);
  }

  finish(): DigitalChannel {
    this.commit();
    return {
      kind: 'digital',
      name: this.name,
      aliases: this.aliases,
      initialLevel: this.initialLevel as Level,
      ticks: this.times.toArray(),
      levels: this.levels.toArray(),
      edgeCount: this.edgeCount,
      isTooBusy: this.isTooBusy,
    };
  }

  private commit(): void {
    if (this.level === this.committedLevel) return;
    this.committedLevel = this.level;
    if (this.pendingTime === 0) {
      this.initialLevel = this.level;
      return;
    }
    this.edgeCount += 1;
    if (this.isTooBusy) return;
    this.levels.push(this.level);
    if (this.times.push(this.pendingTime)) this.judgeBusiness();
  }

  /** A chunk of changes is full. Only its own spacings are looked at: looking at all of them again would cost more than reading. */
  private judgeBusiness(): void {
    const { lastChunk } = this.times;
    const limit = this.clock.busySpacing;
    let short = 0;
    for (let i = 1; i < lastChunk.length; i++) if (lastChunk[i] - lastChunk[i - 1] < limit) short += 1;
    this.shortSpacings += short;
    if (this.isKept || this.times.length < MANY_CHANGES || this.shortSpacings * 2 <= this.times.length)
      return;
    this.isTooBusy = true;
    this.times.clear();
    this.levels.clear();
  }
}
