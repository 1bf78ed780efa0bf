import type { PreviewView } from '#shared/contract/http/mapping';
import type { Decoded } from '#shared/decode/decoded';
import type { LineRole } from '#shared/line/line-map';

type Doubt = PreviewView['doubts'][number];

/** Share of damaged characters from which the mapping itself is in doubt (house). */
const MANY_DAMAGED = 0.02;

/** What a person should look at before using a mapping, the gravest first. */
export function doubtsOf(decoded: Decoded): Doubt[] {
  return [...doubtsOfData(decoded), ...doubtsOfControl(decoded), ...sharedChannels(decoded)];
}

function doubtsOfData({ lines, characters }: Decoded): Doubt[] {
  if (lines.data === undefined) return [{ role: 'data', message: 'No channel reads as data.' }];
  if (characters.count === 0) return [{ role: 'data', message: 'No characters on this channel.' }];
  const damaged = characters.errors.reduce((count, flags) => count + Number(flags !== 0), 0);
  if (damaged / characters.count < MANY_DAMAGED) return [];
  const message = `${damaged} of ${characters.count} characters are damaged: look at channel, polarity and rate.`;
  return [{ role: 'data', message }];
}

function doubtsOfControl({ lines, resets }: Decoded): Doubt[] {
  if (lines.rts === undefined) return [{ role: 'rts', message: 'Without RTS no reset can be judged.' }];
  if (lines.rts.trace.ticks.length === 0) return [{ role: 'rts', message: 'RTS never changes.' }];
  if (resets.length > 0 && resets.every(({ replyTicks }) => replyTicks === null)) {
    const message = 'No reset is answered: a silent device, or RTS on the wrong channel or polarity.';
    return [{ role: 'rts', message }];
  }
  return [];
}

function sharedChannels({ lines }: Decoded): Doubt[] {
  const taken = new Map<string, LineRole>();
  return Object.values(lines).flatMap(({ role, channel }): Doubt[] => {
    const other = taken.get(channel);
    taken.set(channel, role);
    return other === undefined
      ? []
      : [{ role, message: `${channel} is ${other.toUpperCase()} and ${role.toUpperCase()} at once.` }];
  });
}
