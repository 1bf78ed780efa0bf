import { UNKNOWN } from '../line/level-trace';
import type { AnalogLine } from './analog-line';

/** Half the transition region, volts. Source: ITU-T V.28 (03/93) and TIA-232-F: −3 to +3 V. */
export const REGION_V = 3;
/** Samples within the region that show how an edge runs. Source: rules.md 9, LVL-4. */
export const LEAST_EDGE_SAMPLES = 4;

/** One edge of the data line and the samples around it. */
export interface VoltageEdge {
  /** Index of the edge in the line's trace. */
  readonly edge: number;
  /** +1 to the positive side, −1 to the negative. */
  readonly direction: 1 | -1;
  /** The last sample beyond the region before it, the first beyond the region after it. */
  readonly before: number;
  readonly after: number;
}

/** Edges of a line recorded in volts. */
export interface VoltageEdges {
  readonly edges: readonly VoltageEdge[];
  /** Edges that do not go from beyond one side of the region to beyond the other. */
  readonly short: number;
}

/** Finds the samples around each edge between known levels, not farther than half-way to its neighbours. */
export function findVoltageEdges({ line, voltage }: AnalogLine): VoltageEdges {
  const { ticks, levels, initialLevel, endTicks } = line.trace;
  const edges: VoltageEdge[] = [];
  let short = 0;
  for (let i = 0; i < ticks.length; i++) {
    const levelBefore = i === 0 ? initialLevel : levels[i - 1];
    if (levels[i] === UNKNOWN || levelBefore === UNKNOWN) continue;
    const middle = voltage.firstFrom(ticks[i]);
    const from = voltage.firstFrom((ticks[i] + (i === 0 ? 0 : ticks[i - 1])) / 2);
    const to = voltage.firstFrom((ticks[i] + (i + 1 < ticks.length ? ticks[i + 1] : endTicks)) / 2);
    let before = middle - 1;
    while (before >= from && !isBeyond(voltage.valueOf(before))) before -= 1;
    let after = middle;
    while (after < to && !isBeyond(voltage.valueOf(after))) after += 1;
    const isWhole = before >= from && after < to;
    const start = isWhole ? voltage.valueOf(before) : 0;
    const end = isWhole ? voltage.valueOf(after) : 0;
    if (start * end >= 0) short += 1;
    else edges.push({ edge: i, direction: end > start ? 1 : -1, before, after });
  }
  return { edges, short };
}

/** Not a number is neither within nor beyond; it ends the search as beyond does, and its product with anything is no edge. */
function isBeyond(volts: number): boolean {
  return !(Math.abs(volts) <= REGION_V);
}

/** Samples within the region. */
export function samplesWithin({ before, after }: VoltageEdge): number {
  return after - before - 1;
}
