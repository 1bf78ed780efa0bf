import type { AnalogChannel } from '../capture/capture';
import type { LineRole } from '../line/line-map';
import type { ResolvedLine } from '../line/resolved-line';
import { VoltageReader } from '../line/voltage-reader';
import type { RuleContext } from './rule-context';

/** A line recorded in volts, on the RS-232 side of any driver. */
export interface AnalogLine {
  readonly line: ResolvedLine;
  readonly channel: AnalogChannel;
  readonly voltage: VoltageReader;
}

const WORDS: Partial<Record<LineRole, string>> = {
  data: 'the data line',
  rts: 'RTS',
  dtr: 'DTR',
  supply: 'the supply',
};

/** The line in volts, or in words what the capture lacks. */
export function analogLine(context: RuleContext, role: LineRole): AnalogLine | string {
  const line = context.decoded.lines[role];
  const name = WORDS[role] ?? role;
  if (line === undefined) return `${name} is not in the capture`;
  const channel = context.decoded.capture.channels.find(
    (c): c is AnalogChannel => c.kind === 'analog' && c.name === line.channel,
  );
  if (channel === undefined || line.thresholds === null) {
    return `${name} is recorded as two levels: record it with an analog channel, 200 000 samples a second or more`;
  }
  if (line.polarity === 'logic') {
    return `the channel of ${name} shows the logic side of a driver: probe the line itself`;
  }
  return { line, channel, voltage: new VoltageReader(channel) };
}
