import { elementsPerCharacter } from '../characters/framing';
import type { Decoded } from '../decode/decoded';
import { DEFAULT_TIME_ACCURACY_PPM } from '../line/line-map';
import { findMotionRuns } from '../packets/motion-runs';
import { secondsPerTick, ticksPerSecond } from '../time/time-base';
import { countMisses, splitLatencies } from './hsk-counts';
import { countSaturated } from './mov';

/** What a capture adds to the rules that pool over a group. Plain numbers: they may be stored and read again. */
export interface GroupFigures {
  /** Latencies in ms by kind of reset, and the resolution of one. */
  readonly latenciesMs: { readonly powerUp: readonly number[]; readonly powered: readonly number[] };
  readonly resolutionMs: number;
  /** Resets with a whole reply window: silent, and those cut short by RTS OFF. */
  readonly resets: { readonly n: number; readonly silent: number; readonly undecided: number };
  /** Moving packets, and those with an axis at its limit. */
  readonly moving: { readonly n: number; readonly saturated: number };
  /** Motion runs: seconds of characters, seconds from the first to the last start with their bound, and steps between packets. */
  readonly runs: {
    readonly n: number;
    readonly usedS: number;
    readonly spanS: number;
    readonly doubtS: number;
    readonly steps: number;
  };
}

/** The figures of one capture. Source: rules.md 1, Groups. */
export function groupFigures(decoded: Decoded): GroupFigures {
  const tickS = secondsPerTick(decoded.capture.timeBase);
  const latencies = splitLatencies(decoded.resets);
  const toMs = (list: readonly number[]): number[] => list.map((ticks) => ticks * tickS * 1e3);
  return {
    latenciesMs: { powerUp: toMs(latencies.powerUp), powered: toMs(latencies.powered) },
    resolutionMs: decoded.resolutionTicks * tickS * 1e3,
    resets: countMisses(decoded),
    moving: countSaturated(decoded),
    runs: sumRuns(decoded),
  };
}

/** Sums over all motion runs of a capture. */
export function sumRuns(decoded: Decoded): GroupFigures['runs'] {
  const { framing, packets, characters, capture, map } = decoded;
  if (framing === null) return { n: 0, usedS: 0, spanS: 0, doubtS: 0, steps: 0 };
  const perSecond = ticksPerSecond(capture.timeBase);
  const tickS = secondsPerTick(capture.timeBase);
  const accuracy = (map.timeAccuracyPpm ?? DEFAULT_TIME_ACCURACY_PPM) * 1e-6;
  const characterTicks = (elementsPerCharacter(framing) * perSecond) / framing.bitRate;
  const runs = findMotionRuns(packets, characters, characterTicks, perSecond);
  const sums = { n: runs.length, usedS: 0, spanS: 0, doubtS: 0, steps: 0 };
  for (const run of runs) {
    const span = characters.startTicks[packets.firstCharacter[run.lastPacket]] - run.startTicks;
    sums.spanS += span * tickS;
    sums.usedS += run.lineUse * span * tickS;
    sums.doubtS += (span * accuracy + decoded.resolutionTicks) * tickS;
    sums.steps += run.lastPacket - run.firstPacket;
  }
  return sums;
}
