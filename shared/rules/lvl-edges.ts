import { estimateNoise } from '../line/analog-trace';
import type { AnalogLine } from './analog-line';
import { analogLine } from './analog-line';
import type { VoltageEdge } from './line-edges';
import { findVoltageEdges, LEAST_EDGE_SAMPLES, REGION_V, samplesWithin } from './line-edges';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notShown, plural } from './rule-context';
import type { Judgement } from './verdict';
import { judgeAtMost, worseOf } from './verdict';

/** The rate the limit of LVL-5 is written for, bit/s. Source: rules.md 9. */
const LIMIT_BIT_RATE = 1200;
/** The coarsest sampling that shows a transition time, as a share of an element: 5 µs at 1200 bit/s. Source: rules.md 9, LVL-5. */
const COARSEST_SHARE = 5e-6 * LIMIT_BIT_RATE;
/** However slow the line, a data edge may not take longer, µs. Source: ITU-T V.28 (03/93) clause 6. */
const LONGEST_EDGE_US = 1000;
/** TIA-232-F allows 4 % of the element where V.28 allows 3 %. Source: protocol-facts 1.1. */
const TIA_TO_V28 = 4 / 3;

interface DataEdges {
  readonly line: AnalogLine;
  readonly edges: readonly VoltageEdge[];
  readonly short: number;
  /** Typical scatter of a sample, volts. */
  readonly noiseV: number;
  /** Interval of the samples, µs. */
  readonly stepUs: number;
}

function dataEdges(context: RuleContext): DataEdges | RuleOutcome {
  const line = analogLine(context, 'data');
  if (typeof line === 'string') return notShown(line);
  if (line.voltage.isStepped) {
    return notShown('the file holds the changes of the voltage, not samples: edges cannot be seen in it');
  }
  const { edges, short } = findVoltageEdges(line);
  if (edges.length === 0) {
    return notShown(
      short === 0
        ? 'the data line does not change in the capture'
        : `none of ${plural(short, 'edge')} goes from beyond −3 V to beyond +3 V: see the levels (LVL-1, LVL-2)`,
    );
  }
  const noiseV = estimateNoise(line.channel.values, line.line.thresholds!);
  return { line, edges, short, noiseV, stepUs: context.ms(line.voltage.stepTicks) * 1e3 };
}

/** Gathers places and the worst value of one figure per edge. */
class EdgeJudge {
  readonly places: Place[] = [];
  verdict: Judgement = 'pass';
  worst = -Infinity;
  uncertainty = 0;
  n = 0;
  /** Edges with too few samples to be measured. */
  unresolved = 0;

  constructor(
    private readonly context: RuleContext,
    private readonly data: DataEdges,
    private readonly limit: number,
  ) {}

  add(edge: VoltageEdge, value: number, uncertainty: number, message: string): void {
    this.n += 1;
    const verdict = judgeAtMost(value, uncertainty, this.limit, this.context.setting.decision);
    this.verdict = worseOf(this.verdict, verdict) as Judgement;
    if (value > this.worst) {
      this.worst = value;
      this.uncertainty = uncertainty;
    }
    if (verdict === 'pass' || this.places.length >= MOST_PLACES) return;
    const { voltage } = this.data.line;
    this.places.push({
      verdict,
      startTicks: voltage.timeOf(edge.before),
      endTicks: voltage.timeOf(edge.after),
      measured: value,
      uncertainty,
      uncertaintyKind: 'k2',
      limit: this.limit,
      message,
    });
  }

  outcome(reason: string, limit: number | undefined = this.limit): RuleOutcome {
    const left =
      this.unresolved === 0
        ? ''
        : `; ${plural(this.unresolved, 'edge')} with fewer than ${LEAST_EDGE_SAMPLES} samples within ±3 V`;
    return {
      verdict: this.unresolved > 0 && this.verdict === 'pass' ? 'inconclusive' : this.verdict,
      n: this.n,
      measured: this.worst,
      uncertainty: this.uncertainty,
      uncertaintyKind: 'k2',
      limit,
      reason: reason + left,
      findings: cap(this.places.map((place) => this.context.finding(place))),
    };
  }
}

