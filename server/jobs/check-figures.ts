import type { FindingView, VerdictCounts } from '#shared/contract/http/checks';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import type { Decoded } from '#shared/decode/decoded';
import { definitionOf } from '#shared/rules/definitions';
import type { CheckResult, Finding, Verdict } from '#shared/rules/finding';
import { toSeconds } from '#shared/time/time-base';
import type { CheckFigures } from '../entities/check';
import { round } from './decode-figures';
import type { CheckOutcome } from './worker-task';

const MOST_MARKS = 50;
const MOST_WORST = 3;

const SEVERITIES = ['blocking', 'warning', 'note'] as const;
const COUNTED: Record<Verdict, keyof VerdictCounts> = {
  violation: 'violation',
  inconclusive: 'inconclusive',
  pass: 'pass',
  'not-shown': 'notShown',
  'not-applicable': 'notApplicable',
};

/** A check in the form it is kept in. */
export function toOutcome(decoded: Decoded, result: CheckResult, key: RulebookKey): CheckOutcome {
  const findings = result.findings.map((finding) => toFindingView(decoded, finding));
  return {
    rulebook: { key, ...result.rulebook },
    verdict: result.verdict,
    figures: { counts: countRules(result), worst: worstOf(findings), marks: marksOf(decoded, result) },
    detail: { rules: result.rules, findings },
  };
}

function toFindingView({ capture }: Decoded, finding: Finding): FindingView {
  return {
    ...finding,
    startS: toSeconds(capture.timeBase, finding.startTicks),
    endS: toSeconds(capture.timeBase, finding.endTicks),
  };
}

/** Rules that are measured, by verdict. */
function countRules({ rules }: CheckResult): VerdictCounts {
  const counts = { violation: 0, inconclusive: 0, pass: 0, notShown: 0, notApplicable: 0 };
  for (const { id, verdict } of rules) {
    if (definitionOf(id)?.isMeasured === true) counts[COUNTED[verdict]] += 1;
  }
  return counts;
}

function isBad({ verdict }: Pick<Finding, 'verdict'>): boolean {
  return verdict === 'violation' || verdict === 'inconclusive';
}

/** Violations before what is undecided, blocking before warnings, one a rule. */
function worstOf(findings: readonly FindingView[]): FindingView[] {
  const seen = new Set<string>();
  return findings
    .filter(isBad)
    .sort((a, b) => weight(a) - weight(b) || a.startTicks - b.startTicks)
    .filter(({ rule }) => !seen.has(rule) && seen.add(rule))
    .slice(0, MOST_WORST);
}

function weight({ verdict, severity }: Pick<Finding, 'verdict' | 'severity'>): number {
  return (verdict === 'violation' ? 0 : SEVERITIES.length) + SEVERITIES.indexOf(severity);
}

/** Marks for the tiny tape; violations first where there are too many. */
function marksOf({ capture }: Decoded, { findings }: CheckResult): CheckFigures['marks'] {
  const end = Math.max(1, capture.endTicks);
  return findings
    .filter(isBad)
    .sort((a, b) => weight(a) - weight(b))
    .slice(0, MOST_MARKS)
    .map(({ startTicks, verdict }) => ({
      at: round(startTicks / end, 4),
      verdict: verdict as 'violation' | 'inconclusive',
    }));
}
