import type { PacketSource } from './packet-source';
import { cutReason, ObstacleFinder } from './packet-source';
import { PacketBuilder } from './packet-builder';
import { HAS_RESERVED_BITS, IS_IDLE, LEFT, MIDDLE, RIGHT } from './packet-table';

export type FixedProtocol = 'five-byte' | 'three-byte' | 'MM';

/** A protocol whose packets all have the same number of characters. */
interface FixedFormat {
  readonly length: number;
  isHeader(value: number): boolean;
  isData(value: number): boolean;
}

/** Source: protocol-facts 5.5–5.7 and 5.9. */
const FORMATS: Record<FixedProtocol, FixedFormat> = {
  'five-byte': { length: 5, isHeader: (value) => (value & 0xf8) === 0x80, isData: () => true },
  'three-byte': { length: 3, isHeader: (value) => (value & 0xf8) === 0x80, isData: () => true },
  MM: { length: 3, isHeader: (value) => (value & 0xe0) === 0x80, isData: (value) => (value & 0x80) === 0 },
};

/** A character left over costs 1; a pause inside a packet half of that, so that pauses draw the borders (house). */
const PAUSE_COST = 0.5;
/** A pause inside a packet worth the name, as a share of a character (house). */
const PAUSE_SHARE = 0.6;

/**
 * Packets of fixed length whose data may look like a header: of all ways to cut a stretch of characters into packets the one is
 * taken that leaves the fewest characters over and the fewest pauses inside packets; the earliest packets of equals.
 */
export function decodeFixedLength(source: PacketSource, protocol: FixedProtocol): PacketBuilder {
  const format = FORMATS[protocol];
  const packets = new PacketBuilder(
    Math.ceil(source.characters.count / format.length),
    false,
    protocol === 'five-byte',
  );
  let buttons = 0;
  for (const stretch of stretches(source)) {
    const isStart = cutIntoPackets(source, stretch.from, stretch.to, format);
    let i = stretch.from;
    while (i < stretch.to) {
      if (isStart[i - stretch.from] === 1) {
        buttons = addPacket(packets, source, i, protocol, buttons);
        i += format.length;
        continue;
      }
      const end = nextStart(isStart, i - stretch.from) + stretch.from;
      reportLeftOver(packets, source, format, i, end, end === stretch.to ? stretch.endedBy : undefined);
      i = end;
    }
  }
  return packets;
}

interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly endedBy: string;
}

/** Runs of undamaged characters that nothing interrupts. */
function* stretches(source: PacketSource): Generator<Stretch> {
  const { characters, isIdentification } = source;
  const finder = new ObstacleFinder(source);
  let from = 0;
  for (let i = 0; i < characters.count; i++) {
    const obstacle = finder.before(i);
    if (obstacle === undefined) continue;
    if (i > from) yield { from, to: i, endedBy: obstacle };
    from = characters.errors[i] !== 0 || isIdentification[i] !== 0 ? i + 1 : i;
  }
  if (characters.count > from) yield { from, to: characters.count, endedBy: 'end' };
}

/** 1 where a packet begins, by the cheapest cut of characters [from, to); computed from the end. */
function cutIntoPackets(source: PacketSource, from: number, to: number, format: FixedFormat): Uint8Array {
  const { values, startTicks, endTicks } = source.characters;
  const n = to - from;
  const cost = new Float64Array(n + 1);
  const isStart = new Uint8Array(n);
  for (let i = n - 1; i >= 0; i--) {
    const at = from + i;
    const skip = 1 + cost[i + 1];
    cost[i] = skip;
    if (i + format.length > n || !format.isHeader(values[at])) continue;
    let packet = cost[i + format.length];
    for (let k = 1; k < format.length && packet <= skip; k++) {
      if (!format.isData(values[at + k])) packet = Infinity;
      const pause = startTicks[at + k] - endTicks[at + k - 1];
      if (pause > PAUSE_SHARE * (endTicks[at] - startTicks[at])) packet += PAUSE_COST;
    }
    if (packet <= skip) {
      cost[i] = packet;
      isStart[i] = 1;
    }
  }
  return isStart;
}

function nextStart(isStart: Uint8Array, after: number): number {
  let i = after + 1;
  while (i < isStart.length && isStart[i] === 0) i += 1;
  return i;
}

/** Characters between packets: a packet cut short where they begin with a header, else orphans. */
function reportLeftOver(
  packets: PacketBuilder,
  source: PacketSource,
  format: FixedFormat,
  from: number,
  to: number,
  endedBy: string | undefined,
): void {
  const { values } = source.characters;
  let header = from;
  while (header < to && !format.isHeader(values[header])) header += 1;
  if (header > from) {
    packets.incidents.push({
      kind: 'orphan',
      firstCharacter: from,
      characterCount: header - from,
      reason: 'characters where a header is due',
      isAtEdge: false,
    });
  }
  if (header >= to) return;
  const have = Math.min(to - header, format.length - 1);
  const reason =
    endedBy === 'end'
      ? 'the record ends'
      : endedBy === undefined
        ? `the next header came after ${have} of ${format.length} characters`
        : cutReason(endedBy as Parameters<typeof cutReason>[0], have, format.length);
  packets.incidents.push({
    kind: 'cut',
    firstCharacter: header,
    characterCount: have,
    reason,
    isAtEdge: endedBy === 'end',
  });
  if (header + have < to) reportLeftOver(packets, source, format, header + have, to, endedBy);
}

function addPacket(
  packets: PacketBuilder,
  source: PacketSource,
  first: number,
  protocol: FixedProtocol,
  before: number,
): number {
  const { values } = source.characters;
  const header = values[first];
  const signed = (i: number): number => (values[first + i] << 24) >> 24;
  let buttons: number;
  let dx: number;
  let dy: number;
  let flags = 0;
  if (protocol === 'MM') {
    // Sign bit 1 is positive: right for X, up for Y. Source: protocol-facts 5.7 (the drivers; mouse(4) says the opposite).
    dx = (header & 0x10) !== 0 ? values[first + 1] : -values[first + 1];
    dy = (header & 0x08) !== 0 ? -values[first + 2] : values[first + 2];
    buttons = buttonBits(header & 7);
  } else {
    dx = signed(1);
    dy = -signed(2);
    buttons = buttonBits(~header & 7);
  }
  const firstDx = dx;
  const firstDy = dy;
  if (protocol === 'five-byte') {
    dx += signed(3);
    dy -= signed(4);
  }
  if (dx === 0 && dy === 0 && firstDx === 0 && firstDy === 0 && buttons === before) flags |= IS_IDLE;
  if (protocol === 'MM' && (header & 0x60) !== 0) flags |= HAS_RESERVED_BITS;
  // −0 would show as a difference in comparisons.
  packets.add(first, FORMATS[protocol].length, dx + 0, dy + 0, 0, buttons, flags);
  if (protocol === 'five-byte') packets.setFirstStep(firstDx + 0, firstDy + 0);
  return buttons;
}

/** Bits 2, 1, 0 = left, middle, right. */
function buttonBits(bits: number): number {
  return ((bits & 4) !== 0 ? LEFT : 0) | ((bits & 2) !== 0 ? MIDDLE : 0) | ((bits & 1) !== 0 ? RIGHT : 0);
}
