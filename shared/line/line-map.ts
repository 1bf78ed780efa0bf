/** The parts a channel can play. */
export const LINE_ROLES = ['data', 'rts', 'dtr', 'txd', 'dsr', 'supply', 'contact', 'ready'] as const;
export type LineRole = (typeof LINE_ROLES)[number];

/**
 * `line`: the channel shows the sense of the RS-232 line (high = positive = space / ON).
 * `logic`: the logic side of an inverting driver (high = mark / OFF).
 */
export type Polarity = 'line' | 'logic';

/** A rising and a falling decision level, in volts; `high` ≥ `low`. */
export interface Thresholds {
  readonly high: number;
  readonly low: number;
}

export interface LineAssignment {
  readonly channel: string;
  readonly polarity: Polarity | 'auto';
  readonly thresholds?: Thresholds;
}

export interface ExcludedSpan {
  readonly startS: number;
  readonly endS: number;
  readonly reason: string;
}

/** A stretch of which the person says what the hand did. Lengths in millimetres. */
export interface DeclaredSpan {
  readonly kind: 'rest' | 'stroke' | 'closed-path';
  readonly startS: number;
  readonly endS: number;
  readonly axis?: 'x' | 'y';
  readonly lengthMm?: number;
  readonly lengthUncertaintyMm?: number;
}

/** What a person (or a preset) states about a capture. Everything left out is found from the data. */
export interface LineMap {
  /** A role given as null is stated to be absent. */
  readonly lines?: Partial<Record<LineRole, LineAssignment | null>>;
  /** Overrides the resolution found, in seconds. */
  readonly resolutionS?: number;
  /** Accuracy of the instrument's time base; default 100 ppm (house). */
  readonly timeAccuracyPpm?: number;
  /** Difference in delay between the thresholds of two channels, in seconds. */
  readonly thresholdSkewS?: number;
  /** Accuracy of the instrument's voltages, percent of the value plus volts; default 3 % and 0.1 V (house). */
  readonly voltageAccuracyPercent?: number;
  readonly voltageAccuracyV?: number;
  readonly excluded?: readonly ExcludedSpan[];
  readonly declared?: readonly DeclaredSpan[];
  /** Counts per inch the device claims. */
  readonly countsPerInch?: number;
  /** Which end of the line was probed (a driver with its load of 3 to 7 kΩ): decides the limits of LVL-1 to LVL-3. */
  readonly probedEnd?: 'receiver' | 'driver' | 'open-circuit';
}

export const DEFAULT_TIME_ACCURACY_PPM = 100;
export const DEFAULT_VOLTAGE_ACCURACY_PERCENT = 3;
export const DEFAULT_VOLTAGE_ACCURACY_V = 0.1;
