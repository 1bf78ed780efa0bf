import type { CharacterTable } from '#shared/characters/character-table';
import type { TapeLine } from '#shared/contract/tape-payload';
import { SPACE } from '#shared/line/level-trace';
import { countBefore, countUpTo } from '#shared/time/sorted-search';

/** Ticks at space (or OFF) before each edge of a line. */
export function sumSpace(line: TapeLine): Float64Array {
  const { ticks, levels, initialLevel } = line;
  const sums = new Float64Array(ticks.length);
  let level = initialLevel;
  let since = 0;
  let total = 0;
  for (let i = 0; i < ticks.length; i++) {
    if (level === SPACE) total += ticks[i] - since;
    sums[i] = total;
    level = levels[i];
    since = ticks[i];
  }
  return sums;
}

/** Ticks at space (or OFF) from the begin of the record to `at`. */
export function spaceUpTo(line: TapeLine, sums: Float64Array, at: number): number {
  const count = countUpTo(line.ticks, at);
  if (count === 0) return line.initialLevel === SPACE ? Math.max(0, at) : 0;
  const last = count - 1;
  return sums[last] + (line.levels[last] === SPACE ? at - line.ticks[last] : 0);
}

/** Ticks taken by the characters before each one; one value more than there are characters. */
export function sumUsed(characters: CharacterTable): Float64Array {
  const sums = new Float64Array(characters.count + 1);
  for (let i = 0; i < characters.count; i++) {
    sums[i + 1] = sums[i] + Math.max(0, characters.endTicks[i] - characters.startTicks[i]);
  }
  return sums;
}

/** Ticks taken by characters from the begin of the record to `at`. */
export function usedUpTo(characters: CharacterTable, sums: Float64Array, at: number): number {
  const count = countBefore(characters.startTicks, at, characters.count);
  if (count === 0) return 0;
  const last = count - 1;
  const length = characters.endTicks[last] - characters.startTicks[last];
  return sums[last] + Math.min(Math.max(0, length), at - characters.startTicks[last]);
}

/** Sums of a column of whole numbers before each of its values; one value more than the column has. */
export function sumColumn(column: ArrayLike<number>, count: number): Float64Array {
  const sums = new Float64Array(count + 1);
  for (let i = 0; i < count; i++) sums[i + 1] = sums[i] + column[i];
  return sums;
}
