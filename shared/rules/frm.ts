import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '../characters/character-table';
import { measureRateWindows, summariseDistortion } from '../characters/edge-distortion';
import type { DistortionSummary, RateWindow } from '../characters/edge-distortion';
import type { Decoded } from '../decode/decoded';
import { levelAt } from '../line/level-at';
import { OFF, UNKNOWN } from '../line/level-trace';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notApplicable, notShown, plural } from './rule-context';
import type { Severity } from './rulebook';
import type { Judgement } from './verdict';
import { DEFAULT_EXPOSURE, exposureText, judgeAtLeast, judgeAtMost, judgeCount } from './verdict';

const NO_DATA = 'the data line is not in the capture';
const NO_CHARACTERS = 'there are no characters in the capture';
/** Characters in one window of the rate. Source: rules.md 4. */
const RATE_WINDOW = 50;
/** Share of an element a 16-times receiver is unsure of the start edge. Source: protocol-facts 2.3. */
const QUANTISATION_PERCENT = 6.25;

function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.data === undefined) return notShown(NO_DATA);
  if (context.decoded.framing === null) return notShown(NO_CHARACTERS);
  return undefined;
}

/** Two limits: a tighter one that warns, one that blocks. The one crossed gives the severity. */
export function judgeTwoLimits(
  context: RuleContext,
  value: number,
  uncertainty: number,
): { verdict: Judgement; severity: RuleContext['setting']['severity']; limit: number } {
  const { setting } = context;
  const blocking = judgeAtMost(value, uncertainty, context.limit, setting.decision);
  if (setting.warningLimit === undefined || blocking === 'violation') {
    return { verdict: blocking, severity: setting.severity, limit: context.limit };
  }
  if (blocking === 'inconclusive')
    return { verdict: blocking, severity: setting.severity, limit: context.limit };
  const warning = judgeAtMost(value, uncertainty, setting.warningLimit, setting.decision);
  return warning === 'pass'
    ? { verdict: 'pass', severity: setting.severity, limit: setting.warningLimit }
    : { verdict: warning, severity: 'warning', limit: setting.warningLimit };
}

