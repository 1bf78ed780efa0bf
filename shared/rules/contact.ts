import { BUTTON_NAMES } from '../packets/packet-table';
import type { ButtonName } from '../packets/packet-table';
import { findButtonChanges } from '../packets/button-changes';
import { levelAt } from '../line/level-at';
import { OFF, UNKNOWN } from '../line/level-trace';
import type { LevelTrace } from '../line/level-trace';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notShown, plural } from './rule-context';
import type { Judgement } from './verdict';
import { judgeAtMost, judgeCount, worseOf } from './verdict';

/** A contact that has not changed for so long has settled: what is faster is its bounce, seconds (house). */
const SETTLED_S = 0.01;
/** A report this late belongs to no contact change any more, seconds (house). */
const LATEST_REPORT_S = 0.5;
/** Packet times every report may take. Source: rules.md 6, BTN-4. */
const PACKET_TIMES = 2;

/** The contact comes to rest at another level. */
interface ContactChange {
  /** First edge of the change, bounce included. */
  readonly ticks: number;
  readonly isClosed: boolean;
}

interface Report {
  readonly packet: number;
  readonly startTicks: number;
  readonly endTicks: number;
  readonly isDown: boolean;
}

/** Contact changes and reports of the button they belong to, matched in order of time. */
interface Matches {
  readonly button: ButtonName;
  readonly pairs: readonly { readonly change: ContactChange; readonly report: Report }[];
  /** Contact changes without a report, reports without a contact change. */
  readonly unreported: readonly ContactChange[];
  readonly unfounded: readonly Report[];
  /** Contact changes that cannot be judged: in reset, or with too little record after them. */
  readonly open: readonly ContactChange[];
}

/** Changes of the contact between settled states; bounce, and pulses that end where they began, are left out. */
function contactChanges(trace: LevelTrace, settled: number): ContactChange[] {
  const changes: ContactChange[] = [];
  let resting = trace.initialLevel;
  let first = -1;
  for (let i = 0; i < trace.ticks.length; i++) {
    if (first < 0) first = trace.ticks[i];
    const next = i + 1 < trace.ticks.length ? trace.ticks[i + 1] : Infinity;
    if (next - trace.ticks[i] < settled) continue;
    const level = trace.levels[i];
    if (level !== resting && level !== UNKNOWN && resting !== UNKNOWN) {
      changes.push({ ticks: first, isClosed: level === 1 });
    }
    resting = level;
    first = -1;
  }
  return changes;
}

function reportsOf(context: RuleContext, bit: number): Report[] {
  const { packets, characters, resets } = context.decoded;
  const startOf = (p: number): number => characters.startTicks[packets.firstCharacter[p]];
  const resetTicks = resets.map((reset) => reset.onTicks);
  return findButtonChanges(packets, bit, startOf, resetTicks).map(({ packet, isDown }) => ({
    packet,
    startTicks: startOf(packet),
    endTicks: characters.endTicks[packets.firstCharacter[packet] + packets.characterCount[packet] - 1],
    isDown,
  }));
}

/** Each contact change with the first report of its direction that follows in time. */
function match(
  context: RuleContext,
  changes: readonly ContactChange[],
  reports: readonly Report[],
  button: ButtonName,
): Matches {
  const doubt = context.differenceUncertainty(0, 'contact', 'data');
  const latest = LATEST_REPORT_S * context.perSecond;
  const pairs: { change: ContactChange; report: Report }[] = [];
  const unreported: ContactChange[] = [];
  const unfounded: Report[] = [];
  const open: ContactChange[] = [];
  let r = 0;
  changes.forEach((change) => {
    while (r < reports.length && reports[r].startTicks < change.ticks - doubt) unfounded.push(reports[r++]);
    const report = reports.at(r);
    const isItsOwn =
      r < reports.length && report!.isDown === change.isClosed && report!.startTicks - change.ticks <= latest;
    if (isItsOwn) {
      pairs.push({ change, report: report! });
      r += 1;
    } else if (isOpen(context, change, latest)) open.push(change);
    else unreported.push(change);
  });
  unfounded.push(...reports.slice(r));
  return { button, pairs, unreported, unfounded, open };
}

/** The device is held in reset, or the record ends before a late report could have come. */
function isOpen(context: RuleContext, change: ContactChange, latest: number): boolean {
  const { capture, lines } = context.decoded;
  if (change.ticks + latest > capture.endTicks) return true;
  const rts = lines.rts?.trace;
  return rts !== undefined && levelAt(rts, change.ticks) === OFF;
}

