/** A whole number of ticks of one capture's time base; exact up to 2⁵³. Tick 0 is the first instant of the capture. */
export type Ticks = number & { readonly __unit?: 'ticks' };

/** A half-open stretch of a capture, in ticks. */
export interface Span {
  readonly startTicks: Ticks;
  readonly endTicks: Ticks;
}
