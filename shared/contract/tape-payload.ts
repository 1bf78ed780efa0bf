import type { CharacterTable, Glitch } from '../characters/character-table';
import type { Framing } from '../characters/framing';
import type { Decoded } from '../decode/decoded';
import type { LineRole, Polarity } from '../line/line-map';
import type { PacketIncident, PacketTable, Protocol } from '../packets/packet-table';
import type { ControlEvent, Reset } from '../resets/reset';
import type { Span } from '../time/ticks';
import { secondsPerTick, toSeconds } from '../time/time-base';

/** A line of the tape, in its own sense: 0 space or OFF, 1 mark or ON, 2 unknown. */
export interface TapeLine {
  readonly role: LineRole;
  readonly channel: string;
  readonly polarity: Polarity;
  readonly initialLevel: number;
  readonly ticks: Float64Array;
  readonly levels: Uint8Array;
}

/** Everything the tape draws, free of its file. Times in ticks from the begin of the record. */
export interface Tape {
  readonly tickS: number;
  /** The file's own time at tick 0, seconds. */
  readonly originS: number;
  readonly endTicks: number;
  readonly resolutionTicks: number;
  readonly framing: Framing | null;
  readonly protocol: Protocol | null;
  readonly lines: readonly TapeLine[];
  readonly characters: CharacterTable;
  readonly packets: PacketTable;
  readonly packetOfCharacter: Int32Array;
  readonly resetOfCharacter: Int32Array;
  readonly resets: readonly Reset[];
  readonly controlEvents: readonly ControlEvent[];
  readonly glitches: readonly Glitch[];
  readonly incidents: readonly PacketIncident[];
  readonly gaps: readonly Span[];
}

type Column = Float64Array | Int32Array | Int16Array | Int8Array | Uint8Array;

const MAKERS = {
  f8: Float64Array,
  i4: Int32Array,
  i2: Int16Array,
  i1: Int8Array,
  u1: Uint8Array,
} as const;
type Kind = keyof typeof MAKERS;

interface ColumnEntry {
  readonly name: string;
  readonly kind: Kind;
  readonly length: number;
}

/** "LWT1", little-endian. */
const MAGIC = 0x3154574c;
const ALIGNMENT = 8;

/** Packs a decode for the tape: a header in JSON and columns of numbers, little-endian, each on a border of eight bytes. */
export function encodeTape(decoded: Decoded): Uint8Array {
  const { characters, packets, capture } = decoded;
  const columns: [string, Kind, Column][] = [
    ['c.start', 'f8', characters.startTicks],
    ['c.end', 'f8', characters.endTicks],
    ['c.value', 'u1', characters.values],
    ['c.errors', 'u1', characters.errors],
    ['c.edge', 'i4', characters.startEdge],
    ['p.first', 'i4', packets.firstCharacter],
    ['p.count', 'u1', packets.characterCount],
    ['p.dx', 'i2', packets.dx],
    ['p.dy', 'i2', packets.dy],
    ['p.wheel', 'i1', packets.wheel],
    ['p.buttons', 'u1', packets.buttons],
    ['p.flags', 'u1', packets.flags],
    ['packetOf', 'i4', decoded.packetOfCharacter],
    ['resetOf', 'i4', decoded.resetOfCharacter],
  ];
  if (packets.firstStepDx !== undefined && packets.firstStepDy !== undefined) {
    columns.push(['p.stepDx', 'i2', packets.firstStepDx], ['p.stepDy', 'i2', packets.firstStepDy]);
  }
  const lines = Object.values(decoded.lines).map(({ role, channel, polarity, trace }) => {
    columns.push([`l.${role}.ticks`, 'f8', trace.ticks], [`l.${role}.levels`, 'u1', trace.levels]);
    return { role, channel, polarity, initialLevel: trace.initialLevel };
  });
  const header = {
    tickS: secondsPerTick(capture.timeBase),
    originS: toSeconds(capture.timeBase, 0),
    endTicks: capture.endTicks,
    resolutionTicks: decoded.resolutionTicks,
    framing: decoded.framing,
    protocol: decoded.protocol,
    hasWheel: packets.hasWheel,
    lines,
    resets: decoded.resets,
    controlEvents: decoded.controlEvents,
    glitches: decoded.glitches,
    incidents: decoded.incidents.slice(0, 10_000),
    gaps: capture.gaps,
    columns: columns.map(([name, kind, column]): ColumnEntry => ({ name, kind, length: column.length })),
  };
  return assemble(
    header,
    columns.map(([, , column]) => column),
  );
}

