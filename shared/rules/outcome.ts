import type { UncertaintyKind } from '../time/measurement';
import type { Finding, Verdict } from './finding';
import type { Severity } from './rulebook';

/** What a rule came to. */
export interface RuleOutcome {
  readonly verdict: Verdict;
  readonly n: number;
  readonly measured?: number;
  readonly uncertainty?: number;
  readonly uncertaintyKind?: UncertaintyKind;
  /** The limit compared with, where it is not the setting's. */
  readonly limit?: number;
  /** Severity of what was crossed, where a rule has two limits. */
  readonly severity?: Severity;
  readonly reason: string;
  readonly findings?: readonly Finding[];
}

export function notShown(reason: string): RuleOutcome {
  return { verdict: 'not-shown', n: 0, reason };
}

export function notApplicable(reason: string): RuleOutcome {
  return { verdict: 'not-applicable', n: 0, reason };
}

/** A number for a message: at most `digits` after the point, no trailing zeros beyond two. */
export function figure(value: number, digits = 2): string {
  return value.toFixed(digits);
}

/** `1 reset`, `3 resets`. */
export function plural(count: number, singular: string, several = `${singular}s`): string {
  return `${count} ${count === 1 ? singular : several}`;
}
