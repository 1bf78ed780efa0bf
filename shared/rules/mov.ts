import type { DeclaredSpan } from '../line/line-map';
import type { Decoded } from '../decode/decoded';
import { poissonUpperBound } from '../statistics/poisson';
import { countBefore } from '../time/sorted-search';
import { toTicks } from '../time/time-base';
import { judgeSaturatedShare } from './pooled';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notShown, plural, worstVerdict } from './rule-context';
import { DEFAULT_EXPOSURE, judgeAtMost, judgeCount } from './verdict';

/** Largest step a protocol can say per axis: 127 or 128 counts, twice that in five-byte packets. */
const LIMIT_COUNTS = 127;
/** Steps this large of opposite sign in neighbouring packets are taken for a wrap. Source: rules.md 7. */
const WRAP_STEP = 100;
const MM_PER_INCH = 25.4;

/** Moving packets, and those with an axis at its numeric limit. */
export function countSaturated({ packets, protocol }: Decoded): { n: number; saturated: number } {
  const ceiling = protocol === 'five-byte' ? 2 * LIMIT_COUNTS : LIMIT_COUNTS;
  let n = 0;
  let saturated = 0;
  for (let p = 0; p < packets.count; p++) {
    if (packets.dx[p] === 0 && packets.dy[p] === 0) continue;
    n += 1;
    if (Math.abs(packets.dx[p]) >= ceiling || Math.abs(packets.dy[p]) >= ceiling) saturated += 1;
  }
  return { n, saturated };
}

/** MOV-1: share of moving packets with an axis at its numeric limit, in percent. */
export function judgeSaturation(context: RuleContext): RuleOutcome {
  return judgeSaturatedShare(countSaturated(context.decoded), context.setting);
}

/** Large steps of opposite sign. */
function isWrap(a: number, b: number): boolean {
  return Math.abs(a) >= WRAP_STEP && Math.abs(b) >= WRAP_STEP && Math.sign(a) !== Math.sign(b);
}

