/** How characters stand on the line. */
export interface Framing {
  /** Measured rate, bit/s. */
  readonly bitRate: number;
  /** The standard rate meant, bit/s. */
  readonly nominalBitRate: number;
  readonly dataBits: 7 | 8;
  readonly parity: Parity;
  readonly stopBits: 1 | 2;
}

export type Parity = 'none' | 'odd' | 'even' | 'mark';

/** Data bits plus a parity bit, if any. */
export function bitsAfterStart(framing: Pick<Framing, 'dataBits' | 'parity'>): number {
  return framing.dataBits + (framing.parity === 'none' ? 0 : 1);
}

/** Elements in a whole character: start, data, parity, stop. */
export function elementsPerCharacter(framing: Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>): number {
  return 1 + bitsAfterStart(framing) + framing.stopBits;
}

/** `7N1` and the like. */
export function framingName(framing: Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>): string {
  const letter = { none: 'N', odd: 'O', even: 'E', mark: 'M' }[framing.parity];
  return `${framing.dataBits}${letter}${framing.stopBits}`;
}
