import { CaptureError } from './capture-error';
import type { TimeBase } from '../time/time-base';

const LARGEST = Number.MAX_SAFE_INTEGER;

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  while (b !== 0n) [a, b] = [b, a % b];
  return a;
}

/** What keeps times that must follow when the clock changes its tick. */
export interface TimeKeeper {
  scaleTimes(scale: (time: number) => number): void;
  forEachTime(visit: (time: number) => void): void;
}

/**
 * Turns time stamps of any size into ticks. The first stamp is tick 0. A tick is one unit of the file until times pass 2⁵³ units;
 * from then on the common divisor of all kept times is taken out, so that ticks stay exact, and taken back where a new time needs it.
 */
export class TickClock {
  isStarted = false;
  private latest = 0;
  private origin = 0;
  private originUnits = 0n;
  private unitsPerTick = 1n;
  /** The latest stamp in units since the origin, once that passed 2⁵³. */
  private wide: bigint | null = null;
  /** The latest stamp that was a whole number of ticks. */
  private exact = 0;
  /** The latest stamp is no whole number of ticks. */
  private isUnresolved = false;

  constructor(private readonly keepers: () => Iterable<TimeKeeper>) {}

  /** Takes a stamp. False: it lies before the latest one and was not taken. */
  advance(stamp: number | bigint): boolean {
    if (!this.isStarted) {
      this.isStarted = true;
      this.origin = Number(stamp);
      this.originUnits = BigInt(stamp);
      return true;
    }
    if (this.wide === null && typeof stamp === 'number' && this.origin <= LARGEST) {
      const ticks = stamp - this.origin;
      if (ticks < this.latest) return false;
      this.latest = ticks;
      return true;
    }
    return this.advanceWide(BigInt(stamp) - this.originUnits);
  }

  /**
   * The latest stamp in ticks, exact. Call it for times that are kept; see `roundedTicks`. Throws `CaptureError` (`time-range`) where
   * no tick is exact for it and all kept times; the latest exact one is the present time then.
   */
  ticks(): number {
    if (this.isUnresolved) this.resolve();
    return this.latest;
  }

  /** The latest stamp in ticks, rounded up: for what need not be exact, such as the end of the record. */
  roundedTicks(): number {
    return this.latest;
  }

  /** The end of the record, after the last stamp: rounded up, and below 2⁵³. */
  endTicks(): number {
    if (this.wide === null || this.latest <= LARGEST) return this.latest;
    const divisor = this.keptDivisor();
    const ticks = divisor === 0n ? 1n : (this.wide + divisor - 1n) / divisor;
    if (ticks > BigInt(LARGEST)) return LARGEST;
    this.useDivisor(divisor === 0n ? this.wide : divisor);
    return Number(ticks);
  }

  /** The stamp of tick 0 while ticks are units and stamps small numbers: `stamp − narrowOrigin` are ticks then. Else null. */
  get narrowOrigin(): number | null {
    return this.isStarted && this.wide === null && this.origin <= LARGEST ? this.origin : null;
  }

  /** For a reader that does the arithmetic of `narrowOrigin` itself. */
  moveTo(ticks: number): void {
    this.latest = ticks;
  }

  timeBase(unitNumerator: bigint, unitDenominator: bigint): TimeBase {
    return { unitNumerator, unitDenominator, originUnits: this.originUnits, unitsPerTick: this.unitsPerTick };
  }

  /** Units of the file in one tick. */
  get divisor(): bigint {
    return this.unitsPerTick;
  }

  private advanceWide(units: bigint): boolean {
    if (units < (this.wide ?? BigInt(this.latest))) return false;
    if (this.wide === null && units <= BigInt(LARGEST)) {
      this.latest = Number(units);
      return true;
    }
    this.wide = units;
    if (!this.isUnresolved) this.exact = this.latest;
    const whole = units / this.unitsPerTick;
    this.isUnresolved = whole * this.unitsPerTick !== units || whole > BigInt(LARGEST);
    this.latest = Number(this.isUnresolved ? whole + 1n : whole);
    return true;
  }

  /** Changes the tick to the common divisor of all kept times and the latest one. */
  private resolve(): void {
    const units = this.wide ?? 0n;
    const divisor = greatestCommonDivisor(units, this.keptDivisor());
    if (units / divisor > BigInt(LARGEST)) {
      this.latest = this.exact;
      this.isUnresolved = false;
      throw new CaptureError('time-range', 'the times span more than 2⁵³ steps: too many to keep them exact');
    }
    this.useDivisor(divisor);
    this.latest = Number(units / divisor);
    this.isUnresolved = false;
  }

  private keptDivisor(): bigint {
    let divisor = 0n;
    for (const keeper of this.keepers()) {
      keeper.forEachTime((time) => {
        if (divisor !== this.unitsPerTick)
          divisor = greatestCommonDivisor(divisor, BigInt(time) * this.unitsPerTick);
      });
      if (divisor === this.unitsPerTick) break;
    }
    return divisor;
  }

  private useDivisor(divisor: bigint): void {
    const old = this.unitsPerTick;
    this.unitsPerTick = divisor;
    if (old === divisor) return;
    for (const keeper of this.keepers()) keeper.scaleTimes((time) => Number((BigInt(time) * old) / divisor));
    this.exact = Number((BigInt(this.exact) * old) / divisor);
  }
}
