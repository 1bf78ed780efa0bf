import type { Ticks } from '../time/ticks';

/** Flags of `CharacterTable.errors`. */
export const FRAMING_ERROR = 1;
export const PARITY_ERROR = 2;
export const BREAK_ERROR = 4;

/** The characters of a line in columns, in order of time. */
export interface CharacterTable {
  readonly count: number;
  /** Leading edge of the start element. */
  readonly startTicks: Float64Array;
  /** End of the last stop element sampled (for a break: the return to mark). May be fractional. */
  readonly endTicks: Float64Array;
  readonly values: Uint8Array;
  readonly errors: Uint8Array;
  /** Index into the line's `LevelTrace.ticks` of the start edge; −1 for byte logs. */
  readonly startEdge: Int32Array;
}

/** A pulse too short to be a start element, or a start element that was gone at its middle. */
export interface Glitch {
  readonly startTicks: Ticks;
  readonly endTicks: Ticks;
}
