import { characterRange } from './packet-lengths';
import { decodeFixedLength } from './fixed-length';
import { decodeMFamily } from './m-family';
import type { PacketSource } from './packet-source';
import { PacketBuilder } from './packet-builder';
import type { PacketIncident, PacketTable, Protocol } from './packet-table';

/** Each protocol with its decoder: the one place to add one. */
const DECODERS: Record<Protocol, (source: PacketSource) => PacketBuilder> = {
  M: (source) => decodeMFamily(source, 'M'),
  M3: (source) => decodeMFamily(source, 'M3'),
  MZ: (source) => decodeMFamily(source, 'MZ'),
  'M-null': (source) => decodeMFamily(source, 'M-null'),
  'five-byte': (source) => decodeFixedLength(source, 'five-byte'),
  'three-byte': (source) => decodeFixedLength(source, 'three-byte'),
  MM: (source) => decodeFixedLength(source, 'MM'),
};

export interface DecodedPackets {
  readonly packets: PacketTable;
  readonly incidents: readonly PacketIncident[];
}

/**
 * Cuts characters into packets.
 * @param knownFromTicks first instant at which the data line is known, `endTicks` the last: what lies within one packet time of
 * them may belong to a packet that was not recorded whole
 */
export function decodePackets(
  source: PacketSource,
  protocol: Protocol,
  knownFromTicks: number,
  endTicks: number,
): DecodedPackets {
  const builder = DECODERS[protocol](source);
  const { characters } = source;
  const characterTicks = characters.count === 0 ? 0 : characters.endTicks[0] - characters.startTicks[0];
  const packetTicks = characterTicks * characterRange(protocol).longest;
  const incidents = builder.incidents.map((incident) => {
    const start = characters.startTicks[incident.firstCharacter];
    const end = characters.endTicks[incident.firstCharacter + incident.characterCount - 1];
    const isAtEdge =
      incident.isAtEdge || start - knownFromTicks < packetTicks || endTicks - end < packetTicks;
    return isAtEdge === incident.isAtEdge ? incident : { ...incident, isAtEdge };
  });
  return { packets: builder.finish(), incidents };
}

export const NO_PACKETS: PacketTable = new PacketBuilder(0, false, false).finish();
