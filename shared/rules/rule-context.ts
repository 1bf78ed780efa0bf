import { bitsAfterStart, elementsPerCharacter } from '../characters/framing';
import type { Decoded } from '../decode/decoded';
import {
  DEFAULT_TIME_ACCURACY_PPM,
  DEFAULT_VOLTAGE_ACCURACY_PERCENT,
  DEFAULT_VOLTAGE_ACCURACY_V,
} from '../line/line-map';
import type { LineRole } from '../line/line-map';
import type { LevelTrace } from '../line/level-trace';
import { isMFamily } from '../packets/packet-lengths';
import type { UncertaintyKind } from '../time/measurement';
import { secondsPerTick, ticksPerSecond } from '../time/time-base';
import type { Finding, Verdict } from './finding';
import type { RuleDefinition } from './rule-definition';
import type { RuleSetting, Severity } from './rulebook';
import type { Judgement } from './verdict';
import { worseOf } from './verdict';

export { figure, notApplicable, notShown, plural } from './outcome';
export type { RuleOutcome } from './outcome';

/** Findings kept per rule: more help nobody; the counts stay exact. */
export const MOST_FINDINGS = 1000;
/** Places gathered per rule before the worst of them become findings: memory stays bounded, the counts exact. */
export const MOST_PLACES = 2000;

/** One judged place before it becomes a `Finding`. */
export interface Place {
  readonly verdict: Finding['verdict'];
  readonly startTicks: number;
  readonly endTicks: number;
  readonly measured?: number;
  readonly uncertainty?: number;
  readonly uncertaintyKind?: UncertaintyKind;
  readonly limit?: number;
  readonly severity?: Severity;
  readonly message: string;
}

/** Everything a rule may look at, with the arithmetic all of them share. */
export class RuleContext {
  readonly perSecond: number;
  readonly tickS: number;
  /** One element at the nominal rate, ticks; 0 without characters. */
  readonly nominalBitTicks: number;
  /** One element at the measured rate, ticks; 0 without characters. */
  readonly bitTicks: number;
  /** One character at the nominal rate, ticks. */
  readonly characterTicks: number;
  private readonly ppm: number;
  private readonly skewTicks: number;
  private readonly edgeBounds = new Map<LineRole, number>();

  constructor(
    readonly decoded: Decoded,
    readonly setting: RuleSetting,
    readonly definition: RuleDefinition,
    /** Settings of the other rules: some limits are shared. */
    readonly settings: ReadonlyMap<string, RuleSetting>,
  ) {
    const { framing, capture, map } = decoded;
    this.perSecond = ticksPerSecond(capture.timeBase);
    this.tickS = secondsPerTick(capture.timeBase);
    this.nominalBitTicks = framing === null ? 0 : this.perSecond / framing.nominalBitRate;
    this.bitTicks = framing === null ? 0 : this.perSecond / framing.bitRate;
    this.characterTicks = framing === null ? 0 : this.nominalBitTicks * elementsPerCharacter(framing);
    this.ppm = map.timeAccuracyPpm ?? DEFAULT_TIME_ACCURACY_PPM;
    this.skewTicks = (map.thresholdSkewS ?? 0) * this.perSecond;
  }

  get limit(): number {
    return this.setting.limit ?? 0;
  }

  get data(): LevelTrace | undefined {
    return this.decoded.lines.data?.trace;
  }

  get rts(): LevelTrace | undefined {
    return this.decoded.lines.rts?.trace;
  }

  get bitsAfterStart(): number {
    return this.decoded.framing === null ? 0 : bitsAfterStart(this.decoded.framing);
  }

  /** Protocols of the M family; true also where no protocol was found, since nothing speaks against it. */
  get isMFamily(): boolean {
    return this.decoded.protocol === null || isMFamily(this.decoded.protocol);
  }