/** FRM-1: rate error over windows of 50 characters, the worst window. */
export function judgeRate(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { characters } = context.decoded;
  const windows = measureRateWindows(
    context.data!,
    characters,
    context.bitTicks,
    context.bitsAfterStart,
    RATE_WINDOW,
  );
  if (windows.length === 0) {
    return notShown(
      `${plural(context.countWholeCharacters(), 'undamaged character')}; ${RATE_WINDOW} are needed to measure the rate`,
    );
  }
  const nominal = context.nominalBitTicks;
  const judged = windows.map((window) => {
    const error = 100 * (nominal / window.bitTicks - 1);
    const uncertainty = rateUncertainty(context, window.sumS2S1, window.sumS2);
    return { window, error, uncertainty, ...judgeTwoLimits(context, Math.abs(error), uncertainty) };
  });
  const worst = judged.reduce((a, b) => {
    const order = weight(b) - weight(a);
    return order > 0 || (order === 0 && Math.abs(b.error) > Math.abs(a.error)) ? b : a;
  });
  const words = (error: number): string => `${figure(Math.abs(error), 3)} % ${error >= 0 ? 'fast' : 'slow'}`;
  const places: Place[] = judged
    .filter((item) => item.verdict !== 'pass')
    .map((item) => ({
      verdict: item.verdict,
      severity: item.severity,
      startTicks: characters.startTicks[item.window.firstCharacter],
      endTicks: characters.endTicks[item.window.lastCharacter],
      measured: item.error,
      uncertainty: item.uncertainty,
      uncertaintyKind: 'k2',
      limit: item.limit,
      message: `The rate is ${words(item.error)} over ${plural(item.window.characters, 'character')}, limit ${figure(item.limit)} %`,
    }));
  return {
    verdict: worst.verdict,
    severity: worst.severity,
    n: windows.length,
    measured: worst.error,
    uncertainty: worst.uncertainty,
    uncertaintyKind: 'k2',
    limit: worst.limit,
    reason: `the worst of ${plural(windows.length, 'window')} is ${words(worst.error)}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** What is decided against the blocking limit comes before what is not, and that before the warning limit. */
function weight({ verdict, severity }: { verdict: Judgement; severity: Severity }): number {
  if (verdict === 'pass') return 0;
  return (severity === 'warning' ? 0 : 2) + (verdict === 'violation' ? 2 : 1);
}

/** U of a rate, percent: 2·(T/√12)·√Σ(S₂ + S₁²) ÷ ΣS₂ ÷ T_nom, and the accuracy of the time base. Source: rules.md 4, FRM-1. */
function rateUncertainty(context: RuleContext, sumS2S1: number, sumS2: number): number {
  const standard = ((2 * context.edgeUncertainty('data')) / Math.sqrt(12)) * (Math.sqrt(sumS2S1) / sumS2);
  return 100 * ((2 * standard) / context.nominalBitTicks + context.timeAccuracy);
}

/** Three rules ask for the distortion at the measured rate. */
const SYNCHRONOUS = new WeakMap<Decoded, DistortionSummary>();

function synchronousDistortion(context: RuleContext): DistortionSummary {
  const kept = SYNCHRONOUS.get(context.decoded);
  if (kept !== undefined) return kept;
  const summary = distortion(context, context.bitTicks);
  SYNCHRONOUS.set(context.decoded, summary);
  return summary;
}

function distortion(context: RuleContext, unitTicks: number): DistortionSummary {
  return summariseDistortion(
    context.data!,
    context.decoded.characters,
    context.bitTicks,
    unitTicks,
    context.bitsAfterStart,
  );
}

const NO_TRANSITIONS = 'no undamaged character has a transition after its start';

/** FRM-2: gross start-stop distortion, against the nominal element. */
export function judgeGrossDistortion(context: RuleContext): RuleOutcome {
  return judgeDistortion(
    context,
    () => distortion(context, context.nominalBitTicks),
    'gross start-stop distortion',
  );
}

/** FRM-8: synchronous start-stop distortion, against the measured element. */
export function judgeSynchronousDistortion(context: RuleContext): RuleOutcome {
  return judgeDistortion(context, () => synchronousDistortion(context), 'synchronous distortion');
}

function judgeDistortion(
  context: RuleContext,
  summarise: () => DistortionSummary,
  what: string,
): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const summary = summarise();
  if (summary.transitions === 0) return notShown(NO_TRANSITIONS);
  const value = Math.max(summary.worstLate, -summary.worstEarly);
  const uncertainty = (100 * context.differenceUncertainty(0, 'data')) / context.nominalBitTicks;
  const judged = judgeTwoLimits(context, value, uncertainty);
  const { startTicks, endTicks } = context.decoded.characters;
  const p99 =
    summary.p99 === undefined
      ? ''
      : `; 99 % of ${summary.transitions} transitions within ${figure(summary.p99, 1)} %`;
  const reason = `late ${figure(summary.worstLate, 1)} %, early ${figure(-summary.worstEarly, 1)} %${p99}`;
  return {
    verdict: judged.verdict,
    severity: judged.severity,
    n: summary.transitions,
    measured: value,
    uncertainty,
    uncertaintyKind: 'bound',
    limit: judged.limit,
    reason,
    findings: [
      context.finding({
        verdict: judged.verdict,
        severity: judged.severity,
        startTicks: startTicks[summary.worstCharacter],
        endTicks: endTicks[summary.worstCharacter],
        measured: value,
        uncertainty,
        limit: judged.limit,
        message: `Largest ${what} ${figure(value, 1)} ± ${figure(uncertainty, 1)} %, limit ${figure(judged.limit, 1)} %`,
      }),
    ],
  };
}

/** FRM-3, FRM-5, FRM-6: damaged characters. */
function judgeErrors(
  context: RuleContext,
  flag: number,
  what: string,
  message: string,
  counts: (character: number) => boolean = () => true,
): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { characters } = context.decoded;
  const places: Place[] = [];
  let n = 0;
  for (let i = 0; i < characters.count; i++) {
    n += 1;
    if ((characters.errors[i] & flag) === 0 || !counts(i)) continue;
    places.push({
      verdict: 'violation',
      startTicks: characters.startTicks[i],
      endTicks: characters.endTicks[i],
      message,
    });
  }
  const verdict = judgeCount(places.length, 0, context.limit);
  const least = context.setting.minimumCount ?? DEFAULT_EXPOSURE;
  if (verdict === 'pass' && n < least) {
    return {
      ...notShown(`${exposureText(0, n, what)}; ${least} characters are needed to call that a pass`),
      n,
    };
  }
  return {
    verdict,
    n,
    measured: places.length,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason: exposureText(places.length, n, what),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

export function judgeStopElements(context: RuleContext): RuleOutcome {
  return judgeErrors(
    context,
    FRAMING_ERROR,
    'characters with the stop element at space',
    'The stop element is at space: a receiver reports a framing error',
  );
}

export function judgeParity(context: RuleContext): RuleOutcome {
  if (context.decoded.framing?.parity === 'none') return notApplicable('the format has no parity element');
  return judgeErrors(context, PARITY_ERROR, 'characters with wrong parity', 'The parity element is wrong');
}

export function judgeBreaks(context: RuleContext): RuleOutcome {
  const { rts } = context;
  const { startTicks } = context.decoded.characters;
  return judgeErrors(
    context,
    BREAK_ERROR,
    'breaks among the characters',
    'The line is held at space for longer than a whole character: a break',
    (i) => rts === undefined || levelAt(rts, startTicks[i]) !== OFF,
  );
}

/** FRM-4: elements shorter than half a bit. */
export function judgeShortElements(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const bit = context.nominalBitTicks;
  if (context.decoded.resolutionTicks > bit / 8) {
    return notShown(
      `a sample every ${figure(context.ms(context.decoded.resolutionTicks), 3)} ms is too coarse; ${figure(context.ms(bit / 8), 3)} ms would do`,
    );
  }
  const { ticks, levels, initialLevel } = context.data!;
  const doubt = context.differenceUncertainty(0, 'data');
  const places: Place[] = [];
  let definite = 0;
  let undecided = 0;
  for (let i = 1; i < ticks.length; i++) {
    const before = i === 1 ? initialLevel : levels[i - 2];
    if (levels[i] === UNKNOWN || levels[i - 1] === UNKNOWN || before === UNKNOWN) continue;
    const width = ticks[i] - ticks[i - 1];
    const verdict = judgeAtLeast(width, doubt, bit / 2, context.setting.decision);
    if (verdict === 'pass') continue;
    if (verdict === 'violation') definite += 1;
    else undecided += 1;
    if (places.length >= MOST_PLACES) continue;
    places.push({
      verdict,
      startTicks: ticks[i - 1],
      endTicks: ticks[i],
      message: `A pulse of ${figure(context.ms(width) * 1e3, 1)} µs: shorter than half a bit`,
    });
  }
  const n = context.decoded.characters.count;
  const verdict = judgeCount(definite, undecided, context.limit);
  const least = context.setting.minimumCount ?? DEFAULT_EXPOSURE;
  if (verdict === 'pass' && n < least) {
    return {
      ...notShown(`no short element in ${plural(n, 'character')}; ${least} are needed to call that a pass`),
      n,
    };
  }
  return {
    verdict,
    n,
    measured: definite,
    uncertainty: undecided,
    uncertaintyKind: 'bound',
    reason:
      definite + undecided === 0
        ? exposureText(0, n, 'characters with an element shorter than half a bit')
        : `${plural(definite, 'element')} shorter than half a bit in ${plural(n, 'character')}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** FRM-7: pause between characters of one packet, in character times. */
export function judgeInnerGaps(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { characters, packets, packetOfCharacter } = context.decoded;
  if (packets.count === 0) return notShown('there are no packets in the capture');
  const unit = context.characterTicks;
  const places: Place[] = [];
  let worst = 0;
  let n = 0;
  const uncertainty = context.differenceUncertainty(unit, 'data') / unit;
  for (let i = 1; i < characters.count; i++) {
    if (packetOfCharacter[i] < 0 || packetOfCharacter[i] !== packetOfCharacter[i - 1]) continue;
    n += 1;
    const gap = Math.max(0, characters.startTicks[i] - characters.endTicks[i - 1]) / unit;
    if (gap > worst) worst = gap;
    const verdict = judgeAtMost(gap, uncertainty, context.limit, context.setting.decision);
    if (verdict === 'pass' || places.length >= MOST_PLACES) continue;
    places.push({
      verdict,
      startTicks: characters.endTicks[i - 1],
      endTicks: characters.startTicks[i],
      measured: gap,
      uncertainty,
      message: `A pause of ${figure(gap)} character times inside a packet`,
    });
  }
  return {
    verdict: judgeAtMost(worst, uncertainty, context.limit, context.setting.decision),
    n,
    measured: worst,
    uncertainty,
    uncertaintyKind: 'bound',
    reason: `the longest pause inside a packet is ${figure(worst)} character times`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** FRM-9: bias distortion, absolute. */
export function judgeBias(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const summary = synchronousDistortion(context);
  if (summary.bias === undefined)
    return notShown('transitions in both directions are needed inside characters');
  const uncertainty =
    (2 * 100 * 2 * context.edgeUncertainty('data')) /
    context.nominalBitTicks /
    Math.sqrt(12 * (summary.transitions / 4));
  return {
    verdict: judgeAtMost(Math.abs(summary.bias), uncertainty, context.limit, context.setting.decision),
    n: summary.transitions,
    measured: summary.bias,
    uncertainty,
    uncertaintyKind: 'k2',
    reason: `spaces are ${figure(Math.abs(summary.bias), 2)} % of a bit ${summary.bias >= 0 ? 'longer' : 'shorter'} than they should be`,
  };
}

/** U of the rate over the whole capture, percent. */
function wholeRateUncertainty(context: RuleContext): number {
  const windowsOf = (least: number): readonly RateWindow[] =>
    measureRateWindows(
      context.data!,
      context.decoded.characters,
      context.bitTicks,
      context.bitsAfterStart,
      least,
    );
  const large = windowsOf(RATE_WINDOW);
  const windows = large.length > 0 ? large : windowsOf(1);
  const sum = (of: (window: RateWindow) => number): number => windows.reduce((a, b) => a + of(b), 0);
  return rateUncertainty(
    context,
    sum(({ sumS2S1 }) => sumS2S1),
    sum(({ sumS2 }) => sumS2),
  );
}

/** FRM-10: receiver margin left. */
export function judgeMargin(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const summary = synchronousDistortion(context);
  if (summary.transitions === 0) return notShown(NO_TRANSITIONS);
  const position = context.bitsAfterStart + 1.5;
  const rateError = Math.abs(100 * (context.nominalBitTicks / context.bitTicks - 1));
  const delta = Math.max(summary.worstLate, -summary.worstEarly);
  const margin = 50 - QUANTISATION_PERCENT - rateError * position - delta;
  // U = p·U(rate) + U(δ). Source: rules.md 4, FRM-10.
  const uncertainty =
    position * wholeRateUncertainty(context) +
    (100 * context.differenceUncertainty(0, 'data')) / context.nominalBitTicks;
  return {
    verdict: judgeAtLeast(margin, uncertainty, context.limit, context.setting.decision),
    n: summary.transitions,
    measured: margin,
    uncertainty,
    uncertaintyKind: 'bound',
    reason: `50 − 6.25 − ${figure(rateError, 2)} · ${position} − ${figure(delta, 1)} leaves ${figure(margin, 1)} %`,
  };
}
