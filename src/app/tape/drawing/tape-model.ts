import { elementsPerCharacter } from '#shared/characters/framing';
import type { FindingView } from '#shared/contract/http/checks';
import type { Tape, TapeLine } from '#shared/contract/tape-payload';
import type { LineRole } from '#shared/line/line-map';
import { findMotionRuns } from '#shared/packets/motion-runs';
import type { MotionRun } from '#shared/packets/motion-runs';
import type { Span } from '#shared/time/ticks';
import type { FindingPlace } from './finding-places';
import { placeFinding } from './finding-places';
import { findHeldButtons } from './held-buttons';
import type { HeldButton } from './held-buttons';
import { sumMotion } from './motion-sums';
import type { MotionSums } from './motion-sums';
import { sumSpace, sumUsed } from './prefix-sums';
import { findReplies } from './replies';
import type { Reply } from './replies';
import type { StatedSpan } from './stated-spans';
import { measuredBitTicks, nominalBitTicks } from './time-scale';

/** Limits drawn on the tape, of the rulebook the tape is checked against. null where it has none. */
export interface TapeLimits {
  /** Of HSK-1, seconds. */
  readonly replyLimitS: number | null;
  /** Of RPT-1, percent. */
  readonly lineUseLimit: number | null;
  /** Of FRM-8, percent of a bit; taken from a finding of FRM-8 where left out. */
  readonly distortionLimit?: number | null;
  /** Of FRM-2, percent of a bit; taken from a finding of FRM-2 where left out. */
  readonly grossDistortionLimit?: number | null;
}

/** A tape with everything that is worked out once, so that a frame only looks up what is in view. */
export interface TapeModel {
  readonly tape: Tape;
  readonly findings: readonly FindingView[];
  readonly limits: Required<TapeLimits>;
  readonly lines: Partial<Record<LineRole, TapeLine>>;
  /** One bit at the measured and at the nominal rate, ticks. */
  readonly bitTicks: number;
  readonly nominalBitTicks: number;
  /** Elements of a whole character; 0 without characters. */
  readonly elements: number;
  /** Ticks at space before each edge of the data line; empty without one. */
  readonly spaceBefore: Float64Array;
  /** Ticks taken by characters before each. */
  readonly usedBefore: Float64Array;
  readonly packetStarts: Float64Array;
  readonly packetEnds: Float64Array;
  readonly incidentStarts: Float64Array;
  readonly incidentEnds: Float64Array;
  readonly motion: MotionSums;
  readonly runs: readonly MotionRun[];
  /** Where RPT-1 is violated. */
  readonly lowUse: readonly Span[];
  readonly held: readonly HeldButton[];
  readonly replies: readonly Reply[];
  /** What a person states about stretches of the tape. */
  readonly stated: readonly StatedSpan[];
  /** Where each finding stands. */
  readonly places: readonly FindingPlace[];
  /** Indexes of the findings in order of their places, and the ticks of those places. */
  readonly findingOrder: Int32Array;
  readonly findingTicks: Float64Array;
}

/** Builds the model: once for each tape with its findings. Takes time in proportion to edges and characters. */
export function buildTapeModel(
  tape: Tape,
  findings: readonly FindingView[],
  limits: TapeLimits,
  stated: readonly StatedSpan[] = [],
): TapeModel {
  const lines: Partial<Record<LineRole, TapeLine>> = {};
  for (const line of tape.lines) lines[line.role] = line;
  const bitTicks = measuredBitTicks(tape);
  const nominal = nominalBitTicks(tape);
  const elements = tape.framing === null ? 0 : elementsPerCharacter(tape.framing);
  const { packetStarts, packetEnds } = spansOfPackets(tape);
  const runs =
    elements === 0 ? [] : findMotionRuns(tape.packets, tape.characters, elements * bitTicks, 1 / tape.tickS);
  const places = findings.map((finding) => placeFinding(finding, tape, lines.data, bitTicks, nominal));
  const findingOrder = Int32Array.from(findings.keys()).sort((a, b) => places[a].ticks - places[b].ticks);
  return {
    tape,
    findings,
    limits: {
      ...limits,
      distortionLimit: limits.distortionLimit ?? limitOf(findings, 'FRM-8'),
      grossDistortionLimit: limits.grossDistortionLimit ?? limitOf(findings, 'FRM-2'),
    },
    lines,
    bitTicks,
    nominalBitTicks: nominal,
    elements,
    spaceBefore: lines.data === undefined ? new Float64Array(0) : sumSpace(lines.data),
    usedBefore: sumUsed(tape.characters),
    packetStarts,
    packetEnds,
    incidentStarts: Float64Array.from(
      tape.incidents,
      (incident) => tape.characters.startTicks[incident.firstCharacter],
    ),
    incidentEnds: Float64Array.from(
      tape.incidents,
      (incident) => tape.characters.endTicks[incident.firstCharacter + incident.characterCount - 1],
    ),
    motion: sumMotion(tape.packets, packetStarts, runs, elements * bitTicks),
    runs,
    lowUse: findings.filter((finding) => finding.rule === 'RPT-1' && finding.verdict === 'violation'),
    held: findHeldButtons(tape.packets, packetEnds, tape.endTicks),
    replies: findReplies(tape, findings),
    stated,
    places,
    findingOrder,
    findingTicks: Float64Array.from(findingOrder, (index) => places[index].ticks),
  };
}

function limitOf(findings: readonly FindingView[], rule: string): number | null {
  return findings.find((finding) => finding.rule === rule)?.limit ?? null;
}

function spansOfPackets({ packets, characters }: Tape): {
  packetStarts: Float64Array;
  packetEnds: Float64Array;
} {
  const packetStarts = new Float64Array(packets.count);
  const packetEnds = new Float64Array(packets.count);
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    packetStarts[p] = characters.startTicks[first];
    packetEnds[p] = characters.endTicks[first + packets.characterCount[p] - 1];
  }
  return { packetStarts, packetEnds };
}
