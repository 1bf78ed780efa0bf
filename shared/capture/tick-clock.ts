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
  /** Ticks of the latest stamp; after an unresolved one see `ticks()`. */
  private latest = 0;
  private origin = 0;
  private originUnits = 0n;
  private unitsPerTick = 1n;
  /** The latest stamp in units since the origin, while ticks are not units. */
  private wide: bigint | null = null;
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

  /** The latest stamp in ticks, exact. Throws `CaptureError` (`time-range`) where no whole number below 2⁵³ can hold it. */
  ticks(): number {
    if (this.isUnresolved) this.resolve();
    return this.latest;
  }

  /** The latest stamp in ticks, rounded up: for what need not be exact, such as the end of the record. */
  roundedTicks(): number {
    return this.latest;
  }

  /** The stamp of tick 0 while ticks are units and stamps small numbers: `stamp − narrowOrigin` are ticks then. Else null. */
  get narrowOrigin(): number | null {
    return this.isStarted && this.wide === null && this.origin <= LARGEST ? this.origin : null;
  }

  /** For a reader that does the arithmetic of `narrowOrigin` itself. */
  moveTo(ticks: number): void {
    this.latest = ticks;
  }

  /** Ticks of the end of the record, after the last stamp. */
  endTicks(): number {
    if (this.latest > LARGEST) this.resolve();
    return this.latest;
  }

  timeBase(unitNumerator: bigint, unitDenominator: bigint): TimeBase {
    return { unitNumerator, unitDenominator, originUnits: this.originUnits, unitsPerTick: this.unitsPerTick };
  }

  /** Units of the file in one tick. */
  get divisor(): bigint {
    return this.unitsPerTick;
  }

  private advanceWide(units: bigint): boolean {
    const latest = this.wide ?? BigInt(this.latest);
    if (units < latest) return false;
    if (this.wide === null && units <= BigInt(LARGEST)) {
      this.latest = Number(units);
      return true;
    }
    this.wide = units;
    const whole = units / this.unitsPerTick;
    this.isUnresolved = whole * this.unitsPerTick !== units || whole > BigInt(LARGEST);
    this.latest = Number(this.isUnresolved ? whole + 1n : whole);
    return true;
  }

  private resolve(): void {
    const units = this.wide ?? 0n;
    let divisor = units;
    for (const keeper of this.keepers()) {
      if (divisor === 1n) break;
      keeper.forEachTime((time) => {
        if (divisor > 1n) divisor = greatestCommonDivisor(divisor, BigInt(time) * this.unitsPerTick);
      });
    }
    const ticks = units / divisor;
    if (ticks > BigInt(LARGEST)) {
      throw new CaptureError('time-range', 'the times span more than 2⁵³ steps: too many to keep them exact');
    }
    const old = this.unitsPerTick;
    for (const keeper of this.keepers()) keeper.scaleTimes((time) => Number((BigInt(time) * old) / divisor));
    this.unitsPerTick = divisor;
    this.latest = Number(ticks);
    this.isUnresolved = false;
  }
}
