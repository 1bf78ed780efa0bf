import { bitsAfterStart } from '../characters/framing';
import type { Framing } from '../characters/framing';
import type { LineDrawing } from './line-drawing';
import type { SeededRandom } from './random';

/** How characters are drawn. Lengths in nanoseconds. */
export interface PenSetup {
  readonly framing: Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>;
  readonly bitNs: number;
  /** Largest displacement of a transition, ns. */
  readonly jitterNs: number;
  /** Spaces are longer by this much, ns. */
  readonly biasNs: number;
}

/** Damage to one character. */
export interface CharacterDamage {
  readonly stop?: boolean;
  readonly parity?: boolean;
}

/** Draws start-stop characters on a line whose 1 is mark. */
export class SerialPen {
  constructor(
    private readonly line: LineDrawing,
    private readonly setup: PenSetup,
    private readonly random: SeededRandom,
  ) {}

  /** Length of a whole character. */
  get characterNs(): number {
    return (1 + bitsAfterStart(this.setup.framing) + this.setup.framing.stopBits) * this.setup.bitNs;
  }

  /** Draws a character from `at`; returns its end. */
  draw(at: number, value: number, damage: CharacterDamage = {}): number {
    const { framing, bitNs } = this.setup;
    const levels = [false];
    let ones = 0;
    for (let n = 0; n < framing.dataBits; n++) {
      const isOne = ((value >> n) & 1) === 1;
      levels.push(isOne);
      if (isOne) ones += 1;
    }
    if (framing.parity !== 'none') levels.push(parityBit(framing.parity, ones) !== (damage.parity === true));
    levels.push(damage.stop !== true);
    levels.forEach((level, n) => this.line.set(this.displaced(at, n, level), level));
    const end = at + this.characterNs;
    if (damage.stop === true) this.line.set(at + levels.length * bitNs, true);
    return end;
  }

  private displaced(at: number, n: number, level: boolean): number {
    const due = at + n * this.setup.bitNs;
    if (n === 0 || level === this.line.current) return due;
    return due + this.random.signed() * this.setup.jitterNs + (level ? this.setup.biasNs : 0);
  }
}

function parityBit(parity: Framing['parity'], ones: number): boolean {
  if (parity === 'mark') return true;
  return parity === 'odd' ? ones % 2 === 0 : ones % 2 === 1;
}
