import type { LevelTrace } from '../line/level-trace';
import { UNKNOWN } from '../line/level-trace';
import type { Glitch } from './character-table';

/** A trace without its shortest pulses, the way back to the edges of the original, and the pulses taken out. */
export interface FilteredTrace {
  readonly trace: LevelTrace;
  /** Index of each kept edge in the original trace; null where nothing was taken out. */
  readonly originalEdge: Int32Array | null;
  readonly glitches: readonly Glitch[];
}

/** More reports than this help nobody; the pulses are still taken out. */
const MOST_REPORTS = 10_000;

/** Takes out pulses shorter than `shortestTicks` between known levels, from left to right. */
export function removeGlitches(trace: LevelTrace, shortestTicks: number): FilteredTrace {
  const { ticks, levels } = trace;
  let hasShort = false;
  for (let i = 1; i < ticks.length && !hasShort; i++) hasShort = ticks[i] - ticks[i - 1] < shortestTicks;
  if (!hasShort) return { trace, originalEdge: null, glitches: [] };

  const kept = new Int32Array(ticks.length);
  const glitches: Glitch[] = [];
  let count = 0;
  const levelBefore = (position: number): number =>
    position === 0 ? trace.initialLevel : levels[kept[position - 1]];
  for (let i = 0; i < ticks.length; i++) {
    if (count > 0) {
      const previous = kept[count - 1];
      const isShort = ticks[i] - ticks[previous] < shortestTicks;
      if (
        isShort &&
        levels[previous] !== UNKNOWN &&
        levelBefore(count - 1) === levels[i] &&
        levels[i] !== UNKNOWN
      ) {
        if (glitches.length < MOST_REPORTS)
          glitches.push({ startTicks: ticks[previous], endTicks: ticks[i] });
        count -= 1;
        continue;
      }
    }
    if (levels[i] === levelBefore(count)) continue;
    kept[count] = i;
    count += 1;
  }
  const outTicks = new Float64Array(count);
  const outLevels = new Uint8Array(count);
  for (let i = 0; i < count; i++) {
    outTicks[i] = ticks[kept[i]];
    outLevels[i] = levels[kept[i]];
  }
  return {
    trace: { initialLevel: trace.initialLevel, ticks: outTicks, levels: outLevels, endTicks: trace.endTicks },
    originalEdge: kept.slice(0, count),
    glitches,
  };
}
