import { occurrenceUpperBound } from '../statistics/success-run';
import type { OverallVerdict, RuleResult, Verdict } from './finding';
import type { Decision } from './rulebook';

export type Judgement = 'pass' | 'violation' | 'inconclusive';

/**
 * Whether a measured interval [value − U, value + U] meets an upper limit. Guarded: pass if all of it does, violation if none of
 * it does, else inconclusive. Simple: the value alone decides. Values at the limit meet it.
 * Source: rules.md 1, guarded acceptance (ILAC-G8:09/2019 and JCGM 106:2012, from memory).
 * Give all three in the same unit; whole ticks keep the comparison exact.
 */
export function judgeAtMost(
  value: number,
  uncertainty: number,
  limit: number,
  decision: Decision,
): Judgement {
  if (decision === 'simple') return value <= limit ? 'pass' : 'violation';
  if (value + uncertainty <= limit) return 'pass';
  return value - uncertainty > limit ? 'violation' : 'inconclusive';
}

/** The same for a lower limit. */
export function judgeAtLeast(
  value: number,
  uncertainty: number,
  limit: number,
  decision: Decision,
): Judgement {
  return judgeAtMost(-value, uncertainty, -limit, decision);
}

/** Counts: `definite` events, `undecided` ones the resolution cannot tell. Source: rules.md 1, Counts. */
export function judgeCount(definite: number, undecided: number, limit: number): Judgement {
  if (definite > limit) return 'violation';
  return definite + undecided <= limit ? 'pass' : 'inconclusive';
}

/** Characters a count of 0 needs behind it before it is called a pass. Source: rules.md 1 (house). */
export const DEFAULT_EXPOSURE = 100;

/** "0 of 96; the true share is below 3.1 % (95 %)". */
export function exposureText(count: number, n: number, what: string): string {
  if (count > 0 || n === 0) return `${count} of ${n} ${what}`;
  const bound = occurrenceUpperBound(n, 0.95) * 100;
  return `0 of ${n} ${what}; the true share is below ${bound.toPrecision(2)} % (95 %)`;
}

const RANK: Record<Verdict, number> = {
  violation: 4,
  inconclusive: 3,
  'not-shown': 2,
  pass: 1,
  'not-applicable': 0,
};

/** The verdict that weighs more. */
export function worseOf(a: Verdict, b: Verdict): Verdict {
  return RANK[a] >= RANK[b] ? a : b;
}

/**
 * Any blocking violation: fail. Else any blocking inconclusive or not-shown, or a defect of the capture: inconclusive. Else pass.
 * Rules that no capture shows have no say. Source: rules.md 1.
 */
export function overallVerdict(
  rules: readonly RuleResult[],
  isMeasured: (id: string) => boolean,
  hasDefects: boolean,
): OverallVerdict {
  const blocking = rules.filter((rule) => rule.severity === 'blocking' && isMeasured(rule.id));
  if (blocking.some((rule) => rule.verdict === 'violation')) return 'fail';
  const isOpen = blocking.some((rule) => rule.verdict === 'inconclusive' || rule.verdict === 'not-shown');
  return isOpen || hasDefects ? 'inconclusive' : 'pass';
}