  /**
   * Bound of the error of a difference of two edges, in ticks: T (half of it an edge, or the worst error of an interpolated
   * edge), the accuracy of the time base, and the stated skew where the edges lie on two lines.
   * Source: rules.md 1, uncertainty of time.
   */
  differenceUncertainty(differenceTicks: number, from: LineRole, to: LineRole = from): number {
    const edges = this.edgeUncertainty(from) + this.edgeUncertainty(to);
    return edges + this.timeAccuracy * Math.abs(differenceTicks) + (from === to ? 0 : this.skewTicks);
  }

  /** Bound of the error of one edge, ticks: T/2, or the worst of the interpolated edges of a line in volts. */
  edgeUncertainty(role: LineRole): number {
    let worst = this.edgeBounds.get(role);
    if (worst === undefined) {
      worst = worstOf(this.decoded.lines[role]?.trace.edgeUncertainty) ?? this.decoded.resolutionTicks / 2;
      this.edgeBounds.set(role, worst);
    }
    return worst;
  }

  /**
   * Bound of the error of a voltage, volts: what the line map states, by default 3 % and 0.1 V. Source: rules.md 9 (house).
   */
  voltageUncertainty(volts: number): number {
    const { voltageAccuracyPercent, voltageAccuracyV } = this.decoded.map;
    const share = (voltageAccuracyPercent ?? DEFAULT_VOLTAGE_ACCURACY_PERCENT) / 100;
    return share * Math.abs(volts) + (voltageAccuracyV ?? DEFAULT_VOLTAGE_ACCURACY_V);
  }

  /** Accuracy of the time base as a share. */
  get timeAccuracy(): number {
    return this.ppm * 1e-6;
  }

  ms(ticks: number): number {
    return ticks * this.tickS * 1e3;
  }

  /** Ticks of a limit in ms; whole where the limit is a whole number of ticks, so that comparisons stay exact. */
  ticksOfMs(ms: number): number {
    const ticks = (ms / 1e3) * this.perSecond;
    const whole = Math.round(ticks);
    return Math.abs(ticks - whole) < 1e-6 * Math.max(1, whole) ? whole : ticks;
  }

  finding(place: Place): Finding {
    return {
      rule: this.definition.id,
      verdict: place.verdict,
      severity: place.severity ?? this.setting.severity,
      startTicks: place.startTicks,
      endTicks: place.endTicks,
      measured: place.measured ?? null,
      uncertainty: place.uncertainty ?? null,
      uncertaintyKind: place.uncertaintyKind ?? (place.uncertainty === undefined ? null : 'bound'),
      limit: place.limit ?? (place.measured === undefined ? null : this.setting.limit),
      unit: place.measured === undefined ? null : this.definition.unit,
      message: place.message,
    };
  }

  /** Characters of the capture that are neither damaged nor breaks. */
  countWholeCharacters(): number {
    const { errors, count } = this.decoded.characters;
    let whole = 0;
    for (let i = 0; i < count; i++) if (errors[i] === 0) whole += 1;
    return whole;
  }
}

/** The largest of a list; undefined without any. */
function worstOf(list: Float32Array | undefined): number | undefined {
  if (list === undefined || list.length === 0) return undefined;
  let worst = 0;
  for (const value of list) if (value > worst) worst = value;
  return worst;
}

/** The worst verdict of places, `fallback` without any. */
export function worstVerdict(
  places: readonly { readonly verdict: Verdict | Judgement }[],
  fallback: Verdict,
): Verdict {
  return places.length === 0
    ? fallback
    : places.reduce<Verdict>((worst, place) => worseOf(worst, place.verdict), 'not-applicable');
}

/** Findings of violations first where the cap bites. */
export function cap(findings: readonly Finding[]): readonly Finding[] {
  if (findings.length <= MOST_FINDINGS) return findings;
  const rank = { violation: 0, inconclusive: 1, 'not-shown': 2, pass: 3 };
  return [...findings].sort((a, b) => rank[a.verdict] - rank[b.verdict]).slice(0, MOST_FINDINGS);
}
