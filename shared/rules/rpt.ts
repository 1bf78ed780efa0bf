import { findMotionRuns } from '../packets/motion-runs';
import type { MotionRun } from '../packets/motion-runs';
import { sumRuns } from './group-figures';
import { judgePooledUse } from './pooled';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, notShown, plural, worstVerdict } from './rule-context';
import { judgeAtLeast, judgeAtMost } from './verdict';

const NO_RUN = 'no run of ten moving packets: record 30 s of motion in all directions';

/** Character time at the measured rate, so that a slow clock is no gap. */
function runsOf(context: RuleContext): MotionRun[] {
  const { packets, characters, framing } = context.decoded;
  if (framing === null) return [];
  const characterTicks = (context.characterTicks * context.bitTicks) / context.nominalBitTicks;
  return findMotionRuns(packets, characters, characterTicks, context.perSecond);
}

/** RPT-1: line use inside motion runs, percent; pooled over runs, the worst ones listed. */
export function judgeLineUse(context: RuleContext): RuleOutcome {
  const outcome = judgePooledUse(sumRuns(context.decoded), context.setting);
  // The pool decides; single strokes are shown where it does not pass.
  if (outcome.verdict === 'pass' || outcome.verdict === 'not-shown') return outcome;
  const { uncertainty } = outcome;
  const places: Place[] = runsOf(context)
    .map((run) => ({
      verdict: judgeAtLeast(100 * run.lineUse, uncertainty ?? 0, context.limit, context.setting.decision),
      startTicks: run.startTicks,
      endTicks: run.endTicks,
      measured: 100 * run.lineUse,
      uncertainty,
      message: `The line is in use ${figure(100 * run.lineUse, 1)} % of this stroke, ${figure(run.packetRate, 1)} packets a second`,
    }))
    .filter((place) => place.verdict !== 'pass');
  return { ...outcome, findings: cap(places.map((place) => context.finding(place))) };
}

/** RPT-3: longest start-to-start inside a run, in packet times. */
export function judgeLongestStep(context: RuleContext): RuleOutcome {
  const runs = runsOf(context);
  if (runs.length === 0) return notShown(NO_RUN);
  const { packets, characters } = context.decoded;
  const places: Place[] = [];
  let worst = 0;
  let uncertainty = 0;
  for (const run of runs) {
    const before = run.longestStepPacket - 1;
    const packetTicks = packets.characterCount[before] * context.characterTicks;
    const value = run.longestStep / packetTicks;
    const doubt = context.differenceUncertainty(run.longestStep, 'data') / packetTicks;
    if (value > worst) {
      worst = value;
      uncertainty = doubt;
    }
    const verdict = judgeAtMost(value, doubt, context.limit, context.setting.decision);
    const startTicks = characters.startTicks[packets.firstCharacter[before]];
    places.push({
      verdict,
      startTicks,
      endTicks: startTicks + run.longestStep,
      measured: value,
      uncertainty: doubt,
      message: `${figure(value)} packet times from one packet to the next inside a stroke`,
    });
  }
  return {
    verdict: worstVerdict(places, 'not-shown'),
    n: runs.length,
    measured: worst,
    uncertainty,
    uncertaintyKind: 'bound',
    reason: `the longest step inside ${plural(runs.length, 'stroke')} is ${figure(worst)} packet times`,
    findings: cap(places.filter((place) => place.verdict !== 'pass').map((place) => context.finding(place))),
  };
}
