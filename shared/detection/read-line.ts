import type { CharacterTable, Glitch } from '../characters/character-table';
import type { Framing } from '../characters/framing';
import { bitsAfterStart } from '../characters/framing';
import { measureBitTicks } from '../characters/measure-rate';
import { receiveCharacters } from '../characters/receive-characters';
import type { LevelTrace } from '../line/level-trace';

export type CharacterFormat = Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>;

export interface ReadLine {
  readonly bitTicks: number;
  readonly format: CharacterFormat;
  readonly characters: CharacterTable;
  readonly glitches: readonly Glitch[];
}

/** Reads a line in one format, the bit time refined by what was read. */
export function readLine(line: LevelTrace, bitTicks: number, format: CharacterFormat): ReadLine {
  let bit = bitTicks;
  let received = receiveCharacters(line, bit, format);
  const measured = measureBitTicks(line, received.characters, bit, bitsAfterStart(format));
  // Reading again is worth it only where the last element would move by more than a few hundredths.
  if (measured !== null && Math.abs(measured / bit - 1) > 0.002) {
    bit = measured;
    received = receiveCharacters(line, bit, format);
  }
  const final = measureBitTicks(line, received.characters, bit, bitsAfterStart(format));
  return { bitTicks: final ?? bit, format, ...received };
}
