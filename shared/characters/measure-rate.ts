import type { LevelTrace } from '../line/level-trace';
import type { CharacterTable } from './character-table';

/**
 * The mean element of the transmitter, in ticks: least squares through the start transitions, T = Σ n·(t − t₀) ÷ Σ n². Only
 * undamaged characters with a seen start edge count. null where no transition tells.
 * Source: protocol-facts 2.2, mean UI estimate.
 */
export function measureBitTicks(
  line: LevelTrace,
  characters: CharacterTable,
  bitTicks: number,
  bitsAfterStart: number,
): number | null {
  const { ticks } = line;
  let numerator = 0;
  let denominator = 0;
  for (let c = 0; c < characters.count; c++) {
    const edge = characters.startEdge[c];
    if (edge < 0 || characters.errors[c] !== 0) continue;
    const start = ticks[edge];
    for (let i = edge + 1; i < ticks.length; i++) {
      const elapsed = ticks[i] - start;
      const n = Math.round(elapsed / bitTicks);
      if (n > bitsAfterStart + 1) break;
      if (n < 1 || Math.abs(elapsed / bitTicks - n) > 0.35) continue;
      numerator += n * elapsed;
      denominator += n * n;
    }
  }
  return denominator === 0 ? null : numerator / denominator;
}