function tooFewSamples(data: DataEdges, needed: string): RuleOutcome {
  return notShown(
    `no edge has ${LEAST_EDGE_SAMPLES} samples within ±3 V at a sample every ${figure(data.stepUs, 2)} µs; ${needed}`,
  );
}

/** LVL-4: slew within ±3 V, the steepest four samples in a row of each edge. */
export function judgeSlew(context: RuleContext): RuleOutcome {
  const data = dataEdges(context);
  if ('verdict' in data) return data;
  const judge = new EdgeJudge(context, data, context.limit);
  for (const edge of data.edges) {
    if (samplesWithin(edge) < LEAST_EDGE_SAMPLES) {
      judge.unresolved += 1;
      continue;
    }
    const slew = steepest(data.line, edge) / context.tickS / 1e6;
    // Gain of the instrument, and twice the scatter of a slope through four samples: σ ÷ (√5 · step).
    const gain = (context.voltageUncertainty(1) - context.voltageUncertainty(0)) * slew;
    const uncertainty = gain + (2 * data.noiseV) / (Math.sqrt(5) * data.stepUs);
    judge.add(
      edge,
      slew,
      uncertainty,
      `An edge of ${figure(slew)} V/µs, limit ${figure(context.limit)} V/µs`,
    );
  }
  if (judge.n === 0) {
    return tooFewSamples(data, 'an edge at the limit lasts 0.2 µs: sample 20 million times a second or more');
  }
  return judge.outcome(`the steepest of ${plural(judge.n, 'edge')} is ${figure(judge.worst)} V/µs`);
}

/** Largest slope through four samples in a row within the region, volts per tick, by least squares. */
function steepest({ voltage }: AnalogLine, { before, after, direction }: VoltageEdge): number {
  let best = 0;
  for (let i = before + 1; i + LEAST_EDGE_SAMPLES <= after; i++) {
    let meanT = 0;
    let meanV = 0;
    for (let k = i; k < i + LEAST_EDGE_SAMPLES; k++) {
      meanT += voltage.timeOf(k) / LEAST_EDGE_SAMPLES;
      meanV += voltage.valueOf(k) / LEAST_EDGE_SAMPLES;
    }
    let products = 0;
    let squares = 0;
    for (let k = i; k < i + LEAST_EDGE_SAMPLES; k++) {
      const t = voltage.timeOf(k) - meanT;
      products += t * (voltage.valueOf(k) - meanV);
      squares += t * t;
    }
    best = Math.max(best, (direction * products) / squares);
  }
  return best;
}

/** LVL-5: time within ±3 V, each data edge. */
export function judgeTransitionTime(context: RuleContext): RuleOutcome {
  const data = dataEdges(context);
  if ('verdict' in data) return data;
  if (context.nominalBitTicks === 0) return notShown('there are no characters in the capture');
  const coarsest = COARSEST_SHARE * context.ms(context.nominalBitTicks) * 1e3;
  if (data.stepUs > coarsest * (1 + 1e-9)) {
    return notShown(
      `a sample every ${figure(data.stepUs)} µs is too coarse; ${figure(coarsest)} µs would do`,
    );
  }
  const rate = context.perSecond / context.nominalBitTicks;
  const limit = Math.min(LONGEST_EDGE_US, (context.limit * LIMIT_BIT_RATE) / rate);
  const judge = new EdgeJudge(context, data, limit);
  for (const edge of data.edges) {
    const time = context.ms(transitTicks(data.line, edge)) * 1e3;
    const uncertainty = transitUncertainty(context, data, edge, time);
    judge.add(edge, time, uncertainty, `${figure(time, 1)} µs within ±3 V, limit ${figure(limit, 1)} µs`);
  }
  return judge.outcome(
    `the slowest of ${plural(judge.n, 'edge')} is ${figure(judge.worst, 1)} µs within ±3 V; V.28 allows ${figure(limit, 1)} µs, TIA-232-F ${figure(Math.min(LONGEST_EDGE_US, limit * TIA_TO_V28), 1)} µs`,
  );
}

