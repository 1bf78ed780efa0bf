import type { UncertaintyKind } from '../time/measurement';
import type { Ticks } from '../time/ticks';
import type { Severity } from './rulebook';

export type Verdict = 'pass' | 'violation' | 'inconclusive' | 'not-shown' | 'not-applicable';
export type OverallVerdict = 'pass' | 'fail' | 'inconclusive';

/** One place where a rule was judged. */
export interface Finding {
  readonly rule: string;
  readonly verdict: 'pass' | 'violation' | 'inconclusive' | 'not-shown';
  readonly severity: Severity;
  readonly startTicks: Ticks;
  readonly endTicks: Ticks;
  readonly measured: number | null;
  readonly uncertainty: number | null;
  readonly uncertaintyKind: UncertaintyKind | null;
  readonly limit: number | null;
  readonly unit: string | null;
  /** Plain words with numbers. */
  readonly message: string;
}

/** The verdict of one rule over one capture. */
export interface RuleResult {
  readonly id: string;
  readonly verdict: Verdict;
  readonly severity: Severity;
  /** How many places were judged. */
  readonly n: number;
  readonly measured: number | null;
  readonly uncertainty: number | null;
  readonly uncertaintyKind: UncertaintyKind | null;
  readonly limit: number | null;
  readonly unit: string | null;
  /** Why the verdict is what it is; for not-shown: what the capture lacks and what would do. */
  readonly reason: string;
}

export interface CheckResult {
  readonly rulebook: { readonly name: string; readonly version: number };
  readonly rules: readonly RuleResult[];
  readonly findings: readonly Finding[];
  readonly verdict: OverallVerdict;
}
