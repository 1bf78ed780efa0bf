import type { DigitalChannel } from '../capture/capture';
import { UNKNOWN } from '../capture/capture';
import type { Ticks } from '../time/ticks';
import type { LevelTrace } from './level-trace';
import type { LineRole, Polarity } from './line-map';

/** Roles whose ribbon is made of characters: their 1 is mark. All others are ON or OFF. */
export function isDataRole(role: LineRole): boolean {
  return role === 'data' || role === 'txd';
}

/**
 * Whether a high level of the channel is a 0 of the line's own sense. On the line a positive voltage is space (0) for data
 * and ON (1) for control; the logic side of an inverting driver is the opposite. Source: protocol-facts 1.3, from memory of
 * TIA-232-F and V.28.
 */
function isInverted(role: LineRole, polarity: Polarity): boolean {
  return isDataRole(role) ? polarity === 'line' : polarity === 'logic';
}

/** A digital channel in the sense of the line. The ticks are shared with the channel, not copied. */
export function digitalTrace(
  channel: DigitalChannel,
  role: LineRole,
  polarity: Polarity,
  endTicks: Ticks,
): LevelTrace {
  if (!isInverted(role, polarity)) {
    return { initialLevel: channel.initialLevel, ticks: channel.ticks, levels: channel.levels, endTicks };
  }
  const levels = new Uint8Array(channel.levels.length);
  for (let i = 0; i < levels.length; i++) levels[i] = invert(channel.levels[i]);
  return { initialLevel: invert(channel.initialLevel), ticks: channel.ticks, levels, endTicks };
}

function invert(level: number): number {
  return level === UNKNOWN ? UNKNOWN : 1 - level;
}
