import type { Capture } from '../capture/capture';
import type { CharacterTable, Glitch } from '../characters/character-table';
import type { Detection } from '../detection/detection';
import type { Framing } from '../characters/framing';
import type { LineMap, LineRole } from '../line/line-map';
import type { ResolvedLine } from '../line/resolved-line';
import type { PacketIncident, PacketTable, Protocol } from '../packets/packet-table';
import type { ControlEvent, Reset } from '../resets/reset';

export type { Detection } from '../detection/detection';
export type { ResolvedLine } from '../line/resolved-line';

/** Everything read out of one capture with one line map; the ground the rules stand on. */
export interface Decoded {
  readonly capture: Capture;
  readonly map: LineMap;
  readonly lines: Partial<Record<LineRole, ResolvedLine>>;
  readonly detections: readonly Detection[];
  /** Resolution T of a time, in ticks: one edge is known to ± T/2, a difference of two to ± T. */
  readonly resolutionTicks: number;
  /** null without any serial data. */
  readonly framing: Framing | null;
  readonly protocol: Protocol | null;
  readonly characters: CharacterTable;
  readonly glitches: readonly Glitch[];
  readonly controlEvents: readonly ControlEvent[];
  readonly resets: readonly Reset[];
  readonly packets: PacketTable;
  readonly incidents: readonly PacketIncident[];
  /** For each character: index of its packet, or −1. */
  readonly packetOfCharacter: Int32Array;
  /** For each character: index of the reset whose identification it is part of, or −1. */
  readonly resetOfCharacter: Int32Array;
}
