import { summariseDistortion } from '../characters/edge-distortion';
import { bitsAfterStart, elementsPerCharacter } from '../characters/framing';
import { findMotionRuns } from '../packets/motion-runs';
import { BUTTON_NAMES } from '../packets/packet-table';
import { median } from '../statistics/percentile';
import { secondsPerTick, ticksPerSecond } from '../time/time-base';
import type { Decoded } from './decoded';

/** Key figures of a decode by name, unit in the name; null where the capture does not show them. */
export type Metrics = Record<string, number | null>;

/** Collects the key figures that trends, lists and comparisons use. */
export function measure(decoded: Decoded): Metrics {
  return {
    ...countThings(decoded),
    ...measureReplies(decoded),
    ...measureLine(decoded),
    ...measureMotion(decoded),
  };
}

function countThings(decoded: Decoded): Metrics {
  const { characters, packets, resets, incidents, glitches } = decoded;
  let damaged = 0;
  for (let i = 0; i < characters.count; i++) if (characters.errors[i] !== 0) damaged += 1;
  const presses = Object.fromEntries(
    BUTTON_NAMES.map((name, bit) => [`${name}Presses`, countPresses(decoded, bit)]),
  );
  return {
    characters: characters.count,
    damagedCharacters: damaged,
    packets: packets.count,
    brokenPackets: incidents.filter((incident) => incident.kind === 'cut').length,
    resets: resets.length,
    answeredResets: resets.filter((reset) => reset.replyTicks !== null).length,
    glitches: glitches.length,
    ...presses,
  };
}

function countPresses({ packets }: Decoded, bit: number): number {
  let presses = 0;
  let before = 0;
  for (let p = 0; p < packets.count; p++) {
    const now = (packets.buttons[p] >> bit) & 1;
    if (now > before) presses += 1;
    before = now;
  }
  return presses;
}

function measureReplies(decoded: Decoded): Metrics {
  const tickS = secondsPerTick(decoded.capture.timeBase);
  const latencies = decoded.resets
    .filter((reset) => reset.replyTicks !== null)
    .map((reset) => (reset.replyTicks! - reset.onTicks) * tickS * 1e3)
    .sort((a, b) => a - b);
  return {
    latencyMinMs: latencies[0] ?? null,
    latencyMedianMs: median(latencies) ?? null,
    latencyMaxMs: latencies.at(-1) ?? null,
  };
}

function measureLine(decoded: Decoded): Metrics {
  const { framing, lines, characters, capture } = decoded;
  const trace = lines.data?.trace;
  if (framing === null || trace === undefined) {
    return {
      rateErrorPercent: null,
      grossDistortionPercent: null,
      synchronousDistortionPercent: null,
      biasPercent: null,
      marginPercent: null,
    };
  }
  const perSecond = ticksPerSecond(capture.timeBase);
  const measured = perSecond / framing.bitRate;
  const nominal = perSecond / framing.nominalBitRate;
  const bits = bitsAfterStart(framing);
  const gross = summariseDistortion(trace, characters, measured, nominal, bits);
  const synchronous = summariseDistortion(trace, characters, measured, measured, bits);
  const rateError = 100 * (nominal / measured - 1);
  const worst = (s: typeof gross): number | null =>
    s.transitions === 0 ? null : Math.max(s.worstLate, -s.worstEarly);
  const delta = worst(synchronous);
  return {
    rateErrorPercent: rateError,
    grossDistortionPercent: worst(gross),
    synchronousDistortionPercent: delta,
    biasPercent: synchronous.bias ?? null,
    marginPercent: delta === null ? null : 50 - 6.25 - Math.abs(rateError) * (bits + 1.5) - delta,
  };
}

function measureMotion(decoded: Decoded): Metrics {
  const { framing, packets, characters, capture } = decoded;
  let sumDx = 0;
  let sumDy = 0;
  let path = 0;
  for (let p = 0; p < packets.count; p++) {
    sumDx += packets.dx[p];
    sumDy += packets.dy[p];
    path += Math.hypot(packets.dx[p], packets.dy[p]);
  }
  const perSecond = ticksPerSecond(capture.timeBase);
  const runs =
    framing === null
      ? []
      : findMotionRuns(
          packets,
          characters,
          (elementsPerCharacter(framing) * perSecond) / framing.bitRate,
          perSecond,
        );
  const length = runs.reduce((sum, run) => sum + (run.endTicks - run.startTicks), 0);
  const mean = (of: (run: (typeof runs)[number]) => number): number | null =>
    length === 0
      ? null
      : runs.reduce((sum, run) => sum + of(run) * (run.endTicks - run.startTicks), 0) / length;
  const lineUse = mean((run) => run.lineUse);
  return {
    sumDxCounts: sumDx,
    sumDyCounts: sumDy,
    pathCounts: path,
    strokes: runs.length,
    packetsPerSecond: mean((run) => run.packetRate),
    lineUsePercent: lineUse === null ? null : 100 * lineUse,
  };
}