/** The button whose reports fit the contact best; where the map leaves the polarity open, the better of both. */
function matchBest(context: RuleContext): Matches | RuleOutcome {
  const { lines, packets, map } = context.decoded;
  const contact = lines.contact?.trace;
  if (contact === undefined) {
    return notShown(
      'no contact channel is in the capture: record the contact of a button beside the data line',
    );
  }
  if (lines.data === undefined) return notShown('the data line is not in the capture');
  if (packets.count === 0) return notShown('there are no packets in the capture');
  const changes = contactChanges(contact, SETTLED_S * context.perSecond);
  if (changes.length === 0) return notShown('the contact does not change in the capture: press the button');
  const stated = map.lines?.contact?.polarity;
  const isStated = stated !== undefined && stated !== 'auto';
  const readings = isStated
    ? [changes]
    : [changes, changes.map(({ ticks, isClosed }) => ({ ticks, isClosed: !isClosed }))];
  const trials = BUTTON_NAMES.flatMap((name, bit) => {
    const reports = reportsOf(context, bit);
    return readings.map((reading) => match(context, reading, reports, name));
  });
  return trials.reduce((best, trial) => (trial.pairs.length > best.pairs.length ? trial : best));
}

/** BTN-4: contact change to the end of the packet that reports it. */
export function judgeContactToReport(context: RuleContext): RuleOutcome {
  const matches = matchBest(context);
  if ('verdict' in matches) return matches;
  if (matches.pairs.length === 0) return notShown('no contact change is followed by a report of a button');
  const { packets } = context.decoded;
  const places: Place[] = [];
  let verdict: Judgement = 'pass';
  let worst: { over: number; time: number; limit: number } | undefined;
  for (const { change, report } of matches.pairs) {
    const time = report.endTicks - change.ticks;
    const packet = packets.characterCount[report.packet] * context.characterTicks;
    const limit = context.ticksOfMs(context.limit) + PACKET_TIMES * packet;
    const uncertainty = context.differenceUncertainty(time, 'contact', 'data');
    const judged = judgeAtMost(time, uncertainty, limit, context.setting.decision);
    verdict = worseOf(verdict, judged) as Judgement;
    if (worst === undefined || time - limit > worst.over) worst = { over: time - limit, time, limit };
    if (judged === 'pass' || places.length >= MOST_PLACES) continue;
    places.push({
      verdict: judged,
      startTicks: change.ticks,
      endTicks: report.endTicks,
      measured: context.ms(time),
      uncertainty: context.ms(uncertainty),
      limit: context.ms(limit),
      message: `The contact ${change.isClosed ? 'closed' : 'opened'} ${figure(context.ms(time))} ms before the end of the packet that tells it, limit ${figure(context.ms(limit))} ms`,
    });
  }
  return {
    verdict,
    n: matches.pairs.length,
    measured: context.ms(worst!.time),
    uncertainty: context.ms(context.differenceUncertainty(worst!.time, 'contact', 'data')),
    uncertaintyKind: 'bound',
    limit: context.ms(worst!.limit),
    reason: `the slowest of ${plural(matches.pairs.length, 'report')} of the ${matches.button} button ends ${figure(context.ms(worst!.time))} ms after the contact`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** BTN-5: contact changes never reported, and reports without a contact change. */
export function judgeContactsAndReports(context: RuleContext): RuleOutcome {
  const matches = matchBest(context);
  if ('verdict' in matches) return matches;
  const { pairs, unreported, unfounded, open, button } = matches;
  const n = pairs.length + unreported.length;
  if (n === 0) return notShown('every contact change lies in a reset or too near the end of the capture');
  const places: Place[] = [
    ...unreported.map((change) => ({
      verdict: 'violation' as const,
      startTicks: change.ticks,
      endTicks: change.ticks + context.characterTicks,
      message: `The contact ${change.isClosed ? 'closed' : 'opened'}, and no packet tells it within 500 ms`,
    })),
    ...unfounded.map((report) => ({
      verdict: 'violation' as const,
      startTicks: report.startTicks,
      endTicks: report.endTicks,
      message: `The ${button} button is told to go ${report.isDown ? 'down' : 'up'}, and its contact did not change`,
    })),
  ];
  return {
    verdict: judgeCount(places.length, 0, context.limit),
    n,
    measured: places.length,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason:
      `${unreported.length} of ${plural(n, 'contact change')} not reported, ${plural(unfounded.length, 'report')} of the ${button} button without one` +
      (open.length > 0 ? `; ${plural(open.length, 'change')} in a reset or at the end left out` : ''),
    findings: cap(places.map((place) => context.finding(place))),
  };
}
