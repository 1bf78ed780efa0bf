import type { AnalogChannel, Capture, Channel, DigitalChannel } from '#shared/capture/capture';
import { HIGH, UNKNOWN } from '#shared/capture/capture';
import type { ChannelView } from '#shared/contract/http/mapping';
import { RIBBON_COLUMNS } from '#shared/contract/http/mapping';
import { round } from './decode-figures';

/** A channel as the mapping shows it: what it is, how busy, and its course over the whole capture. */
export function describeChannel(channel: Channel, capture: Capture): ChannelView {
  const head = { name: channel.name, aliases: [...channel.aliases], kind: channel.kind };
  return channel.kind === 'digital'
    ? { ...head, ...describeDigital(channel, capture.endTicks) }
    : { ...head, ...describeAnalog(channel, capture.endTicks) };
}

type Course = Omit<ChannelView, 'name' | 'aliases' | 'kind'>;

function describeDigital(channel: DigitalChannel, endTicks: number): Course {
  const head = { edges: channel.edgeCount, isTooBusy: channel.isTooBusy, lowestV: null, highestV: null };
  if (channel.isTooBusy) return { ...head, shareHigh: null, ribbon: [] };
  const high = new Float64Array(RIBBON_COLUMNS);
  const known = new Float64Array(RIBBON_COLUMNS);
  const width = Math.max(1, endTicks) / RIBBON_COLUMNS;
  const add = (from: number, to: number, level: number): void => {
    if (level === UNKNOWN) return;
    for (let c = Math.floor(from / width); c < RIBBON_COLUMNS && c * width < to; c++) {
      const part = Math.min(to, (c + 1) * width) - Math.max(from, c * width);
      known[c] += part;
      if (level === HIGH) high[c] += part;
    }
  };
  let from = 0;
  let level: number = channel.initialLevel;
  for (let i = 0; i < channel.ticks.length; i++) {
    add(from, channel.ticks[i], level);
    from = channel.ticks[i];
    level = channel.levels[i];
  }
  add(from, endTicks, level);
  const knownTicks = sum(known);
  return {
    ...head,
    shareHigh: knownTicks === 0 ? null : round(sum(high) / knownTicks, 4),
    ribbon: Array.from(high, (ticks, c) => (known[c] === 0 ? -1 : round(ticks / known[c], 2))),
  };
}

function describeAnalog(channel: AnalogChannel, endTicks: number): Course {
  const { values, times } = channel;
  const sums = new Float64Array(RIBBON_COLUMNS);
  const counts = new Float64Array(RIBBON_COLUMNS);
  const width = Math.max(1, endTicks) / RIBBON_COLUMNS;
  let lowest = Infinity;
  let highest = -Infinity;
  for (let i = 0; i < values.length; i++) {
    const value = values[i];
    if (Number.isNaN(value)) continue;
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
    const ticks = times.kind === 'listed' ? times.ticks[i] : times.startTicks + i * times.stepTicks;
    const column = Math.min(RIBBON_COLUMNS - 1, Math.floor(ticks / width));
    sums[column] += value;
    counts[column] += 1;
  }
  const isKnown = highest >= lowest;
  const span = highest - lowest || 1;
  let last = -1;
  const ribbon = Array.from(sums, (total, c) => {
    // A column without a sample shows the value before: files of changes have long pauses.
    if (counts[c] > 0) last = round((total / counts[c] - lowest) / span, 2);
    return last;
  });
  return {
    edges: 0,
    isTooBusy: false,
    shareHigh: null,
    lowestV: isKnown ? lowest : null,
    highestV: isKnown ? highest : null,
    ribbon,
  };
}

function sum(values: Float64Array): number {
  return values.reduce((total, value) => total + value, 0);
}
