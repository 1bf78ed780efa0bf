import type { Capture } from '../capture/capture';
import { NO_CHARACTERS } from '../characters/character-builder';
import type { CharacterTable } from '../characters/character-table';
import type { Framing } from '../characters/framing';
import { bitsAfterStart, framingName } from '../characters/framing';
import { findStopBits } from '../characters/stop-bits';
import { tryFormats } from '../detection/choose-framing';
import type { FormatTrial } from '../detection/choose-framing';
import { chooseProtocol } from '../detection/choose-protocol';
import type { Detection } from '../detection/detection';
import { STANDARD_BIT_RATES } from '../detection/estimate-bit-time';
import { TRIAL_EDGES } from '../detection/find-data-line';
import type { DataQuestion, DataTrial } from '../detection/find-data-line';
import type { CharacterFormat } from '../detection/read-line';
import type { LevelTrace } from '../line/level-trace';
import { UNKNOWN } from '../line/level-trace';
import type { LineMap, Polarity } from '../line/line-map';
import { mergeSpans } from '../line/mask-spans';
import { decodePackets, NO_PACKETS } from '../packets/decode-packets';
import type { PacketSource } from '../packets/packet-source';
import type { Protocol } from '../packets/packet-table';
import { findControlEvents } from '../resets/control-events';
import { findResets } from '../resets/find-resets';
import type { Reset } from '../resets/reset';
import type { Span } from '../time/ticks';
import { ticksPerSecond, toTicks } from '../time/time-base';
import { decodeLog } from './decode-log';
import type { Decoded } from './decoded';
import { packetSource } from './packet-source';
import { findResolution } from './resolution';
import { resolveLines } from './resolve-lines';

/** What a person states instead of leaving it to be found. */
export interface DecodeOptions {
  readonly protocol?: Protocol;
  readonly bitRate?: number;
  readonly framing?: CharacterFormat;
  /** Of every line whose map does not state one. */
  readonly polarity?: Polarity;
}

/**
 * Decodes a capture: lines → characters → resets → packets. Everything not stated is found from the data; every guess is told in
 * `detections`. What is wrong with the signal is data, never an error.
 * @throws MapError where the map names a channel that is not in the capture
 */
export function decode(capture: Capture, map: LineMap = {}, options: DecodeOptions = {}): Decoded {
  if (capture.log !== null) return decodeLog(capture, capture.log, map, options);
  const perSecond = ticksPerSecond(capture.timeBase);
  const unknownSpans = unknownSpansOf(capture, map);
  const question: DataQuestion = {
    capture,
    ticksPerSecond: perSecond,
    unknownSpans,
    bitRate: options.bitRate,
    formats: options.framing === undefined ? undefined : [{ ...options.framing, stopBits: 1 }],
    protocol: options.protocol,
    polarity: options.polarity,
  };
  const { lines, detections, data } = resolveLines(capture, map, question, unknownSpans);
  const read = lines.data === undefined ? null : readData(lines.data.trace, data, question);
  const characters = read?.line.characters ?? NO_CHARACTERS;
  const rts = lines.rts?.trace ?? null;
  const dtr = lines.dtr?.trace ?? null;
  const resets =
    rts === null
      ? []
      : findResets({
          rts,
          dtr,
          data: lines.data?.trace ?? null,
          characters,
          ticksPerSecond: perSecond,
          endTicks: capture.endTicks,
          hasEightBits: read?.line.format.dataBits === 8,
        });
  const resetOfCharacter = indexIdentifications(characters, resets);
  const source = packetSource(characters, resetOfCharacter, rts, lines.data?.trace ?? null, perSecond);
  const framing =
    read === null || characters.count === 0 ? null : describeFraming(read, characters, options, perSecond);
  const choice = framing === null ? null : protocolOf(source, framing, resets, options.protocol);
  const knownFrom = lines.data === undefined ? 0 : firstKnown(lines.data.trace);
  const { packets, incidents } =
    choice === null
      ? { packets: NO_PACKETS, incidents: [] }
      : decodePackets(source, choice.protocol, knownFrom, capture.endTicks);
  return {
    capture,
    map,
    lines,
    detections: [...detections, ...explain(framing, options, choice)],
    resolutionTicks: findResolution(capture, map, Object.values(lines), perSecond),
    framing,
    protocol: choice?.protocol ?? null,
    characters,
    glitches: read?.line.glitches ?? [],
    controlEvents: findControlEvents(rts, dtr),
    resets,
    packets,
    incidents,
    packetOfCharacter: indexPackets(characters.count, packets),
    resetOfCharacter,
  };
}

