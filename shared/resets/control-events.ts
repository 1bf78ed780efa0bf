import type { LevelTrace } from '../line/level-trace';
import { ON, UNKNOWN } from '../line/level-trace';
import type { ControlEvent } from './reset';

/** Changes of RTS and DTR between known levels, in order of time (RTS first at equal times). */
export function findControlEvents(rts: LevelTrace | null, dtr: LevelTrace | null): ControlEvent[] {
  return [...changesOf(rts, 'rts'), ...changesOf(dtr, 'dtr')].sort((a, b) => a.ticks - b.ticks);
}

function changesOf(trace: LevelTrace | null, line: ControlEvent['line']): ControlEvent[] {
  if (trace === null) return [];
  const events: ControlEvent[] = [];
  let before = trace.initialLevel;
  for (let i = 0; i < trace.ticks.length; i++) {
    const level = trace.levels[i];
    if (before !== UNKNOWN && level !== UNKNOWN) {
      events.push({ ticks: trace.ticks[i], line, isOn: level === ON });
    }
    before = level;
  }
  return events;
}
