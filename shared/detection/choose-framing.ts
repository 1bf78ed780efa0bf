import type { CharacterTable } from '../characters/character-table';
import type { LevelTrace } from '../line/level-trace';
import { decodePackets } from '../packets/decode-packets';
import type { PacketSource } from '../packets/packet-source';
import type { Protocol } from '../packets/packet-table';
import { ReplyReader } from '../resets/identification';
import { chooseProtocol } from './choose-protocol';
import type { CharacterFormat, ReadLine } from './read-line';
import { readLine } from './read-line';

/** Formats a pointing device may use, the likeliest first. Source: protocol-facts 2.1, 5. */
export const FORMATS: readonly CharacterFormat[] = [
  { dataBits: 7, parity: 'none', stopBits: 1 },
  { dataBits: 8, parity: 'none', stopBits: 1 },
  { dataBits: 8, parity: 'odd', stopBits: 1 },
];

export interface FormatTrial {
  readonly line: ReadLine;
  readonly protocol: Protocol | null;
  readonly damaged: number;
  /** Characters inside packets or identifications less damaged and unexplained ones: the higher the better. */
  readonly quality: number;
}

/** Reads a line in each format that fits what was stated, best first; the likelier format first of equals. */
export function tryFormats(
  line: LevelTrace,
  bitTicks: number,
  ticksPerSecond: number,
  formats: readonly CharacterFormat[] = FORMATS,
  protocol?: Protocol,
): FormatTrial[] {
  return formats
    .map((format) => judge(readLine(line, bitTicks, format), ticksPerSecond, protocol))
    .sort((a, b) => b.quality - a.quality);
}

function judge(line: ReadLine, ticksPerSecond: number, stated?: Protocol): FormatTrial {
  const { characters, format } = line;
  let damaged = 0;
  for (let i = 0; i < characters.count; i++) if (characters.errors[i] !== 0) damaged += 1;
  const found = markIdentifications(characters, ticksPerSecond, format.dataBits === 8);
  const source: PacketSource = {
    characters,
    isIdentification: found.isIdentification,
    barriers: new Float64Array(0),
    ticksPerSecond,
  };
  const protocol = stated ?? chooseProtocol(source, format, found.identities)?.protocol ?? null;
  let covered = found.count;
  if (protocol !== null) {
    const { packets } = decodePackets(source, protocol, 0, Infinity);
    for (let p = 0; p < packets.count; p++) covered += packets.characterCount[p];
  }
  const unexplained = Math.max(0, characters.count - damaged - covered);
  return { line, protocol, damaged, quality: covered - 2 * damaged - unexplained };
}

/**
 * Identifications found without knowing the resets: replies after a rest of the line. Good enough to tell formats and channels
 * apart; the resets decide later.
 */
function markIdentifications(characters: CharacterTable, ticksPerSecond: number, hasEightBits: boolean) {
  const isIdentification = new Uint8Array(characters.count);
  const identities: string[] = [];
  const reader = new ReplyReader(characters, characters.count, ticksPerSecond, hasEightBits);
  let count = 0;
  const rest = 0.02 * ticksPerSecond;
  for (let i = 0; i < characters.count; i++) {
    const isAfterRest = i === 0 || characters.startTicks[i] - characters.endTicks[i - 1] > rest;
    if (!isAfterRest || characters.errors[i] !== 0) continue;
    if (hasEightBits && i > 0) continue;
    const found = reader.read(i);
    if (found === null) continue;
    for (const index of found.characters) isIdentification[index] = 1;
    count += found.characters.length;
    if (found.identity !== null) identities.push(found.identity);
    i = found.characters[found.characters.length - 1];
  }
  return { isIdentification, identities, count };
}
