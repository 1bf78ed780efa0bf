import type { HostModel } from './host-model';

const PNP = { kind: 'pnp', as: 'by its PnP string' } as const;
const M = { kind: 'begins', text: 'M', as: 'M' } as const;

/**
 * Hosts found in the field, under neutral names.
 * Source: the open drivers and tools behind protocol-facts.md 3.2 (sections [L:gpm], [L:bsd], [L:xorg], [L:hd], [L:ser], [L:ros],
 * [L:dos], [L:ia], [L:kern]); where a host waits in ticks of its timer the shortest wait is taken.
 */
export const KNOWN_HOSTS: readonly HostModel[] = [
  {
    id: 'A',
    description: 'a console service; its user names the protocol, the reply is ignored',
    resets: [],
    firstWaitS: 0,
    gapS: 0,
    totalS: null,
    mostCharacters: 0,
    accepts: [],
  },
  {
    id: 'B',
    description: 'a console service that resets by both lines, then again',
    resets: [
      { lines: 'both', leastLowS: 0.24, mostLowS: 0.48 },
      { lines: 'both', leastLowS: 0.24, mostLowS: 0.24 },
    ],
    firstWaitS: 0.24,
    gapS: 0.24,
    totalS: null,
    mostCharacters: 256,
    accepts: [PNP, M, { kind: 'begins', text: 'H', as: 'five-byte' }],
  },
  {
    id: 'C',
    description: 'a display service that resets by RTS alone and asks twice',
    resets: [{ lines: 'rts', leastLowS: 0.2, mostLowS: 0.2 }],
    firstWaitS: 0.2,
    gapS: 0.2,
    totalS: null,
    mostCharacters: 256,
    accepts: [PNP, { kind: 'begins', text: 'M3', as: 'M3' }],
  },
  {
    id: 'D',
    description: 'a hardware probe with a long reset of both lines',
    resets: [{ lines: 'both', leastLowS: 0.3, mostLowS: 0.3 }],
    firstWaitS: 0.3,
    gapS: 0.3,
    totalS: null,
    mostCharacters: 256,
    accepts: [{ kind: 'pnp', form: 6, as: 'by its PnP string' }, M],
  },
  {
    id: 'E',
    description: 'an enumerator that resets by RTS, then twice by both lines',
    resets: [
      { lines: 'rts', leastLowS: 0.2, mostLowS: 0.2 },
      { lines: 'both', leastLowS: 0.2, mostLowS: 0.4 },
      { lines: 'both', leastLowS: 0.2, mostLowS: 0.2 },
    ],
    firstWaitS: 0.24,
    gapS: 0.24,
    totalS: null,
    mostCharacters: 256,
    accepts: [
      PNP,
      { kind: 'holds', text: 'M3', from: 2, as: 'M3' },
      M,
      { kind: 'begins', text: 'B', as: 'a ballpoint device' },
    ],
  },
  {
    id: 'F',
    description: 'a system that follows the PnP sequence and needs a whole string',
    resets: [
      { lines: 'both', leastLowS: 0.2, mostLowS: 0.4 },
      { lines: 'both', leastLowS: 0.2, mostLowS: 0.2 },
    ],
    firstWaitS: 0.2,
    gapS: 0.2,
    totalS: 2.2,
    mostCharacters: 256,
    accepts: [{ ...PNP, needsEnd: true }],
  },
  {
    id: 'F, old way',
    description: 'the same system without PnP, half a second in all',
    resets: [{ lines: 'both', leastLowS: 0.1, mostLowS: 0.1 }],
    firstWaitS: 0.5,
    gapS: 0.1,
    totalS: 0.5,
    mostCharacters: 16,
    accepts: [
      { kind: 'begins', text: 'B', as: 'a ballpoint device' },
      { kind: 'begins', text: 'M3', as: 'M3' },
      { kind: 'begins', text: 'MZ', as: 'MZ' },
      M,
    ],
  },
  {
    id: 'G',
    description: 'a resident driver that counts ticks of 55 ms',
    resets: [{ lines: 'both', leastLowS: 0.0549, mostLowS: 0.1099 }],
    firstWaitS: 0.11,
    gapS: 0.11,
    totalS: null,
    mostCharacters: 4,
    accepts: [{ kind: 'begins', text: 'MZ', as: 'MZ' }, { kind: 'begins', text: 'M3', as: 'M3' }, M],
  },
  {
    id: 'H',
    description: 'an attached line; its user chooses the protocol, the reply is ignored',
    resets: [],
    firstWaitS: 0,
    gapS: 0,
    totalS: null,
    mostCharacters: 0,
    accepts: [],
  },
];
