import type { CharacterTable } from './character-table';

/** Characters that must follow one another closely before their stop elements tell. Source: rules.md 4. */
const LEAST_CHARACTERS = 20;
/** So few are enough where every one has the same two elements (house). */
const FEW_PAIRS = 6;

/**
 * 2 where the smallest stop length over back-to-back characters is two elements, else 1.
 * @param bitsAfterStart data and parity elements
 */
export function findStopBits(characters: CharacterTable, bitTicks: number, bitsAfterStart: number): 1 | 2 {
  const { startTicks, errors, count } = characters;
  let pairs = 0;
  let shortest = Infinity;
  let longest = 0;
  for (let i = 1; i < count; i++) {
    if (errors[i] !== 0 || errors[i - 1] !== 0) continue;
    const stop = (startTicks[i] - startTicks[i - 1]) / bitTicks - 1 - bitsAfterStart;
    if (stop > 3.5) continue;
    pairs += 1;
    shortest = Math.min(shortest, stop);
    longest = Math.max(longest, stop);
  }
  const isEnough = pairs + 1 >= LEAST_CHARACTERS || (pairs >= FEW_PAIRS && longest < 2.2);
  return isEnough && shortest >= 1.85 ? 2 : 1;
}
