import type { LineRole, Polarity } from '../line/line-map';
import type { ButtonName } from '../packets/packet-table';
import { Composition } from './composition';
import type { Script } from './script';

/** What the composed lines really carry. Times in nanoseconds. */
export interface ComposedTruth {
  readonly characters: readonly {
    readonly at: number;
    readonly value: number;
    readonly isDamaged: boolean;
  }[];
  readonly resets: readonly {
    readonly onAt: number;
    readonly replyAt: number | null;
    readonly identity: string | null;
  }[];
  readonly packets: readonly {
    readonly at: number;
    readonly dx: number;
    readonly dy: number;
    readonly wheel: number;
    readonly buttons: readonly ButtonName[];
  }[];
  readonly faults: readonly { readonly at: number; readonly step: number; readonly kind: string }[];
}

/** A line in its own sense: changes from instant 0 on; level 1 is mark or ON, 0 space or OFF, 2 unknown. */
export interface ComposedLine {
  readonly role: LineRole;
  readonly polarity: Polarity;
  readonly changes: readonly (readonly [number, number])[];
  /** Stretches in which a line recorded in volts is lower, in order of their begin. */
  readonly sags: readonly Sag[];
}

export interface Sag {
  readonly from: number;
  readonly to: number;
  readonly volts: number;
}

export interface ComposedCapture {
  readonly name: string;
  readonly seed: number;
  readonly durationNs: number;
  readonly lines: readonly ComposedLine[];
  readonly truth: ComposedTruth;
}

/**
 * Plays a script on the lines of a port. The same script gives the same capture anywhere.
 * @throws ScriptError that names the step
 */
export function compose(script: Script): ComposedCapture {
  const composition = new Composition(script);
  script.steps.forEach((step, index) => composition.play(step, index));
  return composition.finish();
}
