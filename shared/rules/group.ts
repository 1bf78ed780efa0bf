import { definitionOf, RULE_DEFINITIONS } from './definitions';
import type { OverallVerdict, RuleResult, Verdict } from './finding';
import type { GroupFigures } from './group-figures';
import type { RuleOutcome } from './outcome';
import { judgeLatencies, judgeMisses, judgePooledUse, judgeSaturatedShare } from './pooled';
import type { Rulebook, RuleSetting } from './rulebook';
import { overallVerdict } from './verdict';

/** One capture of a group with what its check and its decode said. */
export interface GroupMember {
  /** Serial number of the unit; null where not stated. */
  readonly unit: string | null;
  readonly rules: readonly RuleResult[];
  readonly figures: GroupFigures;
  readonly hasDefects: boolean;
}

/** The verdict of one rule over several captures. */
export interface GroupRule extends RuleResult {
  /** Index of the capture the verdict comes from; null where the captures are pooled. */
  readonly member: number | null;
}

export interface GroupVerdicts {
  readonly rules: readonly GroupRule[];
  readonly verdict: OverallVerdict;
}

export interface GroupResult extends GroupVerdicts {
  /** The same for each unit, by serial number; captures without one are together. */
  readonly units: readonly (GroupVerdicts & { readonly unit: string | null })[];
}

type Pool = (
  members: readonly GroupMember[],
  setting: RuleSetting,
  settings: ReadonlyMap<string, RuleSetting>,
) => RuleOutcome;

/** Rules that pool their n; all others take the worst capture. Source: rules.md 1, Groups. */
const POOLS: Record<string, Pool> = {
  'HSK-4': (members, setting) => judgeMisses(add(members.map((m) => m.figures.resets)), setting),
  'HSK-10': poolLatencies,
  'RPT-1': (members, setting) => judgePooledUse(add(members.map((m) => m.figures.runs)), setting),
  'MOV-1': (members, setting) => judgeSaturatedShare(add(members.map((m) => m.figures.moving)), setting),
};

/**
 * Judges captures together against one rulebook, and each unit by itself. A capture that does not show a rule has no say where
 * another one shows it.
 * @param members checked against this rulebook
 */
export function judgeGroup(rulebook: Rulebook, members: readonly GroupMember[]): GroupResult {
  const units = [...new Set(members.map(({ unit }) => unit))];
  const all = members.map((_, index) => index);
  return {
    ...judgeMembers(rulebook, members, all),
    units: units.map((unit) => ({
      unit,
      ...judgeMembers(
        rulebook,
        members,
        all.filter((index) => members[index].unit === unit),
      ),
    })),
  };
}

function judgeMembers(
  rulebook: Rulebook,
  members: readonly GroupMember[],
  indexes: readonly number[],
): GroupVerdicts {
  const settings = new Map(rulebook.rules.map((setting) => [setting.id, setting]));
  const byMember = indexes.map((index) => ({
    index,
    results: new Map(members[index].rules.map((rule) => [rule.id, rule])),
  }));
  const rules = RULE_DEFINITIONS.flatMap(({ id }): GroupRule[] => {
    const results = byMember.flatMap(({ index, results: of }) => {
      const result = of.get(id);
      return result === undefined ? [] : [{ ...result, member: index }];
    });
    if (results.length === 0) return [];
    const worst = results.reduce((a, b) => (isWorse(b, a) ? b : a));
    const setting = settings.get(id);
    const isPooled = id in POOLS && setting?.isEnabled === true && worst.verdict !== 'not-applicable';
    if (!isPooled) return [worst];
    const having = results.filter(({ verdict }) => verdict !== 'not-applicable');
    const pooled = POOLS[id](
      having.map(({ member }) => members[member]),
      setting,
      settings,
    );
    return [toGroupRule(setting, pooled)];
  });
  const isMeasured = (id: string): boolean => definitionOf(id)?.isMeasured === true;
  const hasDefects = indexes.some((index) => members[index].hasDefects);
  return { rules, verdict: overallVerdict(rules, isMeasured, hasDefects) };
}

/** What is decided comes before what a capture lacks. */
const RANK: Record<Verdict, number> = {
  violation: 4,
  inconclusive: 3,
  pass: 2,
  'not-shown': 1,
  'not-applicable': 0,
};
const SEVERITY_RANK = { blocking: 2, warning: 1, note: 0 };

function isWorse(a: RuleResult, b: RuleResult): boolean {
  const bad = (r: RuleResult): boolean => r.verdict === 'violation' || r.verdict === 'inconclusive';
  // Of two limits of one rule the blocking one weighs more, whatever is only warned of.
  if (bad(a) && bad(b) && a.severity !== b.severity) {
    return SEVERITY_RANK[a.severity] > SEVERITY_RANK[b.severity];
  }
  if (RANK[a.verdict] !== RANK[b.verdict]) return RANK[a.verdict] > RANK[b.verdict];
  return excess(a) > excess(b);
}

/** How far a measured value lies towards or beyond its limit; values without a number are equal. */
function excess({ id, measured, limit }: RuleResult): number {
  if (measured === null || limit === null) return -Infinity;
  const sense = definitionOf(id)?.sense;
  return sense === 'at-least' ? limit - measured : Math.abs(measured) - limit;
}

function poolLatencies(
  members: readonly GroupMember[],
  setting: RuleSetting,
  settings: ReadonlyMap<string, RuleSetting>,
): RuleOutcome {
  const upperLimit = settings.get('HSK-1')?.limit ?? null;
  if (upperLimit === null) {
    return { verdict: 'not-shown', n: 0, reason: 'the rulebook sets no limit for HSK-1' };
  }
  const of = (kind: 'powerUp' | 'powered'): number[] => members.flatMap((m) => m.figures.latenciesMs[kind]);
  const resolution = Math.max(0, ...members.map((m) => m.figures.resolutionMs));
  return judgeLatencies({ powerUp: of('powerUp'), powered: of('powered') }, resolution, upperLimit, setting);
}

/** Sums field by field. */
function add<K extends string>(items: readonly Readonly<Record<K, number>>[]): Record<K, number> {
  const sums: Partial<Record<K, number>> = {};
  for (const item of items) {
    for (const key of Object.keys(item) as K[]) sums[key] = (sums[key] ?? 0) + item[key];
  }
  return sums as Record<K, number>;
}

function toGroupRule(setting: RuleSetting, outcome: RuleOutcome): GroupRule {
  return {
    id: setting.id,
    verdict: outcome.verdict,
    severity: outcome.severity ?? setting.severity,
    n: outcome.n,
    measured: outcome.measured ?? null,
    uncertainty: outcome.uncertainty ?? null,
    uncertaintyKind: outcome.uncertaintyKind ?? null,
    limit: outcome.limit ?? setting.limit,
    unit: definitionOf(setting.id)?.unit ?? null,
    reason: outcome.reason,
    member: null,
  };
}
