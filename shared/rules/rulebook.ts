/** How a rule's limit is met. `guarded`: the whole interval value ± U; `simple`: the value alone. */
export type Decision = 'guarded' | 'simple';
export type Severity = 'blocking' | 'warning' | 'note';

/** A rule as a rulebook sets it. Limits in the unit the rule defines. */
export interface RuleSetting {
  readonly id: string;
  readonly isEnabled: boolean;
  readonly severity: Severity;
  readonly decision: Decision;
  /** The limit that makes a finding of `severity`. null where the rule has no number. */
  readonly limit: number | null;
  /** A second, tighter limit that only warns. */
  readonly warningLimit?: number;
  /** Least number of resets, characters … the rule asks for. */
  readonly minimumCount?: number;
  /** Of rules whose value must lie between two limits: the band at each end of the line that may be probed. */
  readonly bands?: { readonly receiver: Band; readonly driver: Band };
}

/** Lowest and highest value allowed, in the unit of the rule. */
export interface Band {
  readonly from: number;
  readonly to: number;
}

export interface Rulebook {
  readonly name: string;
  readonly version: number;
  readonly rules: readonly RuleSetting[];
}
