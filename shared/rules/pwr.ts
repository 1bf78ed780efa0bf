import { levelAt, reachesLevel } from '../line/level-at';
import { OFF, UNKNOWN } from '../line/level-trace';
import type { Span } from '../time/ticks';
import { activeSpans } from './active-spans';
import type { AnalogLine } from './analog-line';
import { analogLine } from './analog-line';
import type { RuleContext, RuleOutcome } from './rule-context';
import { figure, notShown, plural } from './rule-context';
import { judgeAtLeast, judgeAtMost } from './verdict';

/** PWR-1 and PWR-3 are judged on the sheet of a build, not on a capture. */
export function judgeFromSheet(): RuleOutcome {
  return notShown('comes from the port budget sheet of the build, not from a capture');
}

interface Extreme {
  readonly volts: number;
  readonly index: number;
}

/**
 * PWR-2: lowest rail during reset pulse, start, handshake and motion. The rulebook's limit is the brown-out voltage of the device
 * plus 5 %.
 */
export function judgeLowestRail(context: RuleContext): RuleOutcome {
  const rail = analogLine(context, 'supply');
  if (typeof rail === 'string') return notShown(rail);
  if (context.setting.limit === null) {
    return notShown(
      'the rulebook states no lowest voltage: enter the brown-out voltage of the device plus 5 %',
    );
  }
  const spans = poweredSpans(context);
  const lowest = extremeOf(rail, spans, (a, b) => a < b);
  if (lowest === undefined) {
    return notShown('no reset, reply or movement while the device has power lies within the supply channel');
  }
  return judgeRail(context, rail, lowest, spans.length, 'lowest');
}

/** PWR-4: highest rail anywhere in the capture. */
export function judgeHighestRail(context: RuleContext): RuleOutcome {
  const rail = analogLine(context, 'supply');
  if (typeof rail === 'string') return notShown(rail);
  if (context.setting.limit === null) {
    return notShown('the rulebook states no highest voltage: enter the maximum the device is declared for');
  }
  const whole = [{ startTicks: 0, endTicks: context.decoded.capture.endTicks }];
  const highest = extremeOf(rail, whole, (a, b) => a > b);
  if (highest === undefined) return notShown('the supply channel holds no voltages');
  return judgeRail(context, rail, highest, 1, 'highest');
}

function judgeRail(
  context: RuleContext,
  rail: AnalogLine,
  { volts, index }: Extreme,
  n: number,
  which: 'lowest' | 'highest',
): RuleOutcome {
  const uncertainty = context.voltageUncertainty(volts);
  const judge = which === 'lowest' ? judgeAtLeast : judgeAtMost;
  const verdict = judge(volts, uncertainty, context.limit, context.setting.decision);
  const words = `the ${which} rail is ${figure(volts)} V at ${figure(rail.voltage.timeOf(index) * context.tickS, 4)} s of the record, limit ${figure(context.limit)} V`;
  const at = rail.voltage.timeOf(index);
  return {
    verdict,
    n,
    measured: volts,
    uncertainty,
    uncertaintyKind: 'bound',
    reason:
      which === 'lowest'
        ? `${words}, over ${plural(n, 'reset pulse, start or movement', 'reset pulses, starts and movements')}`
        : words,
    findings:
      verdict === 'pass'
        ? []
        : [
            context.finding({
              verdict,
              startTicks: at,
              endTicks: at + Math.max(1, Math.round(0.001 * context.perSecond)),
              measured: volts,
              uncertainty,
              message: `The rail is ${which === 'lowest' ? 'down to' : 'up to'} ${figure(volts)} V, limit ${figure(context.limit)} V`,
            }),
          ],
  };
}

/**
 * Reset pulse to end of the reply, and movement. Where DTR is OFF during the pulse the rail is down by design and rises until
 * the device answers: there only what follows the first character counts.
 */
function poweredSpans(context: RuleContext): Span[] {
  const { lines, resets } = context.decoded;
  const dtr = lines.dtr?.trace;
  const handshakes = resets.map((reset) => {
    const isCycle = dtr !== undefined && reachesLevel(dtr, OFF, reset.offTicks, reset.onTicks);
    const endTicks = reset.identificationEndTicks ?? reset.windowEndTicks;
    return { startTicks: isCycle ? (reset.replyTicks ?? endTicks) : reset.offTicks, endTicks };
  });
  const motion = activeSpans(context.decoded, context.perSecond).filter((span) => span.kind === 'motion');
  return [...handshakes, ...motion].filter((span) => span.endTicks > span.startTicks);
}

/** The extreme of the medians of three neighbouring samples inside the spans; a single stray sample has no say. */
function extremeOf(
  { line, voltage }: AnalogLine,
  spans: readonly Span[],
  isBeyond: (a: number, b: number) => boolean,
): Extreme | undefined {
  let extreme: Extreme | undefined;
  for (const span of spans) {
    const end = voltage.firstFrom(span.endTicks);
    // A step that holds when the span begins counts too.
    const begin = Math.max(0, voltage.firstFrom(span.startTicks) - Number(voltage.isStepped));
    for (let i = begin; i < end; i++) {
      const volts = voltage.isStepped ? voltage.valueOf(i) : smoothed(voltage, i);
      if (Number.isNaN(volts) || (extreme !== undefined && !isBeyond(volts, extreme.volts))) continue;
      if (levelAt(line.trace, voltage.timeOf(i)) === UNKNOWN) continue;
      extreme = { volts, index: i };
    }
  }
  return extreme;
}

function smoothed(voltage: AnalogLine['voltage'], i: number): number {
  if (i === 0 || i + 1 >= voltage.count) return NaN;
  const a = voltage.valueOf(i - 1);
  const b = voltage.valueOf(i);
  const c = voltage.valueOf(i + 1);
  return Math.max(Math.min(a, b), Math.min(Math.max(a, b), c));
}
