import type { LineRole } from '../line/line-map';

/** A guess of the library, why it was made, and what came second. */
export interface Detection {
  readonly subject: 'line' | 'polarity' | 'bit-rate' | 'framing' | 'protocol';
  /** Role for `line` and `polarity`. */
  readonly role?: LineRole;
  readonly chosen: string;
  /** In plain words. `stated` where the person said so. */
  readonly reason: string;
  readonly runnerUp: string | null;
}
