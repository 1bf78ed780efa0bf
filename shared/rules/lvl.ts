import { MARK, ON, SPACE } from '../line/level-trace';
import { holdsLevel } from '../line/level-at';
import type { AnalogLine } from './analog-line';
import { analogLine } from './analog-line';
import type { ElementLevels } from './element-levels';
import { elementLevels, LEAST_ELEMENT_SAMPLES } from './element-levels';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notShown, plural, worstVerdict } from './rule-context';
import type { Band } from './rulebook';
import type { Judgement } from './verdict';
import { judgeAtLeast, judgeAtMost, worseOf } from './verdict';
import { activeSpans } from './active-spans';

/** The data line in volts with the levels of its elements; a not-shown where the capture lacks them. */
function dataLevels(context: RuleContext): { line: AnalogLine; levels: ElementLevels } | RuleOutcome {
  const line = analogLine(context, 'data');
  if (typeof line === 'string') return notShown(line);
  if (context.decoded.characters.count === 0) return notShown('there are no characters in the capture');
  const levels = elementLevels(context.decoded, line, context.bitTicks);
  if (levels.count === 0) {
    const needed = context.ms(context.bitTicks / 2 / LEAST_ELEMENT_SAMPLES) * 1e3;
    return notShown(
      `a sample every ${figure(context.ms(line.voltage.stepTicks) * 1e3, 0)} µs leaves fewer than ${LEAST_ELEMENT_SAMPLES} in the middle half of an element; ${figure(needed, 0)} µs or less would do`,
    );
  }
  return { line, levels };
}

interface BandJudgement {
  readonly verdict: Judgement;
  readonly limit: number;
}

/** Both ends of a band; the limit is the one that is nearer. */
function judgeBand(context: RuleContext, volts: number, band: Band): BandJudgement {
  const uncertainty = context.voltageUncertainty(volts);
  const { decision } = context.setting;
  const low = judgeAtLeast(volts, uncertainty, band.from, decision);
  const high = judgeAtMost(volts, uncertainty, band.to, decision);
  return {
    verdict: worseOf(low, high) as Judgement,
    limit: volts - band.from < band.to - volts ? band.from : band.to,
  };
}

/**
 * The band of the end probed. Where the line map does not state it, only what holds at both ends is decided: the band of the
 * driver lies within that of the receiver.
 */
function judgeLevel(context: RuleContext, volts: number): BandJudgement {
  const bands = context.setting.bands!;
  const { probedEnd } = context.decoded.map;
  if (probedEnd === 'receiver' || probedEnd === 'driver') return judgeBand(context, volts, bands[probedEnd]);
  const receiver = judgeBand(context, volts, bands.receiver);
  if (receiver.verdict === 'violation') return receiver;
  const driver = judgeBand(context, volts, bands.driver);
  return driver.verdict === 'pass' ? driver : { verdict: 'inconclusive', limit: driver.limit };
}

