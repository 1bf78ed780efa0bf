import type { Decoded } from '../decode/decoded';
import { REPLY_WINDOW_S } from '../resets/find-resets';
import type { Reset } from '../resets/reset';
import { ticksPerSecond } from '../time/time-base';

/** A reset without a reply. `isShort`: RTS went OFF before the window was over, so that nothing can be said. */
export interface Miss {
  readonly reset: Reset;
  readonly isShort: boolean;
}

/** Resets without a reply among those whose window lies whole in the record. */
export function findMisses(decoded: Decoded): { readonly n: number; readonly misses: readonly Miss[] } {
  const fullWindow = REPLY_WINDOW_S * ticksPerSecond(decoded.capture.timeBase);
  const whole = decoded.resets.filter((reset) => !reset.isWindowCut);
  const misses = whole
    .filter((reset) => reset.replyTicks === null)
    .map((reset) => ({
      reset,
      isShort: reset.windowEndTicks - reset.onTicks < fullWindow - decoded.resolutionTicks,
    }));
  return { n: whole.length, misses };
}

/** The same as numbers. */
export function countMisses(decoded: Decoded): { n: number; silent: number; undecided: number } {
  const { n, misses } = findMisses(decoded);
  const undecided = misses.filter(({ isShort }) => isShort).length;
  return { n, silent: misses.length - undecided, undecided };
}

/** Latencies in ticks by kind of reset: after power-up, and all others. */
export function splitLatencies(resets: readonly Reset[]): { powerUp: number[]; powered: number[] } {
  const of = (isPowerUp: boolean): number[] =>
    resets
      .filter((reset) => reset.replyTicks !== null && (reset.isPowerUp === true) === isPowerUp)
      .map((reset) => reset.replyTicks! - reset.onTicks);
  return { powerUp: of(true), powered: of(false) };
}