/** MOV-2: suspected wrap of a counter. */
export function judgeWrap(context: RuleContext): RuleOutcome {
  const { packets, characters } = context.decoded;
  if (packets.count < 2) return notShown('fewer than two packets in the capture');
  const least = context.setting.minimumCount ?? DEFAULT_EXPOSURE;
  const places: Place[] = [];
  let count = 0;
  for (let p = 1; p < packets.count; p++) {
    if (!isWrap(packets.dx[p - 1], packets.dx[p]) && !isWrap(packets.dy[p - 1], packets.dy[p])) continue;
    const from = characters.startTicks[packets.firstCharacter[p - 1]];
    const to = characters.startTicks[packets.firstCharacter[p]];
    if (to - from > 1.2 * packets.characterCount[p - 1] * context.characterTicks) continue;
    count += 1;
    if (places.length >= MOST_PLACES) continue;
    places.push({
      verdict: 'violation',
      startTicks: from,
      endTicks: characters.endTicks[packets.firstCharacter[p] + packets.characterCount[p] - 1],
      message: `Steps of (${packets.dx[p - 1]}, ${packets.dy[p - 1]}) and (${packets.dx[p]}, ${packets.dy[p]}) follow each other: a counter may have wrapped`,
    });
  }
  const verdict = judgeCount(count, 0, context.limit);
  if (verdict === 'pass' && characters.count < least) {
    return {
      ...notShown(
        `${plural(count, 'suspected wrap')} in ${plural(characters.count, 'character')}; ${least} are needed to call that a pass`,
      ),
      n: packets.count,
    };
  }
  return {
    verdict,
    n: packets.count,
    measured: count,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason: `${plural(count, 'suspected wrap')} in ${plural(packets.count, 'packet')}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** Movement summed over a declared span. */
interface SpanSum {
  readonly span: DeclaredSpan;
  readonly startTicks: number;
  readonly endTicks: number;
  readonly dx: number;
  readonly dy: number;
  readonly pathCounts: number;
  readonly packets: number;
}

function sumSpans(context: RuleContext, kind: DeclaredSpan['kind']): SpanSum[] {
  const { packets, characters, map, capture } = context.decoded;
  return (map.declared ?? [])
    .filter((span) => span.kind === kind)
    .map((span) => ({
      span,
      startTicks: Math.max(0, toTicks(capture.timeBase, span.startS)),
      endTicks: Math.min(capture.endTicks, toTicks(capture.timeBase, span.endS)),
    }))
    .filter(({ startTicks, endTicks }) => endTicks > startTicks)
    .map(({ span, startTicks, endTicks }) => {
      let dx = 0;
      let dy = 0;
      let pathCounts = 0;
      let count = 0;
      for (let p = firstPacketFrom(context.decoded, startTicks); p < packets.count; p++) {
        if (characters.startTicks[packets.firstCharacter[p]] >= endTicks) break;
        dx += packets.dx[p];
        dy += packets.dy[p];
        pathCounts += Math.hypot(packets.dx[p], packets.dy[p]);
        count += 1;
      }
      return { span, startTicks, endTicks, dx, dy, pathCounts, packets: count };
    });
}

/** Index of the first packet that starts at or after an instant. */
function firstPacketFrom({ packets, characters }: Decoded, at: number): number {
  return countBefore(packets.firstCharacter, countBefore(characters.startTicks, at));
}

/** Judges each declared span by one figure. */
function judgeSpans(
  context: RuleContext,
  kind: DeclaredSpan['kind'],
  lack: string,
  measure: (sum: SpanSum) => { value: number; uncertainty: number; message: string } | undefined,
): RuleOutcome {
  const { lines, protocol, characters, capture } = context.decoded;
  if (lines.data === undefined && capture.format !== 'bytes')
    return notShown('the data line is not in the capture');
  if (protocol === null && characters.count > 0) return notShown('the characters fit no known protocol');
  const places: Place[] = [];
  for (const sum of sumSpans(context, kind)) {
    const measured = measure(sum);
    if (measured === undefined) continue;
    places.push({
      verdict: judgeAtMost(
        Math.abs(measured.value),
        measured.uncertainty,
        context.limit,
        context.setting.decision,
      ),
      startTicks: sum.startTicks,
      endTicks: sum.endTicks,
      measured: measured.value,
      uncertainty: measured.uncertainty,
      message: measured.message,
    });
  }
  if (places.length === 0) return notShown(lack);
  const worst = places.reduce((a, b) => (Math.abs(b.measured!) > Math.abs(a.measured!) ? b : a));
  return {
    verdict: worstVerdict(places, 'not-shown'),
    n: places.length,
    measured: worst.measured,
    uncertainty: worst.uncertainty,
    uncertaintyKind: 'bound',
    reason: worst.message,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** MOV-3: counts over a declared stroke against the declared resolution, in percent. */
export function judgeResolution(context: RuleContext): RuleOutcome {
  const { countsPerInch } = context.decoded.map;
  if (countsPerInch === undefined) return notShown('the device has no declared counts per inch');
  return judgeSpans(context, 'stroke', 'no stroke of a known length is declared', ({ span, dx, dy }) => {
    if (span.lengthMm === undefined || span.axis === undefined) return undefined;
    const counts = Math.abs(span.axis === 'x' ? dx : dy);
    const due = (span.lengthMm / MM_PER_INCH) * countsPerInch;
    const value = 100 * (counts / due - 1);
    const uncertainty = (100 * (span.lengthUncertaintyMm ?? 0)) / span.lengthMm + 100 / due;
    return {
      value,
      uncertainty,
      message: `${counts} counts where ${figure(due, 0)} are due: ${figure(value, 1)} %`,
    };
  });
}

/** MOV-4: what is left of a closed path, in percent of its length. */
export function judgeClosure(context: RuleContext): RuleOutcome {
  return judgeSpans(context, 'closed-path', 'no closed path is declared', ({ dx, dy, pathCounts }) => {
    if (pathCounts === 0) return undefined;
    const value = (100 * Math.hypot(dx, dy)) / pathCounts;
    return {
      value,
      uncertainty: 100 / pathCounts,
      message: `(${dx}, ${dy}) counts are left of a path of ${figure(pathCounts, 0)}`,
    };
  });
}

/** MOV-5: counts reported while the device is declared at rest. */
export function judgeRest(context: RuleContext): RuleOutcome {
  return judgeSpans(
    context,
    'rest',
    'no rest is declared: mark a stretch of 60 s or more',
    ({ pathCounts, packets, startTicks, endTicks }) => {
      const seconds = (endTicks - startTicks) * context.tickS;
      const bound = ((60 * poissonUpperBound(0)) / seconds).toPrecision(2);
      const left = packets === 0 ? `; the true rate is below ${bound} packets a minute (95 %)` : '';
      return {
        value: pathCounts,
        uncertainty: 0,
        message: `${figure(pathCounts, 0)} counts in ${plural(packets, 'packet')} in ${figure(seconds, 1)} s of rest${left}`,
      };
    },
  );
}

/** MOV-6: movement across a declared stroke, in percent of the movement along it. */
export function judgeCrossAxis(context: RuleContext): RuleOutcome {
  return judgeSpans(context, 'stroke', 'no stroke with an axis is declared', ({ span, dx, dy }) => {
    if (span.axis === undefined) return undefined;
    const along = Math.abs(span.axis === 'x' ? dx : dy);
    const across = Math.abs(span.axis === 'x' ? dy : dx);
    if (along === 0) return undefined;
    return {
      value: (100 * across) / along,
      uncertainty: 100 / along,
      message: `${across} counts across, ${along} along`,
    };
  });
}
