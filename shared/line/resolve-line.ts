import type { Capture, Channel } from '../capture/capture';
import type { ResolvedLine } from './resolved-line';
import { suggestThresholds, thresholdChannel } from './analog-trace';
import { digitalTrace } from './digital-trace';
import type { LineRole, Polarity, Thresholds } from './line-map';
import { maskSpans } from './mask-spans';
import type { Span } from '../time/ticks';

/**
 * Reads a channel as a line: volts reduced to levels, polarity applied, nothing known inside the spans taken out.
 * @param thresholds decision levels for analog channels; found from the signal if left out
 */
export function resolveLine(
  capture: Capture,
  channel: Channel,
  role: LineRole,
  polarity: Polarity,
  unknownSpans: readonly Span[],
  thresholds?: Thresholds,
): ResolvedLine {
  if (channel.kind === 'digital') {
    const trace = maskSpans(digitalTrace(channel, role, polarity, capture.endTicks), unknownSpans);
    return { role, channel: channel.name, polarity, thresholds: null, trace };
  }
  const used = thresholds ?? suggestThresholds(channel);
  const reduced = thresholdChannel(channel, used);
  const whole = digitalTrace(reduced.channel, role, polarity, capture.endTicks);
  const masked = maskSpans(whole, unknownSpans);
  const trace = masked === whole ? { ...whole, edgeUncertainty: reduced.edgeUncertainty } : masked;
  return { role, channel: channel.name, polarity, thresholds: used, trace };
}
