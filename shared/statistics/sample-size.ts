import { binomialAtMost } from './binomial';
import { Z_95 } from './normal';
import { poissonUpperBound } from './poisson';
import { successRun } from './success-run';
import { wilsonInterval } from './wilson';

/** Beyond this a plan is no plan. */
const MOST_TRIALS = 100_000_000;

/** The least n from 1 on for which `isEnough` holds; it must hold for all larger n too. undefined beyond a hundred million. */
function leastCount(isEnough: (n: number) => boolean): number | undefined {
  let high = 1;
  while (!isEnough(high)) {
    high *= 2;
    if (high > MOST_TRIALS) return undefined;
  }
  let low = high / 2;
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (isEnough(middle)) high = middle;
    else low = middle;
  }
  return high;
}

/**
 * Trials (resets, units) of which at most `failures` may fail, so that a share of successes of at least `reliability` is shown
 * with `confidence`: the least n with P(at most `failures` | n, 1 − reliability) ≤ 1 − confidence. 59, 93, 124 for 95/95 with
 * 0, 1, 2 failures. Source: rules.md 1, Planning; binomial sampling plans, common practice.
 */
export function trialsFor(reliability: number, confidence: number, failures = 0): number | undefined {
  if (!(reliability > 0 && reliability < 1 && confidence > 0 && confidence < 1)) return undefined;
  if (failures === 0) return successRun(reliability, confidence);
  return leastCount(
    (n) => n > failures && binomialAtMost(failures, n, 1 - reliability) <= 1 - confidence + 1e-12,
  );
}

/** Trials, all successful, whose Wilson 95 % lower bound reaches `share`: 73 for 95 %, 381 for 99 %. Source: rules.md 1, Proportions. */
export function trialsForWilson(share: number): number | undefined {
  if (!(share > 0 && share < 1)) return undefined;
  return leastCount((n) => wilsonInterval(n, n).lower >= share);
}

/**
 * Values needed so that an index of `expected` still meets `limit` with the lower end of its 95 % interval, standard error
 * √(1/(9n) + P²/(2(n − 1))). undefined where `expected` does not exceed `limit`. Source: rules.md 1, Performance index.
 */
export function valuesForIndex(expected: number, limit: number): number | undefined {
  if (!(expected > limit)) return undefined;
  return leastCount(
    (n) => n > 1 && expected - Z_95 * Math.sqrt(1 / (9 * n) + expected ** 2 / (2 * (n - 1))) >= limit,
  );
}

/**
 * Exposure (seconds, characters) over which at most `events` may be seen, so that their rate is shown to be below `rate` with
 * `confidence`. In the unit whose reciprocal `rate` has: 3.00 ÷ rate for no event at 95 %. Source: as `poissonUpperBound`.
 */
export function exposureFor(rate: number, confidence: number, events = 0): number | undefined {
  if (!(rate > 0 && confidence > 0 && confidence < 1)) return undefined;
  return poissonUpperBound(events, confidence) / rate;
}

/** What a person wants to show about a device, in shares of 0 to 1. */
export interface SamplePlanQuestion {
  /** Share of resets of one unit that must be answered. */
  readonly resetReliability: number;
  /** Share of units that must be good. */
  readonly unitReliability: number;
  readonly confidence: number;
  /** Failures still allowed among the resets of one unit, and among the units. */
  readonly failedResets?: number;
  readonly failedUnits?: number;
}

/** "How many resets, how many units?" */
export interface SamplePlan {
  readonly resetsPerUnit: number;
  readonly units: number;
  readonly resetsInAll: number;
}

/**
 * Resets of each unit and units, so that both shares are shown with the confidence asked for. Resets of one unit say nothing
 * about other units, therefore both numbers are needed. undefined for shares outside (0, 1).
 */
export function planSample(question: SamplePlanQuestion): SamplePlan | undefined {
  const resets = trialsFor(question.resetReliability, question.confidence, question.failedResets);
  const units = trialsFor(question.unitReliability, question.confidence, question.failedUnits);
  if (resets === undefined || units === undefined) return undefined;
  return { resetsPerUnit: resets, units, resetsInAll: resets * units };
}
