import type { ByteLog } from '../capture/byte-log';
import type { Capture } from '../capture/capture';
import { CharacterBuilder } from '../characters/character-builder';
import type { CharacterTable } from '../characters/character-table';
import type { Framing } from '../characters/framing';
import { elementsPerCharacter } from '../characters/framing';
import { chooseProtocol } from '../detection/choose-protocol';
import type { ProtocolChoice } from '../detection/choose-protocol';
import { MapError } from '../line/find-channel';
import type { LineMap } from '../line/line-map';
import { decodePackets, NO_PACKETS } from '../packets/decode-packets';
import type { PacketSource } from '../packets/packet-source';
import { ReplyReader } from '../resets/identification';
import { ticksPerSecond } from '../time/time-base';
import type { DecodeOptions } from './decode';
import type { Decoded } from './decoded';

/** Rate that is taken where none is stated, to give characters a length. Source: protocol-facts 5, the M family and most others. */
const USUAL_BIT_RATE = 1200;
/** Pause before an identification, seconds: shorter ones lie inside a report. */
const REST_S = 0.02;

type Format = Pick<Framing, 'dataBits' | 'parity'>;

/**
 * Decodes an adapter's log: its bytes are the characters. There are no lines and no resets, and nothing is known about rate and
 * framing, so that `framing` is null. A character begins at the stamp of its byte; further bytes under one stamp follow at the
 * stated rate, or closer where the next stamp comes sooner.
 * @throws MapError where the map names a channel
 */
export function decodeLog(capture: Capture, log: ByteLog, map: LineMap, options: DecodeOptions): Decoded {
  const named = Object.values(map.lines ?? {}).find((line) => line !== null);
  if (named) throw new MapError(`there is no channel "${named.channel}": a log of bytes has no channels`);
  const perSecond = ticksPerSecond(capture.timeBase);
  const format = options.framing ?? findFormat(log);
  const elements = elementsPerCharacter({ ...format, stopBits: 1 });
  const characterTicks = log.hasTimes ? (elements * perSecond) / (options.bitRate ?? USUAL_BIT_RATE) : 1;
  const characters = toCharacters(log, characterTicks);
  const { isIdentification, identities } = markIdentifications(characters, perSecond, format.dataBits === 8);
  const source: PacketSource = {
    characters,
    isIdentification,
    barriers: new Float64Array(0),
    ticksPerSecond: perSecond,
  };
  const choice = chooseOf(source, format, identities, options);
  const endTicks = Math.max(capture.endTicks, characters.endTicks[characters.count - 1] ?? 0);
  const { packets, incidents } =
    choice === null
      ? { packets: NO_PACKETS, incidents: [] }
      : decodePackets(source, choice.protocol, 0, endTicks);
  const packetOfCharacter = new Int32Array(characters.count).fill(-1);
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    packetOfCharacter.fill(p, first, first + packets.characterCount[p]);
  }
  return {
    // The last character goes on behind its stamp.
    capture: { ...capture, endTicks: Math.ceil(endTicks) },
    map,
    lines: {},
    detections:
      choice === null
        ? []
        : [
            {
              subject: 'protocol',
              chosen: choice.protocol,
              reason: choice.reason,
              runnerUp: choice.runnerUp,
            },
          ],
    // Printed digits are no resolution: a stamp comes after its character, and after whatever held it back.
    resolutionTicks:
      map.resolutionS === undefined
        ? Math.max(capture.unitTicks, characterTicks)
        : map.resolutionS * perSecond,
    framing: null,
    protocol: choice?.protocol ?? null,
    characters,
    glitches: [],
    controlEvents: [],
    resets: [],
    packets,
    incidents,
    packetOfCharacter,
    resetOfCharacter: new Int32Array(characters.count).fill(-1),
  };
}

function chooseOf(
  source: PacketSource,
  format: Format,
  identities: readonly string[],
  options: DecodeOptions,
): ProtocolChoice | null {
  if (options.protocol !== undefined) {
    return { protocol: options.protocol, reason: 'stated', runnerUp: null };
  }
  return source.characters.count === 0 ? null : chooseProtocol(source, format, identities);
}

/** The bytes of the device as characters. */
function toCharacters(log: ByteLog, characterTicks: number): CharacterTable {
  const builder = new CharacterBuilder(log.count);
  const device: number[] = [];
  for (let i = 0; i < log.count; i++) if (log.isFromHost[i] === 0) device.push(i);
  for (let from = 0; from < device.length;) {
    const stamp = log.ticks[device[from]];
    let to = from + 1;
    while (to < device.length && log.ticks[device[to]] === stamp) to += 1;
    const next = to < device.length ? log.ticks[device[to]] : Infinity;
    const step = Math.min(characterTicks, (next - stamp) / (to - from));
    for (let k = from; k < to; k++) {
      const start = stamp + (k - from) * step;
      builder.add(start, start + step, log.values[device[k]], 0, -1);
    }
    from = to;
  }
  return builder.finish();
}

/**
 * Data bits and parity by the values alone. An M device has bit 7 at 0, or at 1 where eight bits were taken; reports in eight bits
 * have it at 1 in their first byte only, and at 0 in all others where a parity bit followed.
 * Source: protocol-facts 5.9, header and data tests.
 */
function findFormat(log: ByteLog): Format {
  let top = 0;
  let count = 0;
  let followed = 0;
  let thirds = 0;
  let lastTop = -Infinity;
  for (let i = 0; i < log.count; i++) {
    if (log.isFromHost[i] !== 0) continue;
    if (log.values[i] >= 0x80) {
      top += 1;
      if (count - lastTop === 3) thirds += 1;
      if (count - lastTop < 3) followed += 1;
      lastTop = count;
    }
    count += 1;
  }
  if (top === 0 || top === count) return { dataBits: 7, parity: 'none' };
  const isSpaced = followed === 0 && top > 1 && thirds >= (top - 1) * 0.8;
  return isSpaced && hasSignBits(log) ? { dataBits: 8, parity: 'odd' } : { dataBits: 8, parity: 'none' };
}

/** First bytes with a bit that only MM sets: its signs. */
function hasSignBits(log: ByteLog): boolean {
  return log.values.some(
    (value, i) => log.isFromHost[i] === 0 && (value & 0xe0) === 0x80 && (value & 0x18) !== 0,
  );
}

/** Identifications by themselves: at the begin, or after a rest. */
function markIdentifications(characters: CharacterTable, perSecond: number, hasEightBits: boolean) {
  const isIdentification = new Uint8Array(characters.count);
  const identities: string[] = [];
  const reader = new ReplyReader(characters, characters.count, perSecond, hasEightBits);
  const rest = REST_S * perSecond;
  for (let i = 0; i < characters.count; i++) {
    const isAfterRest = i === 0 || characters.startTicks[i] - characters.endTicks[i - 1] > rest;
    const found = isAfterRest && (i === 0 || !hasEightBits) ? reader.read(i) : null;
    if (found === null) continue;
    for (const index of found.characters) isIdentification[index] = 1;
    if (found.identity !== null) identities.push(found.identity);
    i = found.characters[found.characters.length - 1];
  }
  return { isIdentification, identities };
}
