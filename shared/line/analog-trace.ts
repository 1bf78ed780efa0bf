import type { AnalogChannel, DigitalChannel } from '../capture/capture';
import { HIGH, LOW, UNKNOWN } from '../capture/capture';
import type { Thresholds } from './line-map';

/** A swing below this is noise on a resting line, in volts (house). */
const LEAST_SWING_V = 1;
/** A resting line above this counts as high: receivers switch between 0.75 and 2.35 V (protocol-facts 1.1). */
const RESTING_THRESHOLD_V = 1.5;
/** Half the hysteresis as a share of the swing (house): the decision falls at the middle, noise of a tenth does not retrigger. */
const HYSTERESIS_SHARE = 0.15;

/** The two levels a channel stands at, and the samples at each. */
interface Clusters {
  readonly low: number;
  readonly high: number;
}

/**
 * Decision levels fitting the signal: the middle between its two levels, plus and minus 15 % of the swing. A channel that rests
 * gets the threshold of a line receiver.
 */
export function suggestThresholds(channel: AnalogChannel): Thresholds {
  const clusters = findLevels(channel.values);
  if (clusters === null || clusters.high - clusters.low < LEAST_SWING_V) {
    return { high: RESTING_THRESHOLD_V, low: RESTING_THRESHOLD_V };
  }
  const middle = (clusters.high + clusters.low) / 2;
  const half = (clusters.high - clusters.low) * HYSTERESIS_SHARE;
  return { high: middle + half, low: middle - half };
}

/** Means of the samples above and below the middle; outliers of fewer than three samples are left out, at most four times. */
function findLevels(values: Float32Array): Clusters | null {
  let floor = -Infinity;
  let ceiling = Infinity;
  for (let attempt = 0; attempt < 4; attempt++) {
    const [min, max] = range(values, floor, ceiling);
    if (!(max >= min)) return null;
    const middle = (min + max) / 2;
    let lowSum = 0;
    let lowCount = 0;
    let highSum = 0;
    let highCount = 0;
    for (const value of values) {
      if (!(value >= floor && value <= ceiling)) continue;
      if (value <= middle) {
        lowSum += value;
        lowCount += 1;
      } else {
        highSum += value;
        highCount += 1;
      }
    }
    if (highCount === 0 || (lowCount >= 3 && highCount >= 3)) {
      return { low: lowSum / lowCount, high: highCount === 0 ? lowSum / lowCount : highSum / highCount };
    }
    if (highCount < 3) ceiling = middle;
    else floor = middle;
  }
  return null;
}

function range(values: Float32Array, floor: number, ceiling: number): [number, number] {
  let min = Infinity;
  let max = -Infinity;
  for (const value of values) {
    if (!(value >= floor && value <= ceiling)) continue;
    if (value < min) min = value;
    if (value > max) max = value;
  }
  return [min, max];
}

/** A channel of volts reduced to two levels, edges interpolated to the crossing of the middle between the thresholds. */
export interface ThresholdedChannel {
  readonly channel: DigitalChannel;
  /** Worst-case error of each edge, in ticks. Source: rules.md 1, uncertainty of analog edges. */
  readonly edgeUncertainty: Float32Array;
}

/** Reduces volts to levels with hysteresis. Samples that are not numbers are unknown. */
export function thresholdChannel(channel: AnalogChannel, thresholds: Thresholds): ThresholdedChannel {
  const { values, times } = channel;
  const count = values.length;
  const at = (i: number): number =>
    times.kind === 'uniform' ? times.startTicks + i * times.stepTicks : times.ticks[i];
  const middle = (thresholds.high + thresholds.low) / 2;
  const noise = estimateNoise(values, thresholds);
  const ticks: number[] = [];
  const levels: number[] = [];
  const uncertainty: number[] = [];
  let initialLevel: 0 | 1 | 2 = UNKNOWN;
  let level: number = UNKNOWN;
  for (let i = 0; i < count; i++) {
    const next = levelOf(values[i], level, thresholds, middle);
    if (next === level) continue;
    if (i === 0) {
      initialLevel = next as 0 | 1 | 2;
      level = next;
      continue;
    }
    let when = at(i);
    let doubt = 0;
    if (next !== UNKNOWN && level !== UNKNOWN && !channel.isStepped) {
      // The crossing of the middle lies at or before the sample that passed the outer threshold.
      let j = i;
      while (j > 1 && isBeyond(values[j - 1], middle, next)) j -= 1;
      const step = values[j] - values[j - 1];
      const interval = at(j) - at(j - 1);
      const part = step === 0 ? 1 : Math.min(1, Math.max(0, (middle - values[j - 1]) / step));
      when = at(j - 1) + part * interval;
      doubt = step === 0 ? interval / 2 : Math.min(interval / 2, (interval * noise) / Math.abs(step));
    }
    const last = ticks.length === 0 ? -Infinity : ticks[ticks.length - 1];
    if (when <= last) when = last + 1e-6;
    ticks.push(when);
    levels.push(next);
    uncertainty.push(doubt);
    level = next;
  }
  return {
    channel: {
      kind: 'digital',
      name: channel.name,
      aliases: channel.aliases,
      initialLevel,
      ticks: Float64Array.from(ticks),
      levels: Uint8Array.from(levels),
      edgeCount: ticks.length,
      isTooBusy: false,
    },
    edgeUncertainty: Float32Array.from(uncertainty),
  };
}

function levelOf(value: number, level: number, thresholds: Thresholds, middle: number): number {
  if (Number.isNaN(value)) return UNKNOWN;
  if (value >= thresholds.high) return HIGH;
  if (value < thresholds.low) return LOW;
  if (level !== UNKNOWN) return level;
  return value >= middle ? HIGH : LOW;
}

function isBeyond(value: number, middle: number, level: number): boolean {
  return level === HIGH ? value >= middle : value < middle;
}

/** Typical sample-to-sample scatter away from the thresholds, in volts: median absolute step ÷ √2 × 1.5, over at most 4096 pairs. */
export function estimateNoise(values: Float32Array, thresholds: Thresholds): number {
  const steps: number[] = [];
  const stride = Math.max(1, Math.floor(values.length / 4096));
  for (let i = stride; i < values.length; i += stride) {
    const a = values[i - 1];
    const b = values[i];
    const sameSide =
      (a > thresholds.high && b > thresholds.high) || (a < thresholds.low && b < thresholds.low);
    if (sameSide) steps.push(Math.abs(b - a));
  }
  if (steps.length === 0) return 0;
  steps.sort((x, y) => x - y);
  return (steps[steps.length >> 1] / Math.SQRT2) * 1.4826;
}
