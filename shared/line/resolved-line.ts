import type { LevelTrace } from './level-trace';
import type { LineRole, Polarity, Thresholds } from './line-map';

/** A channel in its part: the trace is in the sense of the line. */
export interface ResolvedLine {
  readonly role: LineRole;
  readonly channel: string;
  readonly polarity: Polarity;
  /** null for digital channels. */
  readonly thresholds: Thresholds | null;
  readonly trace: LevelTrace;
}
