import type { PacketTable } from './packet-table';

/** A packet in which a button is down where it was up in the packet before, or the other way round. */
export interface ButtonChange {
  readonly packet: number;
  readonly isDown: boolean;
}

/**
 * Changes of one button as the packets tell them. A reset lets go of every button without a packet: what was held before is no
 * longer known afterwards.
 * @param startOf start of a packet, ticks
 * @param resetTicks instants of RTS OFF→ON, ascending
 */
export function findButtonChanges(
  packets: PacketTable,
  bit: number,
  startOf: (packet: number) => number,
  resetTicks: readonly number[],
): ButtonChange[] {
  const changes: ButtonChange[] = [];
  let before = 0;
  let reset = 0;
  for (let p = 0; p < packets.count; p++) {
    if (reset < resetTicks.length && resetTicks[reset] <= startOf(p)) {
      before = 0;
      while (reset < resetTicks.length && resetTicks[reset] <= startOf(p)) reset += 1;
    }
    const now = (packets.buttons[p] >> bit) & 1;
    if (now !== before) changes.push({ packet: p, isDown: now === 1 });
    before = now;
  }
  return changes;
}
