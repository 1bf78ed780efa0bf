import { CaptureError } from './capture-error';
import { CsvChannels } from './csv-channels';
import type { TimeSource } from './csv-columns';
import type { CsvDialect } from './csv-dialect';
import { DecimalClock } from './decimal-clock';
import type { RecorderClock } from './digital-recorder';
import { BUSY_SPACING_S } from './digital-recorder';
import type { KeepRule } from './format-reader';
import { PredictedRows } from './predicted-rows';
import { RowSpacing } from './row-spacing';
import type { Sampling } from './sampling-notes';
import type { SampleInterval } from './stated-rate';
import type { TimeBase } from '../time/time-base';
import { secondsPerTick, toSeconds } from '../time/time-base';

/** A stated interval is cut off at this many decimal places of itself where times span too much. */
const PLACES_OF_COUNTS = 9;

/** Times are printed with few digits: steps may differ from the stated interval by this share. */
const UNIT_TOLERANCE = 0.05;

/** Seconds of one unit of the time source, as an exact ratio, and its decimal places where it has some. */
interface TimeUnit extends SampleInterval {
  readonly places: number;
}

/** A table whose dialect is known: what its rows are turned into. */
export class CsvTable {
  readonly separator: number;
  readonly fieldCount: number;
  readonly time: TimeSource;
  /** A comma is a decimal sign. */
  readonly hasComma: boolean;
  readonly clock: DecimalClock;
  readonly channels: CsvChannels;
  readonly spacing = new RowSpacing(() => this.clock.unitTicks);
  readonly predicted: PredictedRows;
  /** Time of the last row taken. */
  lastTicks = 0;
  private readonly recorderClock: RecorderClock;
  private readonly unit: TimeUnit;

  /** `sampleInterval`: what the caller states; wins over what the file states. */
  constructor(dialect: CsvDialect, sampleInterval: SampleInterval | null, keep: KeepRule) {
    const { columns, separator, decimal } = dialect;
    if (columns.channels.length === 0) {
      throw new CaptureError('no-channels', 'the table has no column beside the time', {
        line: dialect.dataLine,
      });
    }
    this.separator = separator.charCodeAt(0);
    this.fieldCount = dialect.fieldCount;
    this.time = columns.time;
    this.hasComma = decimal === ',' || (decimal === null && separator !== ',');
    this.unit = findUnit(dialect, sampleInterval ?? dialect.statedInterval);
    this.recorderClock = {
      busySpacing: (BUSY_SPACING_S * Number(this.unit.denominator)) / Number(this.unit.numerator),
    };
    this.clock = new DecimalClock(this.unit.places, (scale) => this.scaleTimes(scale));
    this.channels = new CsvChannels(columns.channels, this.recorderClock, keep);
    this.predicted = new PredictedRows(this.channels.digital, this.spacing);
  }

  /** A row at `ticks` was taken. */
  accept(ticks: number): void {
    this.lastTicks = ticks;
    this.clock.accept(ticks);
  }

  get timeBase(): TimeBase {
    return this.clock.timeBase(this.unit.numerator, this.unit.denominator);
  }

  /** How the rows stand in time. `interval`: in ticks; null where they are changes, of which nothing can be missing. */
  describeSampling(interval: number | null): Sampling {
    const { spacing, timeBase } = this;
    const tickS = secondsPerTick(timeBase);
    const isStamped = interval !== null && this.time.kind !== 'rows';
    const { nearest, farthest } = spacing.range;
    const { count, missing, longest, firstTicks, firstLine } = spacing.holes;
    return {
      intervalS: (interval ?? this.clock.unitTicks) * tickS,
      shortestS: nearest * tickS,
      longestS: farthest * tickS,
      isJittering: isStamped && spacing.isJittering,
      holes: {
        count: isStamped && spacing.hasHoles ? count : 0,
        missing,
        longestS: longest * tickS,
        firstS: toSeconds(timeBase, firstTicks),
        firstLine,
      },
    };
  }

  private scaleTimes(scale: (time: number) => number): void {
    this.channels.scaleTimes(scale);
    this.spacing.scale(scale);
    this.lastTicks = scale(this.lastTicks);
    this.recorderClock.busySpacing = scale(this.recorderClock.busySpacing);
  }
}

function findUnit(dialect: CsvDialect, interval: SampleInterval | null): TimeUnit {
  const { time } = dialect.columns;
  if (time.kind === 'column') {
    const places = time.places ?? dialect.statedPlaces ?? placesByInterval(time.usualStep, interval);
    if (places === null && time.isInteger && interval !== null)
      return { ...interval, places: PLACES_OF_COUNTS };
    return { numerator: 1n, denominator: 10n ** BigInt(places ?? 0), places: places ?? 0 };
  }
  if (interval === null) {
    const what = time.kind === 'counts' ? 'the time column counts samples' : 'there is no time column';
    const message = `${what} and no sample rate is stated: state it with --sample-rate`;
    throw new CaptureError('no-sample-rate', message, { line: dialect.dataLine });
  }
  return { ...interval, places: PLACES_OF_COUNTS };
}

/** A column without a unit whose steps are the stated interval when taken for s, ms, µs, ns or ps. Null: none of them fits. */
function placesByInterval(usualStep: number, interval: SampleInterval | null): number | null {
  if (interval === null) return null;
  const ratio = (usualStep * Number(interval.denominator)) / Number(interval.numerator);
  return [0, 3, 6, 9, 12].find((places) => Math.abs(ratio / 10 ** places - 1) < UNIT_TOLERANCE) ?? null;
}
