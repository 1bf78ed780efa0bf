import type { Capture, Channel } from '../capture/capture';
import type { LevelTrace } from '../line/level-trace';
import { MARK, UNKNOWN } from '../line/level-trace';
import type { LineRole, Polarity, Thresholds } from '../line/line-map';
import { resolveLine } from '../line/resolve-line';
import type { Protocol } from '../packets/packet-table';
import type { Span } from '../time/ticks';
import { roleOfName } from './channel-names';
import type { FormatTrial } from './choose-framing';
import { tryFormats } from './choose-framing';
import { estimateBitTime, fitBitTime } from './estimate-bit-time';
import type { BitTimeEstimate } from './estimate-bit-time';
import type { CharacterFormat } from './read-line';

/** Edges looked at when channels and polarities are compared; the whole line is read afterwards. */
export const TRIAL_EDGES = 8000;

/** What was stated about the data; everything left out is found. */
export interface DataQuestion {
  readonly capture: Capture;
  readonly ticksPerSecond: number;
  readonly unknownSpans: readonly Span[];
  readonly bitRate?: number;
  readonly formats?: readonly CharacterFormat[];
  readonly protocol?: Protocol;
  readonly polarity?: Polarity;
  readonly thresholds?: Thresholds;
}

/** A channel read as data with one polarity. */
export interface DataTrial {
  readonly channel: Channel;
  readonly polarity: Polarity;
  readonly bitTime: BitTimeEstimate | null;
  /** null where the channel has no characters. */
  readonly best: FormatTrial | null;
  readonly score: number;
}

/** Every channel that may carry data, read in every polarity that fits, best first. */
export function tryDataChannels(
  question: DataQuestion,
  channels: readonly Channel[],
  role: LineRole,
): DataTrial[] {
  const polarities: readonly Polarity[] =
    question.polarity === undefined ? ['line', 'logic'] : [question.polarity];
  const trials = channels
    .filter((channel) => channel.kind === 'analog' || !channel.isTooBusy)
    .flatMap((channel) => polarities.map((polarity) => tryChannel(question, channel, polarity, role)));
  return trials.sort((a, b) => b.score - a.score);
}

function tryChannel(question: DataQuestion, channel: Channel, polarity: Polarity, role: LineRole): DataTrial {
  const { capture, ticksPerSecond, unknownSpans } = question;
  const whole = resolveLine(capture, channel, role, polarity, unknownSpans, question.thresholds).trace;
  const trace = firstEdges(whole, TRIAL_EDGES);
  const bitTime = bitTimeOf(trace, ticksPerSecond, question.bitRate);
  if (bitTime === null || isClock(trace)) {
    return { channel, polarity, bitTime: null, best: null, score: restScore(whole, channel) };
  }
  const [best] = tryFormats(trace, bitTime.bitTicks, ticksPerSecond, question.formats, question.protocol);
  return { channel, polarity, bitTime, best, score: best.quality * weightOf(channel, role, bitTime) };
}

function bitTimeOf(
  trace: LevelTrace,
  ticksPerSecond: number,
  stated: number | undefined,
): BitTimeEstimate | null {
  if (stated === undefined) return estimateBitTime(trace.ticks, ticksPerSecond);
  const fitted = fitBitTime(trace.ticks, ticksPerSecond, stated);
  if (fitted !== null || trace.ticks.length === 0) return fitted;
  return { nominalBitRate: stated, bitTicks: ticksPerSecond / stated, fit: 0, pulses: trace.ticks.length };
}

/** A name is worth half as much again as the same signal without it; another line's name counts against. */
function weightOf(channel: Channel, role: LineRole, bitTime: BitTimeEstimate): number {
  const names = [channel.name, ...channel.aliases].map(roleOfName);
  const byName = names.includes(role) ? 1.5 : names.some((name) => name !== undefined) ? 0.3 : 1;
  return byName * (bitTime.nominalBitRate === 1200 ? 1 : 0.6) * bitTime.fit;
}

/** Without characters: a silent line rests at mark nearly all the time. Never above zero, so that any real data wins. */
function restScore(trace: LevelTrace, channel: Channel): number {
  const isNamed = [channel.name, ...channel.aliases].some((name) => roleOfName(name) === 'data');
  return -1000 + (isNamed ? 100 : 0) + (isKnown(trace) ? 1 : -100) + shareAtMark(trace);
}

/** Share of the record at mark. */
export function shareAtMark(trace: LevelTrace): number {
  let mark = 0;
  let from = 0;
  let level = trace.initialLevel;
  for (let i = 0; i <= trace.ticks.length; i++) {
    const until = i < trace.ticks.length ? trace.ticks[i] : trace.endTicks;
    if (level === MARK) mark += until - from;
    from = until;
    if (i < trace.ticks.length) level = trace.levels[i];
  }
  return trace.endTicks > 0 ? mark / trace.endTicks : Number(level === MARK);
}

/** Whether the level is known at any time. */
export function isKnown(trace: LevelTrace): boolean {
  return trace.initialLevel !== UNKNOWN || trace.levels.some((level) => level !== UNKNOWN);
}

/** Nearly all pulses of one width, one after another, are a clock, whatever characters they would make. */
function isClock(trace: LevelTrace): boolean {
  const { ticks } = trace;
  if (ticks.length < 60) return false;
  const widths = new Float64Array(ticks.length - 1);
  for (let i = 1; i < ticks.length; i++) widths[i - 1] = ticks[i] - ticks[i - 1];
  widths.sort();
  const median = widths[widths.length >> 1];
  let alike = 0;
  for (const width of widths) if (Math.abs(width - median) <= 0.1 * median) alike += 1;
  return alike > 0.97 * widths.length;
}

function firstEdges(trace: LevelTrace, count: number): LevelTrace {
  if (trace.ticks.length <= count) return trace;
  return {
    initialLevel: trace.initialLevel,
    ticks: trace.ticks.subarray(0, count),
    levels: trace.levels.subarray(0, count),
    endTicks: trace.ticks[count],
  };
}
