import type { Span } from '../time/ticks';
import { levelAt } from './level-at';
import type { LevelTrace } from './level-trace';
import { UNKNOWN } from './level-trace';

/** The trace with nothing known inside the spans. Spans may overlap and come in any order. */
export function maskSpans(trace: LevelTrace, spans: readonly Span[]): LevelTrace {
  const sorted = mergeSpans(spans);
  if (sorted.length === 0) return trace;
  const ticks: number[] = [];
  const levels: number[] = [];
  let initialLevel = trace.initialLevel;
  let current = initialLevel;
  const put = (at: number, level: number): void => {
    if (at <= 0) initialLevel = level;
    else if (level !== current) {
      ticks.push(at);
      levels.push(level);
    }
    current = level;
  };
  let edge = 0;
  for (const span of sorted) {
    for (; edge < trace.ticks.length && trace.ticks[edge] < span.startTicks; edge++) {
      put(trace.ticks[edge], trace.levels[edge]);
    }
    put(span.startTicks, UNKNOWN);
    while (edge < trace.ticks.length && trace.ticks[edge] <= span.endTicks) edge++;
    if (span.endTicks < trace.endTicks) put(span.endTicks, levelAt(trace, span.endTicks));
  }
  for (; edge < trace.ticks.length; edge++) put(trace.ticks[edge], trace.levels[edge]);
  return {
    initialLevel,
    ticks: Float64Array.from(ticks),
    levels: Uint8Array.from(levels),
    endTicks: trace.endTicks,
  };
}

/** The spans in order of time, overlapping ones joined, empty ones dropped. */
export function mergeSpans(spans: readonly Span[]): Span[] {
  const sorted = spans
    .filter((span) => span.endTicks > span.startTicks)
    .sort((a, b) => a.startTicks - b.startTicks);
  const merged: Span[] = [];
  for (const span of sorted) {
    const last = merged.at(-1);
    if (last === undefined || span.startTicks > last.endTicks) merged.push(span);
    else if (span.endTicks > last.endTicks) {
      merged[merged.length - 1] = { startTicks: last.startTicks, endTicks: span.endTicks };
    }
  }
  return merged;
}