function assemble(header: unknown, columns: readonly Column[]): Uint8Array {
  // Only ASCII, so that no text encoder is needed on either side.
  const json = JSON.stringify(header).replace(
    /[\u0080-\uffff]/g,
    (c) => `\\u${c.charCodeAt(0).toString(16).padStart(4, '0')}`,
  );
  let offset = aligned(8 + json.length);
  const starts = columns.map((column) => {
    const start = offset;
    offset = aligned(offset + column.byteLength);
    return start;
  });
  const bytes = new Uint8Array(offset);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, MAGIC, true);
  view.setUint32(4, json.length, true);
  for (let i = 0; i < json.length; i++) bytes[8 + i] = json.charCodeAt(i);
  columns.forEach((column, i) => {
    bytes.set(new Uint8Array(column.buffer, column.byteOffset, column.byteLength), starts[i]);
  });
  return bytes;
}

function aligned(offset: number): number {
  return Math.ceil(offset / ALIGNMENT) * ALIGNMENT;
}

/**
 * Unpacks a tape. The columns look into the given buffer, nothing is copied.
 * @param buffer begins with the payload
 * @throws Error where the buffer is no tape of this version
 */
export function decodeTape(buffer: ArrayBuffer): Tape {
  const view = new DataView(buffer);
  if (buffer.byteLength < 8 || view.getUint32(0, true) !== MAGIC)
    throw new Error('this is no tape of this version');
  const length = view.getUint32(4, true);
  const bytes = new Uint8Array(buffer, 8, length);
  let json = '';
  for (let i = 0; i < length; i += 8192)
    json += String.fromCharCode(...bytes.subarray(i, Math.min(length, i + 8192)));
  const header = JSON.parse(json) as Omit<
    Tape,
    'characters' | 'packets' | 'packetOfCharacter' | 'resetOfCharacter' | 'lines'
  > & {
    hasWheel: boolean;
    lines: Omit<TapeLine, 'ticks' | 'levels'>[];
    columns: ColumnEntry[];
  };
  const columns = new Map<string, Column>();
  let offset = aligned(8 + length);
  for (const { name, kind, length: count } of header.columns) {
    const make = MAKERS[kind];
    columns.set(name, new make(buffer, offset, count));
    offset = aligned(offset + count * make.BYTES_PER_ELEMENT);
  }
  const get = <T extends Column>(name: string): T => columns.get(name) as T;
  const hasSteps = columns.has('p.stepDx');
  const start = get<Float64Array>('c.start');
  return {
    ...header,
    lines: header.lines.map((line) => ({
      ...line,
      ticks: get<Float64Array>(`l.${line.role}.ticks`),
      levels: get<Uint8Array>(`l.${line.role}.levels`),
    })),
    characters: {
      count: start.length,
      startTicks: start,
      endTicks: get<Float64Array>('c.end'),
      values: get<Uint8Array>('c.value'),
      errors: get<Uint8Array>('c.errors'),
      startEdge: get<Int32Array>('c.edge'),
    },
    packets: {
      count: get<Int32Array>('p.first').length,
      firstCharacter: get<Int32Array>('p.first'),
      characterCount: get<Uint8Array>('p.count'),
      dx: get<Int16Array>('p.dx'),
      dy: get<Int16Array>('p.dy'),
      wheel: get<Int8Array>('p.wheel'),
      buttons: get<Uint8Array>('p.buttons'),
      flags: get<Uint8Array>('p.flags'),
      hasWheel: header.hasWheel,
      ...(hasSteps
        ? { firstStepDx: get<Int16Array>('p.stepDx'), firstStepDy: get<Int16Array>('p.stepDy') }
        : {}),
    },
    packetOfCharacter: get<Int32Array>('packetOf'),
    resetOfCharacter: get<Int32Array>('resetOf'),
  };
}
