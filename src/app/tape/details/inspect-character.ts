import { bitsAfterStart, elementsPerCharacter } from '#shared/characters/framing';
import type { PlacedEdge } from '../drawing/edge-places';
import { edgesOfCharacter } from '../drawing/edge-places';
import { samplePercent } from '../drawing/edge-stems';
import type { TapeModel } from '../drawing/tape-model';

const SPACE = 0;
/** A receiver that samples sixteen times a bit may begin a sixteenth late. Source: rules.md, FRM-10. */
export const START_PERCENT = 6.25;

/** One character under the glass. Places in bits from its start edge. */
export interface InspectedCharacter {
  /** Elements of the character, start and stop included. */
  readonly elements: number;
  /** At space, as measured. */
  readonly pieces: readonly { readonly from: number; readonly to: number }[];
  /** Bits as received, first sent first. */
  readonly bits: readonly number[];
  /** Where a receiver looks: the middle of each element. */
  readonly samples: readonly number[];
  readonly edges: readonly (PlacedEdge & { readonly isOver: boolean; readonly dueMs: number })[];
  /** Largest displacement, percent of a bit; 0 without edges. */
  readonly worst: number;
  /** What a sixteen-times receiver has left of 50 %, percent of a bit. */
  readonly margin: number;
  readonly doubt: number;
}

/** null for a character without edges of its own, as in a byte log. */
export function inspectCharacter(model: TapeModel, index: number): InspectedCharacter | null {
  const { tape, lines, bitTicks, limits } = model;
  const line = lines.data;
  const first = tape.characters.startEdge[index];
  if (line === undefined || tape.framing === null || first < 0) return null;
  const elements = elementsPerCharacter(tape.framing);
  const start = line.ticks[first];
  const end = start + elements * bitTicks;
  const pieces: { from: number; to: number }[] = [];
  let level: number = SPACE;
  let since = start;
  for (let i = first + 1; ; i++) {
    const until = Math.min(end, i < line.ticks.length ? line.ticks[i] : Infinity);
    if (level === SPACE) pieces.push({ from: (since - start) / bitTicks, to: (until - start) / bitTicks });
    if (until >= end) break;
    since = until;
    level = line.levels[i];
  }
  const limit = limits.distortionLimit;
  const edges = edgesOfCharacter(tape, line, index, bitTicks, bitTicks).map((edge) => ({
    ...edge,
    isOver: limit !== null && Math.abs(edge.displacement) > limit,
    dueMs: (edge.dueTicks - start) * tape.tickS * 1e3,
  }));
  const worst = edges.reduce(
    (most, { displacement }) => (Math.abs(displacement) > Math.abs(most) ? displacement : most),
    0,
  );
  const count = bitsAfterStart(tape.framing);
  return {
    elements,
    pieces,
    bits: Array.from(
      { length: tape.framing.dataBits },
      (_, bit) => (tape.characters.values[index] >> bit) & 1,
    ),
    samples: Array.from({ length: count + 2 }, (_, i) => i + 0.5),
    edges,
    worst,
    margin: 50 - START_PERCENT - Math.abs(worst),
    doubt: samplePercent(model),
  };
}
