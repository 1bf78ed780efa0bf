import type { PacketTable } from '#shared/packets/packet-table';
import { BUTTON_NAMES, FOURTH } from '#shared/packets/packet-table';
import type { ButtonName } from '#shared/packets/packet-table';

/** The spans during which a button was held, as told by the packets: from the end of one to the end of another. */
export interface HeldButton {
  readonly name: ButtonName;
  readonly letter: string;
  readonly startTicks: Float64Array;
  readonly endTicks: Float64Array;
  /** The packet that told of each press. */
  readonly packets: Int32Array;
}

const LETTERS: Readonly<Record<ButtonName, string>> = { left: 'L', middle: 'M', right: 'R', fourth: '4' };

/** Left, middle and right; the fourth only where it was ever down. */
export function findHeldButtons(
  packets: PacketTable,
  packetEnds: Float64Array,
  endTicks: number,
): HeldButton[] {
  return BUTTON_NAMES.filter(
    (name) => name !== 'fourth' || packets.buttons.some((state) => (state & FOURTH) !== 0),
  ).map((name) => spansOf(name, packets, packetEnds, endTicks));
}

function spansOf(
  name: ButtonName,
  packets: PacketTable,
  packetEnds: Float64Array,
  endTicks: number,
): HeldButton {
  const mask = 1 << BUTTON_NAMES.indexOf(name);
  const starts: number[] = [];
  const ends: number[] = [];
  const pressedBy: number[] = [];
  for (let p = 0; p < packets.count; p++) {
    const isDown = (packets.buttons[p] & mask) !== 0;
    const isOpen = starts.length > ends.length;
    if (isDown && !isOpen) {
      starts.push(packetEnds[p]);
      pressedBy.push(p);
    } else if (!isDown && isOpen) ends.push(packetEnds[p]);
  }
  if (starts.length > ends.length) ends.push(endTicks);
  return {
    name,
    letter: LETTERS[name],
    startTicks: Float64Array.from(starts),
    endTicks: Float64Array.from(ends),
    packets: Int32Array.from(pressedBy),
  };
}
