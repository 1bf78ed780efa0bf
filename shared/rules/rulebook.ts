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
}

export interface Rulebook {
  readonly name: string;
  readonly version: number;
  readonly rules: readonly RuleSetting[];
}