function judgeLevels(context: RuleContext, wanted: number, name: string): RuleOutcome {
  const data = dataLevels(context);
  if ('verdict' in data) return data;
  const { probedEnd } = context.decoded.map;
  if (context.setting.bands === undefined) return notShown('the rulebook sets no band of levels');
  if (probedEnd === 'open-circuit') {
    return notShown('the line was probed open-circuit; the band holds with a load of 3 to 7 kΩ');
  }
  const { levels } = data;
  const places: Place[] = [];
  let n = 0;
  let worst: { volts: number; margin: number; limit: number } | undefined;
  let verdict: Judgement = 'pass';
  for (let i = 0; i < levels.count; i++) {
    if (levels.levels[i] !== wanted) continue;
    n += 1;
    const volts = levels.volts[i];
    const judged = judgeLevel(context, volts);
    const band = context.setting.bands[probedEnd === 'driver' ? 'driver' : 'receiver'];
    const margin = Math.min(volts - band.from, band.to - volts);
    if (worst === undefined || margin < worst.margin) worst = { volts, margin, limit: judged.limit };
    verdict = worseOf(verdict, judged.verdict) as Judgement;
    if (judged.verdict === 'pass' || places.length >= MOST_PLACES) continue;
    places.push({
      verdict: judged.verdict,
      startTicks: levels.startTicks[i],
      endTicks: levels.startTicks[i] + context.bitTicks,
      measured: volts,
      uncertainty: context.voltageUncertainty(volts),
      limit: judged.limit,
      message: `${name} at ${volt(volts)}, limit ${volt(judged.limit)} ${endWords(probedEnd)}`,
    });
  }
  if (worst === undefined) return notShown(`no element at ${name.toLowerCase()} in the capture`);
  const isEndOpen = verdict === 'inconclusive' && probedEnd === undefined;
  return {
    verdict,
    n,
    measured: worst.volts,
    uncertainty: context.voltageUncertainty(worst.volts),
    uncertaintyKind: 'bound',
    limit: worst.limit,
    reason: `the worst of ${plural(n, 'element')} at ${name.toLowerCase()} is ${volt(worst.volts)} ${endWords(probedEnd)}${isEndOpen ? '; state in the line map which end was probed' : ''}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

function endWords(probedEnd: 'receiver' | 'driver' | 'open-circuit' | undefined): string {
  if (probedEnd === 'driver') return 'at the driver';
  return probedEnd === 'receiver' ? 'at the receiver' : 'at an end not stated';
}

function volt(value: number): string {
  return `${figure(value).replace('-', '−')} V`;
}

/** LVL-1: level of mark. */
export function judgeMark(context: RuleContext): RuleOutcome {
  return judgeLevels(context, MARK, 'Mark');
}

/** LVL-2: level of space. */
export function judgeSpace(context: RuleContext): RuleOutcome {
  return judgeLevels(context, SPACE, 'Space');
}

/** LVL-3: magnitude of the levels, open circuit. */
export function judgeOpenCircuit(context: RuleContext): RuleOutcome {
  const data = dataLevels(context);
  if ('verdict' in data) return data;
  if (context.decoded.map.probedEnd !== 'open-circuit') {
    return notShown('the line map does not state that the line was probed open-circuit, without a load');
  }
  const { levels } = data;
  const places: Place[] = [];
  let worst = 0;
  for (let i = 0; i < levels.count; i++) {
    const volts = Math.abs(levels.volts[i]);
    if (volts > Math.abs(worst)) worst = levels.volts[i];
    const uncertainty = context.voltageUncertainty(volts);
    const verdict = judgeAtMost(volts, uncertainty, context.limit, context.setting.decision);
    if (verdict === 'pass' || places.length >= MOST_PLACES) continue;
    places.push({
      verdict,
      startTicks: levels.startTicks[i],
      endTicks: levels.startTicks[i] + context.bitTicks,
      measured: volts,
      uncertainty,
      message: `${volt(levels.volts[i])} without a load, limit ${volt(context.limit)} either way`,
    });
  }
  const uncertainty = context.voltageUncertainty(worst);
  return {
    verdict: judgeAtMost(Math.abs(worst), uncertainty, context.limit, context.setting.decision),
    n: levels.count,
    measured: Math.abs(worst),
    uncertainty,
    uncertaintyKind: 'bound',
    reason: `the largest level of ${plural(levels.count, 'element')} is ${volt(worst)}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** Time a control line may take through the transition region, seconds. Source: ITU-T V.28 (03/93) clause 6. */
const CONTROL_EDGE_S = 0.001;
/** Length of the slices whose medians are the levels of a control line, seconds: about an element (house). */
const SLICE_S = 0.0008;

/** LVL-7: lowest level of RTS and DTR, while ON, as the device starts and moves. */
export function judgeSag(context: RuleContext): RuleOutcome {
  const lines = (['rts', 'dtr'] as const).map((role) => ({ role, line: analogLine(context, role) }));
  const analog = lines.filter((item): item is { role: 'rts' | 'dtr'; line: AnalogLine } => {
    return typeof item.line !== 'string';
  });
  if (analog.length === 0) return notShown(lines.map(({ line }) => line as string).join('; '));
  const spans = activeSpans(context.decoded, context.perSecond);
  if (spans.length === 0) return notShown('the device neither starts nor moves in the capture');
  const places = analog.flatMap(({ role, line }) => sagsOf(context, role, line, spans));
  if (places.length === 0) {
    return notShown('no stretch of RTS or DTR at ON is long enough while the device starts or moves');
  }
  const worst = places.reduce((a, b) => (b.measured < a.measured ? b : a));
  return {
    verdict: worstVerdict(places, 'not-shown'),
    n: places.length,
    measured: worst.measured,
    uncertainty: worst.uncertainty,
    uncertaintyKind: 'bound',
    reason: worst.message,
    findings: cap(places.filter((place) => place.verdict !== 'pass').map((place) => context.finding(place))),
  };
}

type Sag = Place & { readonly measured: number; readonly uncertainty: number };

/** The lowest slice of each stretch in which the line is ON. */
function sagsOf(
  context: RuleContext,
  role: 'rts' | 'dtr',
  { line, voltage }: AnalogLine,
  spans: ReturnType<typeof activeSpans>,
): Sag[] {
  const settle = CONTROL_EDGE_S * context.perSecond;
  const slice = SLICE_S * context.perSecond;
  const found: Sag[] = [];
  for (const span of spans) {
    let lowest: { volts: number; at: number } | undefined;
    for (let at = span.startTicks; at + slice <= span.endTicks; at += slice) {
      if (!holdsLevel(line.trace, ON, Math.max(0, at - settle), at + slice)) continue;
      const volts = voltage.median(at, at + slice, LEAST_ELEMENT_SAMPLES);
      if (volts !== undefined && (lowest === undefined || volts < lowest.volts)) lowest = { volts, at };
    }
    if (lowest === undefined) continue;
    const uncertainty = context.voltageUncertainty(lowest.volts);
    found.push({
      verdict: judgeAtLeast(lowest.volts, uncertainty, context.limit, context.setting.decision),
      startTicks: lowest.at,
      endTicks: lowest.at + slice,
      measured: lowest.volts,
      uncertainty,
      message: `${role.toUpperCase()} sags to ${volt(lowest.volts)} while the device ${span.kind === 'start' ? 'starts' : 'moves'}, limit ${volt(context.limit)}`,
    });
  }
  return found;
}
