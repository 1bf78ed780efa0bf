import { describe, expect, it } from 'vitest';
import { BASELINE } from './baseline';
import { RULE_DEFINITIONS } from './definitions';
import type { RuleResult } from './finding';
import type { GroupMember } from './group';
import { judgeGroup } from './group';
import type { GroupFigures } from './group-figures';

const FIGURES: GroupFigures = {
  latenciesMs: { powerUp: [], powered: [] },
  resolutionMs: 0.001,
  resets: { n: 1, silent: 0, undecided: 0 },
  moving: { n: 0, saturated: 0 },
  runs: { n: 0, usedS: 0, spanS: 0, doubtS: 0, steps: 0 },
};

/** A capture in which every rule passes but those named. */
function member(
  changes: Partial<Record<string, Partial<RuleResult>>> = {},
  figures: Partial<GroupFigures> = {},
  unit: string | null = null,
): GroupMember {
  const settings = new Map(BASELINE.rules.map((rule) => [rule.id, rule]));
  const rules = RULE_DEFINITIONS.map(({ id, unit: of }): RuleResult => ({
    id,
    verdict: 'pass',
    severity: settings.get(id)!.severity,
    n: 1,
    measured: null,
    uncertainty: null,
    uncertaintyKind: null,
    limit: settings.get(id)!.limit,
    unit: of,
    reason: 'as it should be',
    ...changes[id],
  }));
  return { unit, rules, figures: { ...FIGURES, ...figures }, hasDefects: false };
}

function ruleOf(members: readonly GroupMember[], id: string) {
  return judgeGroup(BASELINE, members).rules.find((rule) => rule.id === id)!;
}

// Source: rules.md 1, Groups: HSK-4, HSK-10, RPT-1, MOV-1 pool their n; all others take the worst; per unit both are shown.
describe('a group of captures', () => {
  it('takes the worst capture of a rule and names it', () => {
    const late = member({ 'HSK-1': { verdict: 'violation', measured: 19 } });
    const later = member({ 'HSK-1': { verdict: 'violation', measured: 21 } });
    const rule = ruleOf([member(), late, later], 'HSK-1');
    expect(rule).toMatchObject({ verdict: 'violation', measured: 21, member: 2 });
  });

  it('lets a capture that lacks a rule stand back where another shows it', () => {
    const lacks = member({ 'HSK-8': { verdict: 'not-shown' } });
    expect(ruleOf([lacks, member()], 'HSK-8').verdict).toBe('pass');
    expect(ruleOf([lacks, lacks], 'HSK-8').verdict).toBe('not-shown');
  });

  it('puts what is undecided about a blocking limit above a warning', () => {
    const warned = member({ 'FRM-1': { verdict: 'violation', severity: 'warning', measured: 1.5 } });
    const open = member({ 'FRM-1': { verdict: 'inconclusive', severity: 'blocking', measured: 2.5 } });
    expect(ruleOf([warned, open], 'FRM-1')).toMatchObject({ verdict: 'inconclusive', member: 1 });
  });

  it('pools resets', () => {
    const twenty = member({}, { resets: { n: 20, silent: 0, undecided: 0 } });
    const one = member({}, { resets: { n: 20, silent: 1, undecided: 0 } });
    expect(ruleOf([twenty, twenty, twenty], 'HSK-4')).toMatchObject({ verdict: 'pass', n: 60, member: null });
    expect(ruleOf([twenty, one], 'HSK-4')).toMatchObject({ verdict: 'violation', n: 40, measured: 1 });
  });

  it('pools latencies that are too few in each capture', () => {
    const part = (mean: number): GroupMember =>
      member(
        { 'HSK-10': { verdict: 'not-shown' } },
        {
          latenciesMs: {
            powerUp: [],
            powered: Array.from({ length: 13 }, (_, i) => mean + 0.1 * Math.sin(i)),
          },
        },
      );
    expect(ruleOf([part(10)], 'HSK-10').verdict).toBe('not-shown');
    expect(ruleOf([part(10), part(10.1)], 'HSK-10')).toMatchObject({ verdict: 'pass', n: 26 });
    expect(ruleOf([part(13.8), part(13.9)], 'HSK-10').verdict).toBe('violation');
  });

  it('pools moving packets and line use', () => {
    const some = (saturated: number): GroupMember => member({}, { moving: { n: 60, saturated } });
    expect(ruleOf([some(0), some(1)], 'MOV-1')).toMatchObject({ verdict: 'pass', n: 120 });
    expect(ruleOf([some(0), some(2)], 'MOV-1').verdict).toBe('violation');
    const use = (usedS: number, spanS: number): GroupMember =>
      member({}, { runs: { n: 1, usedS, spanS, doubtS: 0, steps: 40 } });
    // (0.9 + 1.6) ÷ (1 + 2) = 83.3 %.
    const rule = ruleOf([use(0.9, 1), use(1.6, 2)], 'RPT-1');
    expect(rule.verdict).toBe('violation');
    expect(rule.measured).toBeCloseTo(83.33, 2);
  });

  it('leaves captures out of a pool that have no say in it', () => {
    const other = member(
      { 'HSK-4': { verdict: 'not-applicable' } },
      { resets: { n: 5, silent: 5, undecided: 0 } },
    );
    expect(ruleOf([member(), other], 'HSK-4')).toMatchObject({ verdict: 'pass', n: 1 });
  });

  it('judges each unit by itself too', () => {
    const good = member({}, {}, '0001');
    const bad = member({ 'FRM-3': { verdict: 'violation', measured: 2 } }, {}, '0002');
    const group = judgeGroup(BASELINE, [good, bad, good]);
    expect(group.verdict).toBe('fail');
    expect(group.units.map(({ unit, verdict }) => [unit, verdict])).toEqual([
      ['0001', expect.not.stringMatching('fail')],
      ['0002', 'fail'],
    ]);
    const inBad = group.units[1].rules.find(({ id }) => id === 'FRM-3');
    expect(inBad).toMatchObject({ verdict: 'violation', member: 1 });
  });
});
