import type { Defect } from './capture';

/** Longest sample interval for short elements at 1200 bit/s: an eighth of a bit, seconds. Source: rules.md 4, FRM-4. */
const SHORT_ELEMENTS_S = 1 / 1200 / 8;
/** For handshakes, for distortion to 0.5 %, for levels and for slew, seconds. Source: rules.md 11. */
const HANDSHAKE_S = 100e-6;
const DISTORTION_S = 4e-6;
const LEVELS_S = 5e-6;
const SLEW_S = 50e-9;
/** A hole longer than half a bit at 1200 bit/s can hide an element, seconds. */
const HIDING_S = 0.5 / 1200;
/** Intervals are printed in decimal: a hair more is no more. */
const ROUNDING = 1 + 1e-9;

/** How the rows of a table of samples stand in time. Lengths in seconds. */
export interface Sampling {
  /** From sample to sample, or the smallest step of a file of changes. */
  readonly intervalS: number;
  readonly shortestS: number;
  readonly longestS: number;
  /** Many rows deviate from the usual interval by more than printing explains. */
  readonly isJittering: boolean;
  readonly holes: {
    readonly count: number;
    readonly missing: number;
    readonly longestS: number;
    /** Time of the row behind the first hole, and its 1-based line. */
    readonly firstS: number;
    readonly firstLine: number;
  };
}

/** What the time between two samples, or the smallest step of a file, is too coarse for, with what would do. Null: for nothing. */
export function noteCoarseness(intervalS: number, hasAnalog: boolean): Defect | null {
  const needs: (readonly [string, number])[] = [
    ['short elements at 1200 bit/s', SHORT_ELEMENTS_S],
    ['handshakes', HANDSHAKE_S],
    ['distortion to 0.5 %', DISTORTION_S],
    ...(hasAnalog ? [['levels', LEVELS_S] as const, ['slew', SLEW_S] as const] : []),
  ];
  const unmet = needs.filter(([, longestS]) => intervalS > longestS * ROUNDING);
  if (unmet.length === 0) return null;
  const list = unmet.map(([what, longestS]) => `${what} (${lengthText(longestS)} would do)`).join(', ');
  return noteOf(
    'coarse-sampling',
    `times are known to ${lengthText(intervalS)}: too coarse for ${list}`,
    null,
  );
}

export function noteJitter({ isJittering, shortestS, longestS }: Sampling): Defect | null {
  if (!isJittering) return null;
  const message = `the rows stand ${lengthText(shortestS)} to ${lengthText(longestS)} apart: a time is known to the longest of these; samples at an even interval would do better`;
  return noteOf('sampling-jitter', message, null);
}

/** Missing samples: `isDamage` where a hole is long enough to hide an element. */
export function describeHoles({
  holes,
}: Sampling): { readonly isDamage: boolean; readonly note: Defect } | null {
  if (holes.count === 0) return null;
  const samples = holes.missing === 1 ? '1 sample is missing' : `${holes.missing} samples are missing`;
  const places = holes.count === 1 ? 'before' : `in ${holes.count} places, first before`;
  const message = `${samples} ${places} the row at ${Number(holes.firstS.toPrecision(12))} s, ${lengthText(holes.longestS)} at most`;
  return {
    isDamage: holes.longestS > HIDING_S * ROUNDING,
    note: noteOf('samples-missing', message, holes.firstLine),
  };
}

function noteOf(code: string, message: string, line: number | null): Defect {
  return { code, message, line, column: line === null ? null : 1, byte: null };
}

/** `20 µs`, `0.83 ms`. */
function lengthText(seconds: number): string {
  const [factor, unit] =
    seconds < 1e-6 ? [1e9, 'ns'] : seconds < 1e-3 ? [1e6, 'µs'] : seconds < 1 ? [1e3, 'ms'] : [1, 's'];
  return `${Number((seconds * factor).toPrecision(3))} ${unit}`;
}
