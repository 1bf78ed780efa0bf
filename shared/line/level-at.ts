import { countUpTo } from '../time/sorted-search';
import type { Ticks } from '../time/ticks';
import type { LevelTrace } from './level-trace';

/** Level of the trace at an instant; a change at exactly that instant has already happened. */
export function levelAt(trace: LevelTrace, at: Ticks): number {
  const count = countUpTo(trace.ticks, at);
  return count === 0 ? trace.initialLevel : trace.levels[count - 1];
}

/** Whether the trace has the one level all through [start, end). */
export function holdsLevel(trace: LevelTrace, level: number, startTicks: Ticks, endTicks: Ticks): boolean {
  let index = countUpTo(trace.ticks, startTicks);
  let current = index === 0 ? trace.initialLevel : trace.levels[index - 1];
  while (current === level) {
    if (index >= trace.ticks.length || trace.ticks[index] >= endTicks) return true;
    current = trace.levels[index];
    index += 1;
  }
  return false;
}

/** Whether the trace is at the level anywhere in [start, end). */
export function reachesLevel(trace: LevelTrace, level: number, startTicks: Ticks, endTicks: Ticks): boolean {
  let index = countUpTo(trace.ticks, startTicks);
  if ((index === 0 ? trace.initialLevel : trace.levels[index - 1]) === level) return true;
  while (index < trace.ticks.length && trace.ticks[index] < endTicks) {
    if (trace.levels[index] === level) return true;
    index += 1;
  }
  return false;
}
