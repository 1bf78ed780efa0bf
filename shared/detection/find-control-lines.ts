import type { Capture, Channel } from '../capture/capture';
import type { CharacterTable } from '../characters/character-table';
import { levelAt } from '../line/level-at';
import { countUpTo } from '../time/sorted-search';
import type { LevelTrace } from '../line/level-trace';
import { OFF, ON } from '../line/level-trace';
import type { LineRole, Polarity, Thresholds } from '../line/line-map';
import { resolveLine } from '../line/resolve-line';
import { REPLY_WINDOW_S } from '../resets/find-resets';
import type { Span } from '../time/ticks';
import { isNamedActiveLow, roleOfName, scopeOf } from './channel-names';
import { isKnown } from './find-data-line';

export interface ControlQuestion {
  readonly capture: Capture;
  readonly ticksPerSecond: number;
  readonly unknownSpans: readonly Span[];
  readonly characters: CharacterTable;
  /** Polarity of the data line: control lines of one bench are mostly tapped at the same side. */
  readonly dataPolarity: Polarity;
  readonly dataChannel: string | null;
}

/** A channel read as a control line with one polarity. */
export interface ControlTrial {
  readonly channel: Channel;
  readonly polarity: Polarity;
  readonly evidence: ControlEvidence;
  readonly score: number;
  readonly reason: string;
}

export interface ControlEvidence {
  /** OFF→ON changes, and those a character follows within the reply window. */
  readonly raises: number;
  readonly answered: number;
  /** Answered by `M` as the first character. */
  readonly answeredByM: number;
  /** Share of the characters that start while the line is ON. */
  readonly shareOn: number;
  readonly edges: number;
}

/** A device is silent while RTS is OFF and unpowered without DTR: an unnamed line must be ON for this share of its characters (house). */
const LEAST_SHARE_ON = 0.9;
/** More changes than this are no control line of a pointing device (house). */
const MOST_EDGES = 20_000;

/** Reads a channel as a control line; null where it can't be one. */
export function tryControl(
  question: ControlQuestion,
  channel: Channel,
  role: 'rts' | 'dtr',
  stated: Polarity | undefined,
  thresholds?: Thresholds,
): ControlTrial | null {
  if (channel.kind === 'digital' && channel.isTooBusy) return null;
  const read = (polarity: Polarity) =>
    resolveLine(question.capture, channel, role, polarity, question.unknownSpans, thresholds).trace;
  const asLine = read('line');
  if (!isKnown(asLine) || asLine.ticks.length > MOST_EDGES) return null;
  const byPolarity = {
    line: gatherEvidence(question, asLine),
    logic: gatherEvidence(question, read('logic')),
  };
  const polarity = stated ?? choosePolarity(question, channel, byPolarity);
  const evidence = byPolarity[polarity];
  const { score, reason } = scoreControl(question, channel, role, evidence);
  return { channel, polarity, evidence, score, reason };
}

/** The channels that may be the line, best first. Channels that only rest count where their name says so. */
export function tryControlChannels(
  question: ControlQuestion,
  channels: readonly Channel[],
  role: 'rts' | 'dtr',
  stated: Polarity | undefined,
): ControlTrial[] {
  return channels
    .map((channel) => tryControl(question, channel, role, stated))
    .filter((trial) => trial !== null)
    .filter((trial) => trial.score > 0)
    .sort((a, b) => b.score - a.score);
}

function choosePolarity(
  question: ControlQuestion,
  channel: Channel,
  evidence: Record<Polarity, ControlEvidence>,
): Polarity {
  const weight = (e: ControlEvidence): number =>
    e.edges === 0
      ? 0
      : e.shareOn + (e.raises === 0 ? 0 : e.answered / e.raises) + (e.answeredByM > 0 ? 1 : 0);
  const difference = weight(evidence.line) - weight(evidence.logic);
  if (Math.abs(difference) > 0.2) return difference > 0 ? 'line' : 'logic';
  if (isNamedActiveLow(channel.name)) return 'logic';
  return question.dataPolarity;
}

function gatherEvidence(question: ControlQuestion, trace: LevelTrace): ControlEvidence {
  const { characters, ticksPerSecond } = question;
  const window = REPLY_WINDOW_S * ticksPerSecond;
  let raises = 0;
  let answered = 0;
  let answeredByM = 0;
  for (let i = 0; i < trace.ticks.length; i++) {
    const before = i === 0 ? trace.initialLevel : trace.levels[i - 1];
    if (trace.levels[i] !== ON || before !== OFF) continue;
    raises += 1;
    const next = countUpTo(characters.startTicks, trace.ticks[i]);
    if (next >= characters.count || characters.startTicks[next] - trace.ticks[i] > window) continue;
    answered += 1;
    if ((characters.values[next] & 0x7f) === 0x4d) answeredByM += 1;
  }
  const stride = Math.max(1, Math.floor(characters.count / 2000));
  let on = 0;
  let looked = 0;
  for (let c = 0; c < characters.count; c += stride) {
    looked += 1;
    if (levelAt(trace, characters.startTicks[c]) === ON) on += 1;
  }
  return {
    raises,
    answered,
    answeredByM,
    shareOn: looked === 0 ? 0.5 : on / looked,
    edges: trace.ticks.length,
  };
}

function scoreControl(
  question: ControlQuestion,
  channel: Channel,
  role: LineRole,
  evidence: ControlEvidence,
): { score: number; reason: string } {
  const { raises, answered, answeredByM, shareOn, edges } = evidence;
  const names = [channel.name, ...channel.aliases].map(roleOfName);
  const isNamed = names.includes(role);
  const isOther = !isNamed && names.some((name) => name !== undefined);
  let score = isNamed ? 6 : isOther ? -6 : 0;
  const why: string[] = isNamed ? ['its name says so'] : [];
  if (role === 'rts' && raises > 0) {
    score += (2 * answeredByM + answered) / raises;
    if (answered > 0) why.push(`${answered} of ${raises} times it goes ON a character follows within 200 ms`);
  }
  if (role === 'dtr' && raises > 0 && !isNamed) score += 0.5;
  if (edges > 0 || isNamed) {
    score += shareOn - 0.5;
    if (shareOn > 0.5) why.push('it is ON while characters are sent');
  }
  // A line nobody names must at least do something.
  const answersM = raises > 0 && answeredByM >= raises / 2;
  const isSeenWorking = shareOn >= LEAST_SHARE_ON || answersM;
  if (!isNamed && (edges === 0 || raises === 0 || !isSeenWorking)) score = -1;
  if (question.dataChannel !== null && scopeOf(channel.name) === scopeOf(question.dataChannel)) score += 0.1;
  if (!isNamed && edges > Math.max(200, question.characters.count)) score = -1;
  return { score, reason: why.length === 0 ? 'it changes seldom' : why.join('; ') };
}