function transitTicks(line: AnalogLine, edge: VoltageEdge): number {
  const enter = crossing(line, edge.before, -edge.direction * REGION_V);
  const leave = crossing(line, edge.after - 1, edge.direction * REGION_V);
  return leave - enter;
}

/** Instant between samples `i` and `i + 1` at which the straight line through them is at `volts`. */
function crossing({ voltage }: AnalogLine, i: number, volts: number): number {
  const from = voltage.valueOf(i);
  const step = voltage.valueOf(i + 1) - from;
  const part = step === 0 ? 0.5 : Math.min(1, Math.max(0, (volts - from) / step));
  return voltage.timeOf(i) + part * (voltage.timeOf(i + 1) - voltage.timeOf(i));
}

/** Two interpolated crossings, and what the accuracy of the voltages moves them by. Source: rules.md 1, uncertainty of time. */
function transitUncertainty(
  context: RuleContext,
  { line, noiseV, stepUs }: DataEdges,
  edge: VoltageEdge,
  timeUs: number,
): number {
  const { voltage } = line;
  const doubt = (i: number): number => {
    const step = Math.abs(voltage.valueOf(i + 1) - voltage.valueOf(i));
    return step === 0 ? stepUs / 2 : Math.min(stepUs / 2, (stepUs * noiseV) / step);
  };
  const amplitude = (timeUs * 2 * context.voltageUncertainty(REGION_V)) / (2 * REGION_V);
  return doubt(edge.before) + doubt(edge.after - 1) + amplitude + timeUs * context.timeAccuracy;
}

/** A turn-back this many times the scatter of a sample is the noise's own (house). */
const NOISE_TIMES = 6;
/** The least that counts as a turn-back, volts (house). */
const LEAST_TURN_BACK_V = 0.05;

/** LVL-6: straight through the transition region: no turning back within it, no coming back into it, beyond the noise. */
export function judgeStraightThrough(context: RuleContext): RuleOutcome {
  const data = dataEdges(context);
  if ('verdict' in data) return data;
  const noise = Math.max(LEAST_TURN_BACK_V, NOISE_TIMES * data.noiseV);
  // Up to the noise passes, from twice the noise on it is a turn-back, what lies between cannot be told.
  const judge = new EdgeJudge(context, data, 1.5 * noise);
  data.edges.forEach((edge, k) => {
    const until = data.edges.at(k + 1)?.before ?? data.line.voltage.firstFrom(data.line.line.trace.endTicks);
    const volts = Math.max(turnBack(data.line, edge), comeBack(data.line, edge, until));
    if (volts <= noise && samplesWithin(edge) < LEAST_EDGE_SAMPLES) {
      judge.unresolved += 1;
      return;
    }
    judge.add(
      edge,
      volts,
      noise / 2,
      `The line turns back by ${figure(volts)} V within ±3 V; its noise is ${figure(noise)} V`,
    );
  });
  if (judge.n === 0) return tooFewSamples(data, 'sample faster');
  return judge.outcome(
    `the largest turn-back of ${plural(judge.n, 'edge')} is ${figure(Math.max(0, judge.worst))} V, the noise up to ${figure(noise)} V`,
  );
}

/** Largest way back against the direction of the edge within the region, volts. */
function turnBack({ voltage }: AnalogLine, { before, after, direction }: VoltageEdge): number {
  let furthest = -REGION_V;
  let most = 0;
  for (let i = before + 1; i <= after; i++) {
    const along = Math.min(REGION_V, direction * voltage.valueOf(i));
    most = Math.max(most, furthest - along);
    furthest = Math.max(furthest, along);
  }
  return most;
}

/** How far the line comes back into the region between the edge and sample `until`, volts. */
function comeBack({ voltage }: AnalogLine, { after, direction }: VoltageEdge, until: number): number {
  let lowest = REGION_V;
  for (let i = after; i <= until && i < voltage.count; i++) {
    const along = direction * voltage.valueOf(i);
    if (along < lowest) lowest = along;
  }
  return REGION_V - lowest;
}
