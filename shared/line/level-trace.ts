import type { Ticks } from '../time/ticks';

/** Mark, OFF. */
export const SPACE = 0;
export const MARK = 1;
export const OFF = 0;
export const ON = 1;
export { UNKNOWN } from '../capture/capture';

/**
 * A line in its own sense, polarity already applied: data lines (data, TXD) hold SPACE or MARK, control lines OFF or ON,
 * each may be UNKNOWN. `ticks` strictly increases and neighbouring levels differ. Ticks may be fractions where an edge was
 * interpolated between analog samples.
 */
export interface LevelTrace {
  readonly initialLevel: number;
  readonly ticks: Float64Array;
  readonly levels: Uint8Array;
  /** First and last instant the trace covers. */
  readonly endTicks: Ticks;
  /** Worst-case error of each edge, in ticks; undefined where it is the capture's resolution. */
  readonly edgeUncertainty?: Float32Array;
}
