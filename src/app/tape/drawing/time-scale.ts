import type { Tape } from '#shared/contract/tape-payload';

/** The stretch of the tape in view, in ticks of the tape's time base. */
export interface TapeWindow {
  readonly startTicks: number;
  readonly endTicks: number;
}

/** Bit rate that scales a tape on which no rate was found, bit/s. */
const ASSUMED_BIT_RATE = 1200;

/** Maps ticks to px and back. */
export class TimeScale {
  readonly ticksPerPx: number;

  /**
   * @param widthPx width of the paper, without the gutter
   * @param originPx x of the window's start; the gutter's width where x counts from the canvas's left edge
   */
  constructor(
    readonly window: TapeWindow,
    readonly widthPx: number,
    readonly originPx = 0,
  ) {
    this.ticksPerPx = (window.endTicks - window.startTicks) / Math.max(1, widthPx);
  }

  xOf(ticks: number): number {
    return this.originPx + (ticks - this.window.startTicks) / this.ticksPerPx;
  }

  ticksAt(xPx: number): number {
    return this.window.startTicks + (xPx - this.originPx) * this.ticksPerPx;
  }
}

/** One bit at the nominal rate, in ticks; of 1200 bit/s where no rate was found. */
export function nominalBitTicks(tape: Pick<Tape, 'tickS' | 'framing'>): number {
  return 1 / ((tape.framing?.nominalBitRate ?? ASSUMED_BIT_RATE) * tape.tickS);
}

/** One bit at the measured rate, in ticks; of 1200 bit/s where no rate was found. */
export function measuredBitTicks(tape: Pick<Tape, 'tickS' | 'framing'>): number {
  return 1 / ((tape.framing?.bitRate ?? ASSUMED_BIT_RATE) * tape.tickS);
}

/**
 * Scale of a window: px a bit at the nominal rate.
 * @param widthPx width of the paper, without the gutter
 */
export function pxPerBit(tape: Pick<Tape, 'tickS' | 'framing'>, window: TapeWindow, widthPx: number): number {
  const scale = (nominalBitTicks(tape) * Math.max(1, widthPx)) / (window.endTicks - window.startTicks);
  // A window made for 8 px a bit must not come out as 7.999…: what is drawn changes at such scales.
  return Number(scale.toPrecision(9));
}

/** Seconds of the file's own clock at a tick. */
export function secondsAt(tape: Pick<Tape, 'tickS' | 'originS'>, ticks: number): number {
  return tape.originS + ticks * tape.tickS;
}

/** The tick at a time of the file's own clock. Usually a fraction. */
export function ticksAtSeconds(tape: Pick<Tape, 'tickS' | 'originS'>, seconds: number): number {
  return (seconds - tape.originS) / tape.tickS;
}
