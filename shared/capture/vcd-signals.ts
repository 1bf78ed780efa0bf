import type { Channel } from './capture';
import { HIGH, LOW, UNKNOWN } from './capture';
import type { DigitalRecorder } from './digital-recorder';
import type { Span } from '../time/ticks';
import { TickClock } from './tick-clock';
import { VcdGaps } from './vcd-gaps';
import type { VcdVariables } from './vcd-variables';

/** Level by the character of a value change; 255 where it is none. Source: IEEE 1364-2005 §18.2.2; nine-valued levels: practice. */
export const LEVELS = new Uint8Array(256).fill(255);
for (const c of '0lL') LEVELS[c.charCodeAt(0)] = LOW;
for (const c of '1hH') LEVELS[c.charCodeAt(0)] = HIGH;
for (const c of 'xXzZuUwW-') LEVELS[c.charCodeAt(0)] = UNKNOWN;

/** What became of a time stamp. */
export type StampResult = 'taken' | 'backwards' | 'still-backwards';

/** The present time and values of a dump, and what they were. */
export class VcdSignals {
  readonly clock: TickClock;
  hasChanges = false;
  /** Inside `$dumpoff … $end`: the x values there are no changes. */
  isOff = false;
  private readonly gaps = new VcdGaps();
  /** Values whose time is not known because their stamp could not be used; null while the time is known. */
  private doubtful: Map<DigitalRecorder, number> | null = null;

  constructor(private readonly variables: VcdVariables) {
    const { gaps } = this;
    this.clock = new TickClock(function* () {
      yield* variables.digital;
      yield* variables.analog;
      yield gaps;
    });
  }

  get isTimeKnown(): boolean {
    return this.doubtful === null;
  }

  /** The time is not known until the next good stamp. */
  loseTime(): void {
    this.doubtful ??= new Map();
  }

  moveTo(stamp: number | bigint): StampResult {
    const before = this.clock.isStarted ? this.clock.roundedTicks() : 0;
    if (this.clock.advance(stamp)) {
      if (this.doubtful !== null) this.settleDoubt(before);
      return 'taken';
    }
    if (this.doubtful !== null) return 'still-backwards';
    this.loseTime();
    return 'backwards';
  }

  changeScalar(index: number, level: number): void {
    const variable = this.variables.list[index];
    if (variable.kind !== 'bits') return;
    const last = variable.bits.length - 1;
    for (let i = 0; i < last; i++) this.change(variable.bits[i], extension(level));
    this.change(variable.bits[last], level);
  }

  /** False: the digits are none. */
  changeVector(index: number, digits: Uint8Array): boolean {
    const variable = this.variables.list[index];
    if (variable.kind !== 'bits') return true;
    const surplus = digits.length - variable.bits.length;
    const fill = digits.length === 0 ? 255 : extension(LEVELS[digits[0]]);
    for (let i = 0; i < variable.bits.length; i++) {
      const level = i + surplus < 0 ? fill : LEVELS[digits[i + surplus]];
      if (level === 255) return false;
      this.change(variable.bits[i], level);
    }
    return true;
  }

  changeReal(index: number, value: number): void {
    const variable = this.variables.list[index];
    if (variable.kind !== 'real') return;
    this.hasChanges = true;
    if (this.isOff || this.doubtful !== null) return;
    variable.recorder.change(this.clock.ticks(), value);
  }

  /** `$dumpoff`: a gap in what is known, not an edge. */
  switchOff(): void {
    this.isOff = true;
    const ticks = this.clock.ticks();
    this.gaps.open(ticks);
    for (const recorder of this.variables.digital) recorder.change(ticks, UNKNOWN);
    for (const recorder of this.variables.analog) recorder.change(ticks, NaN);
  }

  switchOn(): void {
    this.gaps.close(this.clock.ticks());
  }

  finish(): {
    readonly channels: readonly Channel[];
    readonly endTicks: number;
    readonly gaps: readonly Span[];
  } {
    // The end first: it may change the tick of all the others.
    const endTicks = this.clock.endTicks();
    const digital: Channel[] = this.variables.digital.map((recorder) => recorder.finish());
    const analog: Channel[] = this.variables.analog.map((recorder) => recorder.finish());
    return { channels: [...digital, ...analog], endTicks, gaps: this.gaps.toSpans(endTicks) };
  }

  /** The time is known again: what changed since is unknown up to here and known from here on. */
  private settleDoubt(before: number): void {
    const now = this.clock.ticks();
    for (const [recorder, level] of this.doubtful ?? []) {
      if (now > before + 1) recorder.change(before + 1, UNKNOWN);
      recorder.change(now, level);
    }
    this.doubtful = null;
  }

  private change(recorder: DigitalRecorder, level: number): void {
    this.hasChanges = true;
    if (this.isOff) return;
    if (this.doubtful !== null) this.doubtful.set(recorder, level);
    else recorder.change(recorder.isTooBusy ? this.clock.roundedTicks() : this.clock.ticks(), level);
  }
}

/** A value shorter than its vector is extended to the left: by 0 after 0 or 1, else by its first digit. Source: IEEE 1364-2005 §18.2.2. */
function extension(level: number): number {
  return level === HIGH ? LOW : level;
}
