import type { Tape, TapeLine } from '#shared/contract/tape-payload';
import { bitsAfterStart } from '#shared/characters/framing';

/** An edge inside a character, with the element border it belongs to. */
export interface PlacedEdge {
  readonly edge: number;
  readonly ticks: number;
  /** Border between elements it stands for, 1 … ; the start edge is the reference and never listed. */
  readonly border: number;
  readonly dueTicks: number;
  /** Displacement in percent of a bit, late positive. */
  readonly displacement: number;
  readonly level: number;
}

/**
 * The edges of one character after its start edge. Source: protocol-facts 2.2 (terms of ITU-T R.140, from memory).
 * @param measuredTicks one bit at the measured rate: it tells which border an edge belongs to
 * @param unitTicks one bit of the rate the due places are taken from
 */
export function edgesOfCharacter(
  tape: Tape,
  line: TapeLine,
  character: number,
  measuredTicks: number,
  unitTicks: number,
): PlacedEdge[] {
  const first = tape.characters.startEdge[character];
  if (first < 0 || tape.framing === null) return [];
  const { ticks, levels } = line;
  const start = ticks[first];
  const last = bitsAfterStart(tape.framing) + 1;
  const found: PlacedEdge[] = [];
  for (let i = first + 1; i < ticks.length; i++) {
    const elapsed = ticks[i] - start;
    const border = Math.round(elapsed / measuredTicks);
    if (border > last) break;
    if (border < 1) continue;
    found.push({
      edge: i,
      ticks: ticks[i],
      border,
      dueTicks: start + border * unitTicks,
      displacement: 100 * (elapsed / unitTicks - border),
      level: levels[i],
    });
  }
  return found;
}

/** The edge farthest from its place; undefined where there is none. */
export function worstEdge(edges: readonly PlacedEdge[]): PlacedEdge | undefined {
  return edges.reduce<PlacedEdge | undefined>(
    (worst, edge) =>
      worst === undefined || Math.abs(edge.displacement) > Math.abs(worst.displacement) ? edge : worst,
    undefined,
  );
}
