import type { CheckChanges, FindingView, RuleResultView } from '#shared/contract/http/checks';
import type { Verdict } from '#shared/rules/finding';
import type { Check } from '../entities/check';
import { toCheckSummary, toRuleResultViews } from './check-view';

/** How near a verdict is to a violation. */
const GRAVITY: Record<Verdict, number> = {
  violation: 3,
  inconclusive: 2,
  'not-shown': 1,
  pass: 0,
  'not-applicable': 0,
};

type RuleChange = CheckChanges['rules'][number];

/** What changed from one check to another; both with their detail. */
export function compareChecks(from: Check | null, to: Check): CheckChanges {
  if (from === null) {
    const nothing = { rules: [], appeared: [], disappeared: [], kept: 0 };
    return { from: null, to: toCheckSummary(to), ...nothing };
  }
  const before = indexFindings(from);
  const after = indexFindings(to);
  return {
    from: toCheckSummary(from),
    to: toCheckSummary(to),
    rules: compareRules(toRuleResultViews(from.detail.rules), toRuleResultViews(to.detail.rules)),
    appeared: [...after].flatMap(([key, finding]) => (before.has(key) ? [] : [finding])),
    disappeared: [...before].flatMap(([key, finding]) => (after.has(key) ? [] : [finding])),
    kept: [...after.keys()].filter((key) => before.has(key)).length,
  };
}

/** Violations and undecided places by what they are: the same rule at the same time with the same verdict is the same finding. */
function indexFindings({ detail }: Check): ReadonlyMap<string, FindingView> {
  const bad = detail.findings.filter(({ verdict }) => verdict === 'violation' || verdict === 'inconclusive');
  return new Map(
    bad.map((finding) => [
      `${finding.rule} ${finding.verdict} ${finding.startS.toFixed(6)} ${finding.endS.toFixed(6)}`,
      finding,
    ]),
  );
}

function compareRules(from: readonly RuleResultView[], to: readonly RuleResultView[]): RuleChange[] {
  const before = new Map(from.map((rule) => [rule.id, rule]));
  return to.flatMap((rule) => {
    const old = before.get(rule.id);
    if (old === undefined || isSame(old, rule)) return [];
    return [
      { id: rule.id, name: rule.name, direction: directionOf(old, rule), from: side(old), to: side(rule) },
    ];
  });
}

function isSame(a: RuleResultView, b: RuleResultView): boolean {
  return a.verdict === b.verdict && a.severity === b.severity && a.limit === b.limit;
}

function directionOf(from: RuleResultView, to: RuleResultView): RuleChange['direction'] {
  const difference = GRAVITY[to.verdict] - GRAVITY[from.verdict];
  if (difference === 0) return 'same';
  return difference > 0 ? 'worse' : 'better';
}

function side(rule: RuleResultView): RuleChange['from'] {
  const { verdict, severity, n, measured, uncertainty, limit, unit } = rule;
  return { verdict, severity, n, measured, uncertainty, limit, unit };
}
