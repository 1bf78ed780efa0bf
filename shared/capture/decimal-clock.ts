import type { DecimalNumber } from './decimal-number';
import type { TimeBase } from '../time/time-base';

const LARGEST = Number.MAX_SAFE_INTEGER;
/** Finest tick, in decimal places of a second, that may be given up where the times span too much for it (house). */
const COARSEST_PLACES = 9;
/** Exponents beyond it are nonsense as times. */
const LARGEST_SHIFT = 30;

/** Powers of ten that are exact doubles; looking one up is faster than computing it. */
const POWERS = Array.from({ length: 16 }, (_, i) => 10 ** i);

/** `digits · factor / divisor − origin` are ticks; where that is no whole number the tick is too coarse for the time. */
export interface LinearScale {
  readonly factor: number;
  readonly divisor: number;
  readonly origin: number;
}

/**
 * Turns times written as decimal numbers into ticks since the first of them. A tick is the last decimal place that any time has
 * needed so far; a time with more places makes the tick finer, and the owner scales what it has stored.
 */
export class DecimalClock {
  /** Decimal places of a tick, in the unit of the column. */
  places = 0;
  /** The finest last place that was printed, zeros included; for exponents the coarsest. */
  private printedPlaces = 0;
  private exponentPlaces = Infinity;
  private isStarted = false;
  private origin = 0n;
  private originNumber = 0;
  private latest = 0;

  /**
   * `unitPlaces`: decimal places of the column's unit in seconds, where known (3 for ms).
   * `scaleTimes`: multiply all stored times by the factor, or divide them where it is below 1.
   */
  constructor(
    private readonly unitPlaces: number,
    private readonly scaleTimes: (scale: (time: number) => number) => void,
  ) {}

  /**
   * The time in ticks. Negative, or smaller than the one before: time runs backwards; NaN: it lies too far from the first to be
   * exact beside it. The caller then calls no `accept`.
   */
  toTicks(time: DecimalNumber): number {
    this.notePrecision(time);
    if (time.scale > this.places || !this.isStarted) time.stripZeros();
    if (!this.isStarted) {
      if (time.scale < -LARGEST_SHIFT) return NaN;
      this.start(time);
    }
    if (time.scale > this.places) this.refine(time.scale);
    return this.relative(time);
  }

  /** The row that has this time is taken. */
  accept(ticks: number): void {
    this.latest = ticks;
  }

  /**
   * How times of at most `digits` digits, `scale` of them after the point, become ticks: digits · factor / divisor − origin. Null
   * where that may not be exact.
   */
  linear(digits: number, scale: number): LinearScale | null {
    const shift = this.places - scale;
    if (!Number.isFinite(scale)) return null;
    // Dividing makes the number smaller, multiplying larger: only that can pass 2⁵³.
    if (digits + Math.max(0, shift) > 15 || shift < -15 || Math.abs(this.originNumber) > LARGEST) return null;
    return {
      factor: 10 ** Math.max(0, shift),
      divisor: 10 ** Math.max(0, -shift),
      origin: this.originNumber,
    };
  }

  timeBase(unitNumerator: bigint, unitDenominator: bigint): TimeBase {
    const denominator = unitDenominator * 10n ** BigInt(Math.max(0, this.places));
    const numerator = unitNumerator * 10n ** BigInt(Math.max(0, -this.places));
    return {
      unitNumerator: numerator,
      unitDenominator: denominator,
      originUnits: this.origin,
      unitsPerTick: 1n,
    };
  }

  /** The smallest step the file can write down, in ticks. */
  get unitTicks(): number {
    const places = Number.isFinite(this.exponentPlaces) ? this.exponentPlaces : this.printedPlaces;
    return 10 ** (this.places - Math.max(places, Math.min(this.places, places)));
  }

  private notePrecision(time: DecimalNumber): void {
    if (time.exponent === null) {
      if (time.scale > this.printedPlaces) this.printedPlaces = time.scale;
    } else if (time.mantissa !== 0 && time.scale < this.exponentPlaces) {
      this.exponentPlaces = time.scale;
    }
  }

  private start(time: DecimalNumber): void {
    this.isStarted = true;
    this.places = Math.max(0, time.scale);
    this.origin = this.exact(time);
    this.originNumber = Number(this.origin);
  }

  /** The time in units of the present tick, rounded where it has more places. */
  private exact(time: DecimalNumber): bigint {
    const mantissa = time.wide ?? BigInt(time.mantissa);
    const shift = this.places - time.scale;
    return shift >= 0 ? mantissa * 10n ** BigInt(shift) : roundedQuotient(mantissa, 10n ** BigInt(-shift));
  }

  private relative(time: DecimalNumber): number {
    const shift = this.places - time.scale;
    if (time.wide === null && shift > -POWERS.length && shift < POWERS.length) {
      const { mantissa } = time;
      const value = shift >= 0 ? mantissa * POWERS[shift] : roundAwayFromZero(mantissa / POWERS[-shift]);
      const ticks = value - this.originNumber;
      if (Math.abs(value) <= LARGEST && Math.abs(this.originNumber) <= LARGEST && ticks <= LARGEST)
        return ticks;
    }
    if (time.scale < -LARGEST_SHIFT) return NaN;
    let ticks = this.exact(time) - this.origin;
    const spare = Math.max(0, this.places + this.unitPlaces - COARSEST_PLACES);
    if (ticks / 10n ** BigInt(spare) > BigInt(LARGEST)) return NaN;
    while (ticks > BigInt(LARGEST)) {
      this.coarsen();
      ticks = this.exact(time) - this.origin;
    }
    return ticks < -BigInt(LARGEST) ? -LARGEST : Number(ticks);
  }

  private refine(places: number): void {
    let target = places;
    while (target > this.places && this.latest * 10 ** (target - this.places) > LARGEST) target -= 1;
    if (target === this.places) return;
    const factor = 10 ** (target - this.places);
    this.scaleTimes((time) => time * factor);
    this.latest *= factor;
    this.origin *= BigInt(factor);
    this.originNumber = Number(this.origin);
    this.places = target;
  }

  private coarsen(): void {
    this.scaleTimes((time) => Math.round(time / 10));
    this.latest = Math.round(this.latest / 10);
    this.origin = roundedQuotient(this.origin, 10n);
    this.originNumber = Number(this.origin);
    this.places -= 1;
  }
}

function roundedQuotient(value: bigint, divisor: bigint): bigint {
  const half = divisor / 2n;
  return value >= 0n ? (value + half) / divisor : -((-value + half) / divisor);
}

function roundAwayFromZero(value: number): number {
  return value < 0 ? -Math.round(-value) : Math.round(value);
}
