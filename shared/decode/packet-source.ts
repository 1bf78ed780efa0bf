import type { CharacterTable } from '../characters/character-table';
import type { LevelTrace } from '../line/level-trace';
import { UNKNOWN } from '../line/level-trace';
import type { PacketSource } from '../packets/packet-source';

/** What packets are cut from: the characters, which of them identify the device, and where nothing is read across. */
export function packetSource(
  characters: CharacterTable,
  resetOfCharacter: Int32Array,
  rts: LevelTrace | null,
  data: LevelTrace | null,
  ticksPerSecond: number,
): PacketSource {
  return {
    characters,
    isIdentification: Uint8Array.from(resetOfCharacter, (reset) => Number(reset >= 0)),
    barriers: findBarriers(rts, data),
    ticksPerSecond,
  };
}

/** Instants no packet reaches across: changes of RTS, the begin of unknown stretches of the data line. */
function findBarriers(rts: LevelTrace | null, data: LevelTrace | null): Float64Array {
  const barriers: number[] = rts === null ? [] : Array.from(rts.ticks);
  if (data !== null) {
    for (let i = 0; i < data.ticks.length; i++) if (data.levels[i] === UNKNOWN) barriers.push(data.ticks[i]);
  }
  return Float64Array.from(barriers).sort();
}
