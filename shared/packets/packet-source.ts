import type { CharacterTable } from '../characters/character-table';

/** A pause longer than this inside a packet starts a new one, seconds. Source: protocol-facts 5.9, timing rule. */
export const PACKET_GAP_S = 0.1;

/** The characters packets are made of, and the places no packet reaches across. */
export interface PacketSource {
  readonly characters: CharacterTable;
  /** Per character: 1 where it belongs to an identification. */
  readonly isIdentification: Uint8Array;
  /** Instants nothing is read across: RTS going OFF or ON, unknown levels. Ascending. */
  readonly barriers: Float64Array;
  readonly ticksPerSecond: number;
}

/** Why a packet cannot go on with the next character. */
export type Obstacle = 'rts' | 'pause' | 'damaged' | 'identification';

/** Walks the barriers along with the characters. */
export class ObstacleFinder {
  private barrier = 0;
  private readonly longestPause: number;

  constructor(private readonly source: PacketSource) {
    this.longestPause = PACKET_GAP_S * source.ticksPerSecond;
  }

  /** What stands between character `index − 1` and `index`, or undefined. Ask with ascending indexes. */
  before(index: number): Obstacle | undefined {
    const { characters, isIdentification, barriers } = this.source;
    if (characters.errors[index] !== 0) return 'damaged';
    if (isIdentification[index] !== 0) return 'identification';
    if (index === 0) return undefined;
    const start = characters.startTicks[index];
    while (this.barrier < barriers.length && barriers[this.barrier] <= characters.startTicks[index - 1]) {
      this.barrier += 1;
    }
    if (this.barrier < barriers.length && barriers[this.barrier] <= start) return 'rts';
    return start - characters.endTicks[index - 1] > this.longestPause ? 'pause' : undefined;
  }
}

/** The reason a packet was cut, in plain words. */
export function cutReason(obstacle: Obstacle, have: number, want: number): string {
  const after = `after ${have} of ${want} characters`;
  switch (obstacle) {
    case 'rts':
      return `RTS changed or the record has a gap ${after}`;
    case 'pause':
      return `a pause of more than 100 ms follows ${after}`;
    case 'damaged':
      return `a damaged character follows ${after}`;
    case 'identification':
      return `an identification follows ${after}`;
  }
}
