import type { Capture } from '#shared/capture/capture';
import type { LinesView, SuggestionView } from '#shared/contract/http/mapping';
import type { Decoded } from '#shared/decode/decoded';
import type { LineRole } from '#shared/line/line-map';
import { LINE_ROLES } from '#shared/line/line-map';
import { secondsPerTick, toSeconds } from '#shared/time/time-base';
import { describeChannel } from './channel-ribbon';
import { describePreview } from './describe-preview';

const MOST_CHANNELS = 500;
const MOST_DEFECTS = 50;

/** All a person needs to map the lines of a capture; `decoded` with everything left to be found. */
export function describeLines(decoded: Decoded): Omit<LinesView, 'presets'> {
  const { capture } = decoded;
  const tickS = secondsPerTick(capture.timeBase);
  return {
    format: capture.format,
    layout: capture.layout,
    startS: toSeconds(capture.timeBase, 0),
    endS: toSeconds(capture.timeBase, capture.endTicks),
    resolutionS: decoded.resolutionTicks * tickS,
    sampleIntervalS: capture.sampleIntervalTicks === null ? null : capture.sampleIntervalTicks * tickS,
    channels: capture.channels.slice(0, MOST_CHANNELS).map((channel) => describeChannel(channel, capture)),
    channelCount: capture.channels.length,
    suggestions: LINE_ROLES.map((role) => suggest(decoded, role)),
    defects: capture.defects.slice(0, MOST_DEFECTS).map((defect) => ({ ...defect })),
    preview: describePreview(decoded),
  };
}

function suggest({ lines, detections }: Decoded, role: LineRole): SuggestionView {
  const line = lines[role];
  const of = (subject: 'line' | 'polarity') =>
    detections.find((detection) => detection.subject === subject && detection.role === role);
  return {
    role,
    channel: line?.channel ?? null,
    polarity: line?.polarity ?? null,
    reason: of('line')?.reason ?? (line === undefined ? 'no channel fits' : 'the only channel that fits'),
    polarityReason: of('polarity')?.reason ?? null,
    runnerUp: of('line')?.runnerUp ?? null,
  };
}

/** Names and aliases of all channels: presets recognise a bench by them. */
export function namesOf({ channels }: Capture): string[] {
  return channels.flatMap(({ name, aliases }) => [name, ...aliases]);
}
