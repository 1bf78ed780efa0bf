import type { MotionRun } from '#shared/packets/motion-runs';
import type { PacketTable } from '#shared/packets/packet-table';
import { sumColumn } from './prefix-sums';

/** Sums over the packets before each one; one value more than there are packets. */
export interface MotionSums {
  readonly dx: Float64Array;
  readonly dy: Float64Array;
  /** Ticks taken by the packet, and from its start to the next one's; both only between two packets of one run. */
  readonly used: Float64Array;
  readonly span: Float64Array;
  /** A vector that hardly any packet exceeds, in counts: scales sticks and arrows the same everywhere on the tape. */
  readonly largestUsual: number;
}

/** Share of the packets that may be longer than `largestUsual`. */
const USUAL_SHARE = 0.98;

/** @param characterTicks length of a character at the measured rate */
export function sumMotion(
  packets: PacketTable,
  starts: Float64Array,
  runs: readonly MotionRun[],
  characterTicks: number,
): MotionSums {
  const used = new Float64Array(packets.count + 1);
  const span = new Float64Array(packets.count + 1);
  let run = 0;
  for (let p = 0; p < packets.count; p++) {
    while (run < runs.length && runs[run].lastPacket <= p) run++;
    const isInside = run < runs.length && runs[run].firstPacket <= p;
    used[p + 1] = used[p] + (isInside ? packets.characterCount[p] * characterTicks : 0);
    span[p + 1] = span[p] + (isInside ? starts[p + 1] - starts[p] : 0);
  }
  return {
    dx: sumColumn(packets.dx, packets.count),
    dy: sumColumn(packets.dy, packets.count),
    used,
    span,
    largestUsual: usualLength(packets),
  };
}

function usualLength(packets: PacketTable): number {
  const lengths = new Float64Array(packets.count);
  let moving = 0;
  for (let p = 0; p < packets.count; p++) {
    const length = Math.hypot(packets.dx[p], packets.dy[p]);
    if (length > 0) lengths[moving++] = length;
  }
  if (moving === 0) return 1;
  const sorted = lengths.subarray(0, moving).sort();
  return Math.max(1, sorted[Math.min(moving - 1, Math.floor(moving * USUAL_SHARE))]);
}
