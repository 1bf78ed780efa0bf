import type { Capture } from '../capture/capture';
import type { LineMap } from '../line/line-map';
import type { ResolvedLine } from '../line/resolved-line';

/** Edges needed before their common divisor says something about the instrument. Source: rules.md 1. */
const LEAST_EDGES = 20;

/**
 * Resolution T of a time, in ticks: the sample interval of sampled files; else the larger of the file's unit and the greatest
 * common divisor of the edge times on mapped channels. A stated resolution wins.
 * Source: rules.md 1, uncertainty of time.
 */
export function findResolution(
  capture: Capture,
  map: LineMap,
  lines: readonly ResolvedLine[],
  ticksPerSecond: number,
): number {
  if (map.resolutionS !== undefined) return map.resolutionS * ticksPerSecond;
  if (capture.layout === 'sampled' && capture.sampleIntervalTicks !== null)
    return capture.sampleIntervalTicks;
  let edges = 0;
  let divisor = 0;
  for (const line of lines) {
    // Interpolated edges are no multiples of anything.
    if (line.thresholds !== null) continue;
    edges += line.trace.ticks.length;
    for (const tick of line.trace.ticks) {
      if (divisor === 1) break;
      divisor = greatestCommonDivisor(divisor, tick);
    }
  }
  return Math.max(capture.unitTicks, edges >= LEAST_EDGES ? divisor : 0);
}

function greatestCommonDivisor(a: number, b: number): number {
  let x = a;
  let y = b;
  while (y !== 0) [x, y] = [y, x % y];
  return x;
}
