import { isControl, isUtf8 } from './text-bytes';

/** Bytes looked at. */
const MOST_LOOKED_AT = 4096;
/** Packets that must be there, and the share of the bytes they must make up behind the first one. */
const LEAST_PACKETS = 2;
const LEAST_SHARE = 0.9;
/** An identification may stand in front of the first packet. Source: protocol-facts 4.1, hosts buffer 256 characters. */
const LONGEST_IDENTIFICATION = 256;

interface PacketShape {
  readonly isHeader: (byte: number) => boolean;
  readonly isData: (byte: number) => boolean;
  readonly dataBytes: number;
  /** One more data byte may follow. */
  readonly hasOptional: boolean;
}

/** Source: protocol-facts 5.9, header and data tests; the M family has bit 7 at 0, or at 1 where a receiver took eight bits. */
const SHAPES: readonly PacketShape[] = [
  { isHeader: (b) => (b & 0xc0) === 0x40, isData: (b) => (b & 0xc0) === 0, dataBytes: 2, hasOptional: true },
  {
    isHeader: (b) => (b & 0xc0) === 0xc0,
    isData: (b) => (b & 0xc0) === 0x80,
    dataBytes: 2,
    hasOptional: true,
  },
  { isHeader: (b) => (b & 0xf8) === 0x80, isData: () => true, dataBytes: 4, hasOptional: false },
  { isHeader: (b) => (b & 0xf8) === 0x80, isData: () => true, dataBytes: 2, hasOptional: false },
  { isHeader: (b) => (b & 0xe0) === 0x80, isData: (b) => b < 0x80, dataBytes: 2, hasOptional: false },
];

/** Whether bytes without any text around them are what a pointing device sends: packets, perhaps behind an identification. */
export function areRawPackets(bytes: Uint8Array): boolean {
  const looked = bytes.subarray(0, MOST_LOOKED_AT);
  // Lines such as `H12` have the shape of packets too.
  if (isText(looked)) return false;
  return SHAPES.some((shape) => fits(looked, shape));
}

function fits(bytes: Uint8Array, shape: PacketShape): boolean {
  let first = 0;
  while (first < bytes.length && first <= LONGEST_IDENTIFICATION && !isPacketAt(bytes, first, shape))
    first += 1;
  let packets = 0;
  let covered = 0;
  for (let i = first; i < bytes.length;) {
    const length = isPacketAt(bytes, i, shape) ? lengthAt(bytes, i, shape) : 0;
    if (length > 0) packets += 1;
    covered += length;
    i += Math.max(1, length);
  }
  return packets >= LEAST_PACKETS && covered >= (bytes.length - first) * LEAST_SHARE;
}

function isPacketAt(bytes: Uint8Array, at: number, { isHeader, isData, dataBytes }: PacketShape): boolean {
  if (at + dataBytes >= bytes.length || !isHeader(bytes[at])) return false;
  for (let i = at + 1; i <= at + dataBytes; i++) if (!isData(bytes[i])) return false;
  return true;
}

function lengthAt(bytes: Uint8Array, at: number, { isData, dataBytes, hasOptional }: PacketShape): number {
  const next = at + 1 + dataBytes;
  return hasOptional && next < bytes.length && isData(bytes[next]) ? dataBytes + 2 : dataBytes + 1;
}

/** Without control characters, and in words, in lines or beyond ASCII. */
function isText(bytes: Uint8Array): boolean {
  // A character of up to four bytes may be cut at the end.
  if (bytes.some(isControl) || !isUtf8(bytes.subarray(0, Math.max(0, bytes.length - 3)))) return false;
  return bytes.some((byte) => byte <= 32 || byte >= 0x80);
}
