import type { Protocol } from '../packets/packet-table';

/** Where a limit comes from. */
export type Basis = 'std' | 'ref' | 'cp' | 'house';

/** What a rule asks of a capture, for all rulebooks. Limits stand in rulebooks only. */
export interface RuleDefinition {
  readonly id: string;
  /** A few words for tables. */
  readonly name: string;
  /** What is measured, from where to where, in plain words. */
  readonly quantity: string;
  /** Unit of measured value, U and limit; null where the rule has no number. */
  readonly unit: string | null;
  /** How the measured value meets the limit. `range` rules compare the absolute value. */
  readonly sense: 'at-most' | 'at-least' | 'none';
  readonly basis: Basis;
  /** Source of the definition and limit; says `from memory` where the text was not read again. */
  readonly source: string;
  /** What the capture must hold. */
  readonly needs: string;
  /** Protocols the rule has a meaning for; undefined: all. */
  readonly protocols?: readonly Protocol[];
  /** False: no capture shows the rule, it comes from a sheet of the build. It then has no say in the verdict of a capture. */
  readonly isMeasured: boolean;
}
