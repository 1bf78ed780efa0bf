import type { Channel } from '../capture/capture';

/** What a person asked for is not in the capture, or contradicts it. The only error decoding throws; message in plain words. */
export class MapError extends Error {
  override readonly name = 'MapError';
}

/**
 * The channel a person means: by its whole name, by an alias, or by any ending that fits one channel only.
 * @throws MapError that lists the channels there are, or the ones the ending fits
 */
export function findChannel(channels: readonly Channel[], name: string): Channel {
  const exact = channels.find((channel) => channel.name === name || channel.aliases.includes(name));
  if (exact !== undefined) return exact;
  const fitting = channels.filter((channel) =>
    [channel.name, ...channel.aliases].some((n) => n.endsWith(name)),
  );
  if (fitting.length === 1) return fitting[0];
  if (fitting.length > 1) {
    throw new MapError(`the channel name "${name}" fits ${fitting.length} channels: ${listNames(fitting)}`);
  }
  throw new MapError(`there is no channel "${name}"; the capture has ${listNames(channels)}`);
}

function listNames(channels: readonly Channel[]): string {
  const shown = channels.slice(0, 20).map((channel) => channel.name);
  const more = channels.length - shown.length;
  return shown.join(', ') + (more > 0 ? ` and ${more} more` : '');
}
