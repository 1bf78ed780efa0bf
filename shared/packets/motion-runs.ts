import type { CharacterTable } from '../characters/character-table';
import type { PacketTable } from './packet-table';

/** A run of moving packets (a stroke on screen). Packets [first, last], both included. */
export interface MotionRun {
  readonly firstPacket: number;
  readonly lastPacket: number;
  readonly startTicks: number;
  readonly endTicks: number;
  /** Share of the line's capacity in use from the first start to the last start, 0 … 1. */
  readonly lineUse: number;
  /** Packets per second. */
  readonly packetRate: number;
  /** Longest start-to-start, in ticks, and the packet it ends at. */
  readonly longestStep: number;
  readonly longestStepPacket: number;
  readonly dx: number;
  readonly dy: number;
}

/** Source: rules.md 8, motion run. */
const LEAST_PACKETS = 10;
const LONGEST_PAUSE_PACKETS = 4;
const LEAST_MEAN_COUNTS = 3;

/** Runs of at least ten moving packets, start-to-start at most four packet times, three counts a packet on average. */
export function findMotionRuns(
  packets: PacketTable,
  characters: CharacterTable,
  characterTicks: number,
  ticksPerSecond: number,
): MotionRun[] {
  const runs: MotionRun[] = [];
  const startOf = (p: number): number => characters.startTicks[packets.firstCharacter[p]];
  let first = -1;
  let last = -1;
  const close = (): void => {
    if (first >= 0 && last - first + 1 >= LEAST_PACKETS) {
      const run = describe(packets, characters, characterTicks, ticksPerSecond, first, last);
      if (run !== null) runs.push(run);
    }
    first = -1;
  };
  for (let p = 0; p < packets.count; p++) {
    const isMoving = packets.dx[p] !== 0 || packets.dy[p] !== 0;
    if (!isMoving) {
      close();
      continue;
    }
    const longest = LONGEST_PAUSE_PACKETS * packets.characterCount[p] * characterTicks;
    if (first >= 0 && startOf(p) - startOf(last) > longest) close();
    if (first < 0) first = p;
    last = p;
  }
  close();
  return runs;
}

function describe(
  packets: PacketTable,
  characters: CharacterTable,
  characterTicks: number,
  ticksPerSecond: number,
  first: number,
  last: number,
): MotionRun | null {
  const startOf = (p: number): number => characters.startTicks[packets.firstCharacter[p]];
  let counts = 0;
  let used = 0;
  let dx = 0;
  let dy = 0;
  let longestStep = 0;
  let longestStepPacket = first;
  for (let p = first; p <= last; p++) {
    counts += Math.max(Math.abs(packets.dx[p]), Math.abs(packets.dy[p]));
    dx += packets.dx[p];
    dy += packets.dy[p];
    if (p < last) used += packets.characterCount[p] * characterTicks;
    if (p > first && startOf(p) - startOf(p - 1) > longestStep) {
      longestStep = startOf(p) - startOf(p - 1);
      longestStepPacket = p;
    }
  }
  const packetCount = last - first + 1;
  if (counts / packetCount < LEAST_MEAN_COUNTS) return null;
  const span = startOf(last) - startOf(first);
  const lastEnd = characters.endTicks[packets.firstCharacter[last] + packets.characterCount[last] - 1];
  return {
    firstPacket: first,
    lastPacket: last,
    startTicks: startOf(first),
    endTicks: lastEnd,
    lineUse: Math.min(1, used / span),
    packetRate: ((packetCount - 1) * ticksPerSecond) / span,
    longestStep,
    longestStepPacket,
    dx,
    dy,
  };
}