/** The whole data line in the format that suits it best; null without a bit time. */
function readData(trace: LevelTrace, trial: DataTrial | null, question: DataQuestion): FormatTrial | null {
  if (trial === null || trial.bitTime === null) return null;
  const isWhole = trial.best !== null && trace.ticks.length <= TRIAL_EDGES;
  if (isWhole) return trial.best;
  const format = trial.best?.line.format;
  const formats = format === undefined ? question.formats : [format];
  return tryFormats(trace, trial.bitTime.bitTicks, question.ticksPerSecond, formats, question.protocol)[0];
}

function describeFraming(
  read: FormatTrial,
  characters: CharacterTable,
  options: DecodeOptions,
  perSecond: number,
): Framing {
  const { format, bitTicks } = read.line;
  const bitRate = perSecond / bitTicks;
  const nominalBitRate = options.bitRate ?? nearestStandardRate(bitRate);
  const stopBits = options.framing?.stopBits ?? findStopBits(characters, bitTicks, bitsAfterStart(format));
  return { bitRate, nominalBitRate, dataBits: format.dataBits, parity: format.parity, stopBits };
}

function nearestStandardRate(bitRate: number): number {
  return STANDARD_BIT_RATES.reduce((best, rate) =>
    Math.abs(Math.log(rate / bitRate)) < Math.abs(Math.log(best / bitRate)) ? rate : best,
  );
}

function protocolOf(
  source: PacketSource,
  framing: Framing,
  resets: readonly Reset[],
  stated: Protocol | undefined,
) {
  if (stated !== undefined) return { protocol: stated, reason: 'stated', runnerUp: null };
  const identities = resets.map((reset) => reset.identity).filter((identity) => identity !== null);
  return chooseProtocol(source, framing, identities);
}

function explain(
  framing: Framing | null,
  options: DecodeOptions,
  choice: { protocol: Protocol; reason: string; runnerUp: Protocol | null } | null,
): Detection[] {
  const detections: Detection[] = [];
  if (framing !== null) {
    detections.push({
      subject: 'bit-rate',
      chosen: String(framing.nominalBitRate),
      reason:
        options.bitRate === undefined
          ? `the pulses are whole multiples of one bit at ${framing.bitRate.toFixed(1)} bit/s`
          : 'stated',
      runnerUp: null,
    });
    detections.push({
      subject: 'framing',
      chosen: framingName(framing),
      reason:
        options.framing === undefined
          ? 'fewest damaged and unexplained characters of the formats tried'
          : 'stated',
      runnerUp: null,
    });
  }
  if (choice !== null) {
    detections.push({
      subject: 'protocol',
      chosen: choice.protocol,
      reason: choice.reason,
      runnerUp: choice.runnerUp,
    });
  }
  return detections;
}

/** Gaps of the recording and what the person excluded. */
function unknownSpansOf(capture: Capture, map: LineMap): Span[] {
  const excluded = (map.excluded ?? []).map((span) => ({
    startTicks: Math.max(0, Math.floor(toTicks(capture.timeBase, span.startS))),
    endTicks: Math.min(capture.endTicks, Math.ceil(toTicks(capture.timeBase, span.endS))),
  }));
  return mergeSpans([...capture.gaps, ...excluded]);
}

function firstKnown(trace: LevelTrace): number {
  if (trace.initialLevel !== UNKNOWN) return 0;
  const index = trace.levels.findIndex((level) => level !== UNKNOWN);
  return index < 0 ? trace.endTicks : trace.ticks[index];
}

function indexIdentifications(characters: CharacterTable, resets: readonly Reset[]): Int32Array {
  const index = new Int32Array(characters.count).fill(-1);
  resets.forEach((reset, r) => {
    for (const character of reset.identification) index[character] = r;
  });
  return index;
}

function indexPackets(characterCount: number, packets: Decoded['packets']): Int32Array {
  const index = new Int32Array(characterCount).fill(-1);
  for (let p = 0; p < packets.count; p++) {
    index.fill(p, packets.firstCharacter[p], packets.firstCharacter[p] + packets.characterCount[p]);
  }
  return index;
}
