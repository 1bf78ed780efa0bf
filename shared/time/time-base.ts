import type { Ticks } from './ticks';

/**
 * How ticks relate to seconds. The file's unit is an exact ratio, so that no conversion drifts:
 * second = (originUnits + ticks · unitsPerTick) · unitNumerator / unitDenominator.
 */
export interface TimeBase {
  /** One unit of the file lasts unitNumerator / unitDenominator seconds. */
  readonly unitNumerator: bigint;
  readonly unitDenominator: bigint;
  /** The file's own time at tick 0, in units. May be negative. */
  readonly originUnits: bigint;
  /** Units in one tick: the common divisor that was taken out on reading. */
  readonly unitsPerTick: bigint;
}

const EXACT = BigInt(Number.MAX_SAFE_INTEGER);

/** Correctly rounded quotient for quotients and operands of any size. */
function divide(numerator: bigint, denominator: bigint): number {
  const magnitude = numerator < 0n ? -numerator : numerator;
  if (magnitude <= EXACT && denominator <= EXACT) return Number(numerator) / Number(denominator);
  const whole = magnitude / denominator;
  // 18 decimal digits beyond the point keep the result within half a unit of the last place for any time a capture holds.
  const fraction = ((magnitude % denominator) * 10n ** 18n) / denominator;
  const value = Number(`${whole}.${fraction.toString().padStart(18, '0')}`);
  return numerator < 0n ? -value : value;
}

/** The file's time, in seconds, at `ticks`. Non-integer ticks (interpolated instants) are allowed. */
export function toSeconds(base: TimeBase, ticks: Ticks): number {
  const whole = Math.floor(ticks);
  const exact = divide(
    (base.originUnits + BigInt(whole) * base.unitsPerTick) * base.unitNumerator,
    base.unitDenominator,
  );
  return whole === ticks ? exact : exact + (ticks - whole) * secondsPerTick(base);
}

/** A length, in seconds, of `ticks`. Non-integer ticks are allowed. */
export function toDuration(base: TimeBase, ticks: Ticks): number {
  if (!Number.isInteger(ticks)) return ticks * secondsPerTick(base);
  return divide(BigInt(ticks) * base.unitsPerTick * base.unitNumerator, base.unitDenominator);
}

/** Seconds in one tick, as the nearest double. */
export function secondsPerTick(base: TimeBase): number {
  return divide(base.unitsPerTick * base.unitNumerator, base.unitDenominator);
}

/** Ticks in one second, as the nearest double. */
export function ticksPerSecond(base: TimeBase): number {
  return divide(base.unitDenominator, base.unitsPerTick * base.unitNumerator);
}

/** The position, in (usually fractional) ticks, of a file time in seconds. */
export function toTicks(base: TimeBase, seconds: number): Ticks {
  const originS = divide(base.originUnits * base.unitNumerator, base.unitDenominator);
  return (seconds - originS) * ticksPerSecond(base);
}
