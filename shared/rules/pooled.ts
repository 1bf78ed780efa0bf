import { performanceIndex } from '../statistics/performance-index';
import { wilsonInterval } from '../statistics/wilson';
import { figure, notShown, plural } from './outcome';
import type { RuleOutcome } from './outcome';
import type { GroupFigures } from './group-figures';
import type { RuleSetting } from './rulebook';
import { judgeAtLeast, judgeAtMost, judgeCount, worseOf } from './verdict';

/*
 * The rules that pool their n over several captures, judged from numbers alone: the same for one capture and for a group.
 * Source: rules.md 1, Groups.
 */

/** HSK-4: resets without a reply. */
export function judgeMisses(
  { n, silent, undecided }: GroupFigures['resets'],
  setting: RuleSetting,
): RuleOutcome {
  const least = setting.minimumCount ?? 1;
  const verdict = judgeCount(silent, undecided, setting.limit ?? 0);
  // A miss is a miss, however few the resets.
  if (n < least && verdict !== 'violation') {
    return {
      ...notShown(`${plural(n, 'reset')} with a whole reply window; the rulebook asks for ${least}`),
      n,
    };
  }
  const answered = n - silent - undecided;
  const share = wilsonInterval(answered, n);
  return {
    verdict,
    n,
    measured: silent,
    uncertainty: undecided,
    uncertaintyKind: 'bound',
    reason: `${answered} of ${plural(n, 'reset')} were answered; the true share is ${figure(100 * share.lower, 1)} % or more (95 %, Wilson)`,
  };
}

const KINDS = [
  ['powerUp', 'after power-up'],
  ['powered', 'while powered'],
] as const;

/** HSK-10: index of the latency against `upperLimitMs`, the worse of the kinds of reset. */
export function judgeLatencies(
  latenciesMs: GroupFigures['latenciesMs'],
  resolutionMs: number,
  upperLimitMs: number,
  setting: RuleSetting,
): RuleOutcome {
  const least = setting.minimumCount ?? 25;
  const enough = KINDS.filter(([kind]) => latenciesMs[kind].length >= least);
  if (enough.length === 0) {
    const most = Math.max(latenciesMs.powerUp.length, latenciesMs.powered.length);
    return { ...notShown(`${plural(most, 'answered reset')} of one kind; ${least} are needed`), n: most };
  }
  return enough
    .map(([kind, words]) => judgeIndex(latenciesMs[kind], words, resolutionMs, upperLimitMs, setting))
    .reduce((a, b) => (worseOf(a.verdict, b.verdict) === a.verdict ? a : b));
}

function judgeIndex(
  latencies: readonly number[],
  words: string,
  resolutionMs: number,
  upperLimitMs: number,
  setting: RuleSetting,
): RuleOutcome {
  const index = performanceIndex(latencies, upperLimitMs, resolutionMs);
  const n = latencies.length;
  if (index === undefined) {
    return {
      verdict: 'inconclusive',
      n,
      reason: `the spread of the latency ${words} is not wider than the resolution`,
    };
  }
  const { value, half, isNormalityDoubtful } = index;
  return {
    verdict: judgeAtLeast(value, half, setting.limit ?? 0, setting.decision),
    n,
    measured: value,
    uncertainty: half,
    uncertaintyKind: 'k2',
    reason:
      `Ppu ${figure(value)}, 95 % interval ${figure(value - half)} to ${figure(value + half)}, of ${plural(n, 'reset')} ${words}` +
      (isNormalityDoubtful
        ? '; the latencies do not look normally distributed, so the index says little about the share beyond the limit'
        : ''),
  };
}

/** MOV-1: share of moving packets at the numeric limit, percent. */
export function judgeSaturatedShare(
  { n, saturated }: GroupFigures['moving'],
  setting: RuleSetting,
): RuleOutcome {
  const least = setting.minimumCount ?? 100;
  if (n < least) return { ...notShown(`${plural(n, 'moving packet')}; ${least} are needed`), n };
  const share = (100 * saturated) / n;
  const interval = wilsonInterval(saturated, n);
  return {
    verdict: judgeAtMost(share, 0, setting.limit ?? 0, setting.decision),
    n,
    measured: share,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason: `${saturated} of ${plural(n, 'moving packet')} are at the numeric limit; the true share is ${figure(100 * interval.lower, 1)} to ${figure(100 * interval.upper, 1)} % (95 %, Wilson)`,
  };
}

/** RPT-1: line use over all motion runs, percent. */
export function judgePooledUse(runs: GroupFigures['runs'], setting: RuleSetting): RuleOutcome {
  if (runs.n === 0 || runs.spanS === 0) {
    return notShown('no run of ten moving packets: record 30 s of motion in all directions');
  }
  const use = (100 * runs.usedS) / runs.spanS;
  const uncertainty = (use * runs.doubtS) / runs.spanS;
  return {
    verdict: judgeAtLeast(use, uncertainty, setting.limit ?? 0, setting.decision),
    n: runs.n,
    measured: use,
    uncertainty,
    uncertaintyKind: 'bound',
    reason: `${figure(use, 1)} % of the line in use over ${plural(runs.n, 'stroke')}, ${figure(runs.steps / runs.spanS, 1)} packets a second`,
  };
}
