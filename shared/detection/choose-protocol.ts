import type { Framing } from '../characters/framing';
import { decodePackets } from '../packets/decode-packets';
import { ObstacleFinder } from '../packets/packet-source';
import type { PacketSource } from '../packets/packet-source';
import type { Protocol } from '../packets/packet-table';
import { IS_IDLE } from '../packets/packet-table';

export interface ProtocolChoice {
  readonly protocol: Protocol;
  readonly reason: string;
  readonly runnerUp: Protocol | null;
}

/** How many data characters followed the headers of an M stream. */
interface GroupCounts {
  three: number;
  four: number;
  /** Fourth characters that say something only M3 means: the middle bit. */
  middleFourths: number;
  /** Fourth characters no M3 device sends. */
  wheelFourths: number;
  /** The first fourth characters do not have the middle bit. */
  startsWithPlainFourth: boolean;
}

/** Share of groups with a fourth character that makes it part of the format (house). */
const ALWAYS = 0.8;

/**
 * The protocol the characters fit, or null without undamaged characters outside identifications.
 * @param identities what the device answered to its resets, in order
 */
export function chooseProtocol(
  source: PacketSource,
  framing: Pick<Framing, 'dataBits' | 'parity'>,
  identities: readonly string[],
): ProtocolChoice | null {
  if (framing.parity === 'odd' || framing.parity === 'even') {
    return source.characters.count === 0
      ? null
      : { protocol: 'MM', reason: 'eight data bits with a parity bit', runnerUp: null };
  }
  if (framing.dataBits === 8 && !hasTopBitsSet(source)) return chooseEightBit(source, identities);
  return chooseM(source, identities);
}

/** An M device that sends an eighth bit keeps it at 1, so that it looks like a stop element. */
function hasTopBitsSet(source: PacketSource): boolean {
  const { count, values, errors } = source.characters;
  let checked = 0;
  for (let i = 0; i < count; i++) {
    if (errors[i] !== 0) continue;
    if ((values[i] & 0x80) === 0) return false;
    checked += 1;
  }
  return checked > 0;
}

function chooseEightBit(source: PacketSource, identities: readonly string[]): ProtocolChoice | null {
  if (source.characters.count === 0) return null;
  const left = { five: countOutside(source, 'five-byte'), three: countOutside(source, 'three-byte') };
  if (identities.includes('H')) {
    return { protocol: 'five-byte', reason: 'the device answers H', runnerUp: 'three-byte' };
  }
  const isFive = left.five <= left.three;
  return {
    protocol: isFive ? 'five-byte' : 'three-byte',
    reason: `eight data bits; cut into packets of ${isFive ? 'five' : 'three'} ${Math.min(left.five, left.three)} characters are left over, of ${isFive ? 'three' : 'five'} ${Math.max(left.five, left.three)}`,
    runnerUp: isFive ? 'three-byte' : 'five-byte',
  };
}

function countOutside(source: PacketSource, protocol: Protocol): number {
  const { incidents } = decodePackets(source, protocol, 0, Infinity);
  return incidents.reduce((sum, incident) => sum + incident.characterCount, 0);
}

function chooseM(source: PacketSource, identities: readonly string[]): ProtocolChoice | null {
  const counts = countGroups(source);
  const named =
    identities.find((identity) => /^M[3Z]$/.test(identity)) ?? identities.find((i) => i.startsWith('M'));
  const total = counts.three + counts.four;
  if (total === 0 && named === undefined) return null;
  if (named === 'MZ' && (counts.four > 0 || counts.three < 3)) {
    return { protocol: 'MZ', reason: 'the device answers MZ', runnerUp: 'M3' };
  }
  if (named === 'M3') return { protocol: 'M3', reason: 'the device answers M3', runnerUp: 'M' };
  const hasFourthAlways = counts.four >= 2 && counts.four >= ALWAYS * total;
  if (hasFourthAlways && (counts.wheelFourths > 0 || counts.startsWithPlainFourth)) {
    return {
      protocol: 'MZ',
      reason: `${counts.four} of ${total} packets have four characters, with wheel values or none held`,
      runnerUp: 'M3',
    };
  }
  if (counts.middleFourths > 0) {
    return {
      protocol: 'M3',
      reason: `a fourth character with the middle button follows ${counts.four} of ${total} packets`,
      runnerUp: 'MZ',
    };
  }
  return chooseNullVariant(source, named);
}

/** M, unless packets without movement or change appear as single events: then they mean the middle button. */
function chooseNullVariant(source: PacketSource, named: string | undefined): ProtocolChoice {
  const answer =
    named === undefined ? 'three characters with bit 6 in the first only' : `the device answers ${named}`;
  const nulls = countSingleNulls(source);
  if (nulls.single >= 2 && nulls.repeated === 0) {
    return {
      protocol: 'M-null',
      reason: `${answer}; ${nulls.single} packets without movement or change stand alone, which is how this format reports its middle button`,
      runnerUp: 'M',
    };
  }
  return { protocol: 'M', reason: answer, runnerUp: nulls.single > 0 ? 'M-null' : 'M3' };
}

/** Idle packets that stand alone, and those that follow another within 1.5 packet times (a device that repeats itself). */
function countSingleNulls(source: PacketSource): { single: number; repeated: number } {
  const { packets } = decodePackets(source, 'M', 0, Infinity);
  const { startTicks, endTicks } = source.characters;
  let single = 0;
  let repeated = 0;
  let lastIdle = -Infinity;
  for (let p = 0; p < packets.count; p++) {
    if ((packets.flags[p] & IS_IDLE) === 0) continue;
    const first = packets.firstCharacter[p];
    const packetTicks = 3 * (endTicks[first] - startTicks[first]);
    if (startTicks[first] - lastIdle < 1.5 * packetTicks) repeated += 1;
    else single += 1;
    lastIdle = startTicks[first];
  }
  return { single, repeated };
}

function countGroups(source: PacketSource): GroupCounts {
  const counts: GroupCounts = {
    three: 0,
    four: 0,
    middleFourths: 0,
    wheelFourths: 0,
    startsWithPlainFourth: false,
  };
  const { characters, isIdentification } = source;
  const finder = new ObstacleFinder(source);
  let length = 0;
  let fourth = 0;
  const close = (): void => {
    if (length === 3) counts.three += 1;
    if (length === 4) {
      if (counts.four === 0) counts.startsWithPlainFourth = (fourth & 0x20) === 0;
      counts.four += 1;
      if ((fourth & ~0x33) === 0 && (fourth & 0x20) !== 0) counts.middleFourths += 1;
      if ((fourth & 0x1c) !== 0 || (fourth & 0x0f) === 0x01 || (fourth & 0x0f) === 0x0f)
        counts.wheelFourths += 1;
    }
    length = 0;
  };
  for (let i = 0; i < characters.count; i++) {
    if (finder.before(i) !== undefined) {
      close();
      if (characters.errors[i] !== 0 || isIdentification[i] !== 0) continue;
    }
    const value = characters.values[i] & 0x7f;
    if ((value & 0x40) !== 0) {
      close();
      length = 1;
    } else if (length > 0) {
      length += 1;
      if (length === 4) fourth = value;
    }
  }
  close();
  return counts;
}
