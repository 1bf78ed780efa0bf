import { holdsLevel, levelAt, reachesLevel } from '../line/level-at';
import { countUpTo } from '../time/sorted-search';
import { MARK, OFF, ON, UNKNOWN } from '../line/level-trace';
import { BREAK_ERROR } from '../characters/character-table';
import type { ControlEvent, Reset } from '../resets/reset';
import { poissonUpperBound } from '../statistics/poisson';
import type { Span } from '../time/ticks';
import { countMisses, findMisses, splitLatencies } from './hsk-counts';
import { judgeLatencies, judgeMisses } from './pooled';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, notApplicable, notShown, plural, worstVerdict } from './rule-context';
import { judgeAtLeast, judgeAtMost, judgeCount } from './verdict';

const NO_RTS = 'RTS is not in the capture: record RTS beside the data line';
const NO_DATA = 'the data line is not in the capture';
const NO_RESET =
  'RTS never goes from OFF to ON in the capture: record at least one reset, one second of rest before it';

/** What all handshake rules need; undefined where it is there. */
function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.data === undefined) return notShown(NO_DATA);
  if (context.rts === undefined) return notShown(NO_RTS);
  if (context.decoded.resets.length === 0) return notShown(NO_RESET);
  return undefined;
}

/** A device that answers no reset by design has no latency and no identification. */
function isWithoutIdentification(context: RuleContext): boolean {
  return !context.isMFamily && context.decoded.resets.every((reset) => reset.identity === null);
}

const NO_IDENTIFICATION = 'devices of this protocol do not identify themselves after a reset';

/** HSK-1: RTS ON → leading edge of the first start element, for each reset. */
export function judgeReplyLatency(context: RuleContext): RuleOutcome {
  return judgeLatency(context, context.decoded.resets, 'reset');
}

/** HSK-8: the same for the first reset after power-up. */
export function judgePowerUpLatency(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const afterPower = context.decoded.resets.filter((reset) => reset.isPowerUp === true);
  if (afterPower.length === 0) {
    return notShown(
      context.decoded.lines.dtr === undefined
        ? 'DTR is not in the capture, so no reset can be told to follow power-up'
        : 'no reset follows RTS and DTR both OFF for 100 ms or more',
    );
  }
  return judgeLatency(context, afterPower, 'reset after power-up');
}

function judgeLatency(context: RuleContext, resets: readonly Reset[], what: string): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const limit = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let worst: { latency: number; uncertainty: number } | undefined;
  for (const reset of resets) {
    if (reset.replyTicks === null) {
      places.push({
        verdict: 'not-shown',
        startTicks: reset.onTicks,
        endTicks: reset.windowEndTicks,
        message: 'No reply to this reset, so there is no latency to judge',
      });
      continue;
    }
    const latency = reset.replyTicks - reset.onTicks;
    const uncertainty = context.differenceUncertainty(latency, 'rts', 'data');
    const verdict = judgeAtMost(latency, uncertainty, limit, context.setting.decision);
    if (worst === undefined || latency > worst.latency) worst = { latency, uncertainty };
    places.push({
      verdict,
      startTicks: reset.onTicks,
      endTicks: reset.replyTicks,
      measured: context.ms(latency),
      uncertainty: context.ms(uncertainty),
      message: latencyMessage(context, verdict, latency, uncertainty, limit),
    });
  }
  if (worst === undefined) {
    return {
      ...notShown(`no reply to ${plural(resets.length, what)}`),
      findings: cap(places.map((place) => context.finding(place))),
    };
  }
  const judged = places.filter((place) => place.verdict !== 'not-shown');
  const silent = places.length - judged.length;
  return {
    verdict: worstVerdict(judged, 'not-shown'),
    n: judged.length,
    measured: context.ms(worst.latency),
    uncertainty: context.ms(worst.uncertainty),
    uncertaintyKind: 'bound',
    reason:
      `the slowest of ${plural(judged.length, 'reply', 'replies')} began ${figure(context.ms(worst.latency), 3)} ms after RTS went ON` +
      (silent > 0 ? `; ${plural(silent, 'reset')} without a reply` : ''),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

function latencyMessage(
  context: RuleContext,
  verdict: Place['verdict'],
  latency: number,
  uncertainty: number,
  limit: number,
): string {
  const ms = (ticks: number): string => figure(context.ms(ticks), 3);
  if (verdict === 'violation')
    return `The reply began ${ms(latency - limit)} ms too late: ${ms(latency)} ms after RTS went ON, limit ${ms(limit)} ms`;
  if (verdict === 'pass') return `The reply began ${ms(latency)} ms after RTS went ON, limit ${ms(limit)} ms`;
  return `The reply began ${ms(latency)} ± ${ms(uncertainty)} ms after RTS went ON: the limit of ${ms(limit)} ms lies inside that`;
}

/** HSK-2: the first character of the reply is `M`. */
export function judgeFirstCharacter(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (!context.isMFamily) return notApplicable('devices of this protocol do not answer M');
  const { characters, resets } = context.decoded;
  const places: Place[] = [];
  for (const reset of resets) {
    if (reset.firstCharacter < 0) continue;
    const value = characters.values[reset.firstCharacter] & 0x7f;
    const isDamaged = characters.errors[reset.firstCharacter] !== 0;
    const isM = value === 0x4d && !isDamaged;
    places.push({
      verdict: isM ? 'pass' : 'violation',
      startTicks: characters.startTicks[reset.firstCharacter],
      endTicks: characters.endTicks[reset.firstCharacter],
      message: isM
        ? 'The reply begins with M (4D)'
        : `The reply begins with ${value.toString(16).toUpperCase().padStart(2, '0')}${isDamaged ? ', damaged' : ''}, not with M (4D)`,
    });
  }
  if (places.length === 0) return notShown('no reset was answered');
  const wrong = places.filter((place) => place.verdict === 'violation').length;
  return {
    verdict: worstVerdict(places, 'not-shown'),
    n: places.length,
    reason:
      wrong === 0
        ? `${plural(places.length, 'reply', 'replies')} begin with M`
        : `${wrong} of ${plural(places.length, 'reply', 'replies')} do not begin with M`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** HSK-3: characters whose start element lies while RTS is OFF. */
export function judgeCharactersWhileOff(context: RuleContext): RuleOutcome {
  const { data, rts } = context;
  if (data === undefined) return notShown(NO_DATA);
  if (rts === undefined) return notShown(NO_RTS);
  const offTicks = timeAtLevel(rts.initialLevel, rts.ticks, rts.levels, rts.endTicks, OFF);
  if (offTicks === 0) return notShown('RTS is never OFF in the capture');
  const { startTicks, endTicks, errors, count } = context.decoded.characters;
  const places: Place[] = [];
  const underWay: Span[] = [];
  let definite = 0;
  let undecided = 0;
  for (let i = 0; i < count; i++) {
    if ((errors[i] & BREAK_ERROR) !== 0) continue;
    const at = startTicks[i];
    if (levelAt(rts, at) !== OFF) {
      const off = countUpTo(rts.ticks, at);
      const isUnderWay = off < rts.ticks.length && rts.levels[off] === OFF && rts.ticks[off] < endTicks[i];
      if (isUnderWay) underWay.push({ startTicks: at, endTicks: endTicks[i] });
      continue;
    }
    // A hair more than U: an edge exactly U away is still not told apart.
    const doubt = context.differenceUncertainty(0, 'rts', 'data') * (1 + 1e-9);
    const isNearEdge = levelAt(rts, at + doubt) === ON || levelAt(rts, Math.max(0, at - doubt)) === ON;
    if (isNearEdge) undecided += 1;
    else definite += 1;
    places.push({
      verdict: isNearEdge ? 'inconclusive' : 'violation',
      startTicks: at,
      endTicks: endTicks[i],
      message: isNearEdge
        ? 'A character starts at the same moment as RTS changes, as far as the resolution tells'
        : 'A character starts while RTS is OFF: the device is held in reset and should be silent',
    });
  }
  return {
    verdict: judgeCount(definite, undecided, context.limit),
    n: count,
    measured: definite,
    uncertainty: undecided,
    uncertaintyKind: 'bound',
    reason:
      `${plural(definite, 'character')} in ${figure(context.ms(offTicks), 1)} ms of RTS OFF` +
      rateText(definite, offTicks * context.tickS),
    findings: cap([...places, ...underWay.map(toUnderWay)].map((place) => context.finding(place))),
  };
}

/** A character the device had begun when RTS dropped is told, not counted. */
function toUnderWay(span: Span): Place {
  return {
    ...span,
    verdict: 'pass',
    severity: 'note',
    message: 'A character was under way when RTS went OFF; it does not count',
  };
}

/** Beside a count of 0: what the rate can still be. */
function rateText(count: number, seconds: number): string {
  if (count > 0) return '';
  return `; the true rate is below ${(poissonUpperBound(0) / seconds).toPrecision(2)} a second (95 %)`;
}

/** HSK-4: resets without a reply in the window. */
export function judgeMissingReplies(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (!context.isMFamily) return notApplicable(NO_IDENTIFICATION);
  const { misses } = findMisses(context.decoded);
  const places = misses.map(({ reset, isShort }): Place => {
    const window = reset.windowEndTicks - reset.onTicks;
    return {
      verdict: isShort ? 'inconclusive' : 'violation',
      startTicks: reset.onTicks,
      endTicks: reset.windowEndTicks,
      message: isShort
        ? `No reply before RTS went OFF again after ${figure(context.ms(window), 1)} ms`
        : 'No reply within 200 ms of RTS going ON',
    };
  });
  return {
    ...judgeMisses(countMisses(context.decoded), context.setting),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** HSK-5: characters between RTS ON and the end of the identification that are no part of it. */
export function judgeStrays(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const { characters, resets } = context.decoded;
  const identified = resets.filter((reset) => reset.identificationEndTicks !== null);
  if (identified.length === 0) return notShown('no reset was answered by an identification');
  const strays = identified.flatMap((reset) => reset.strays);
  return {
    verdict: judgeCount(strays.length, 0, context.limit),
    n: identified.length,
    measured: strays.length,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason: `${plural(strays.length, 'character')} that are no part of ${plural(identified.length, 'identification')}`,
    findings: cap(
      strays.map((i) =>
        context.finding({
          verdict: 'violation',
          startTicks: characters.startTicks[i],
          endTicks: characters.endTicks[i],
          message: 'A character between RTS ON and the identification that is no part of it',
        }),
      ),
    ),
  };
}

/** HSK-6: longest pause between two characters of an identification. */
export function judgeIdentificationGaps(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const { startTicks, endTicks } = context.decoded.characters;
  const limit = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let worst: { gap: number; uncertainty: number } | undefined;
  for (const reset of context.decoded.resets) {
    for (let k = 1; k < reset.identification.length; k++) {
      const i = reset.identification[k];
      const gap = Math.max(0, startTicks[i] - endTicks[i - 1]);
      const uncertainty = context.differenceUncertainty(gap, 'data');
      const verdict = judgeAtMost(gap, uncertainty, limit, context.setting.decision);
      const isWorst = worst === undefined || gap > worst.gap;
      if (isWorst) worst = { gap, uncertainty };
      if (verdict === 'pass') continue;
      places.push({
        verdict,
        startTicks: endTicks[i - 1],
        endTicks: startTicks[i],
        measured: context.ms(gap),
        uncertainty: context.ms(uncertainty),
        message: `A pause of ${figure(context.ms(gap))} ms inside the identification, limit ${figure(context.limit)} ms`,
      });
    }
  }
  if (worst === undefined) return notShown('no identification of two characters or more');
  return {
    verdict: judgeAtMost(worst.gap, worst.uncertainty, limit, context.setting.decision),
    n: context.decoded.resets.filter((reset) => reset.identification.length > 1).length,
    measured: context.ms(worst.gap),
    uncertainty: context.ms(worst.uncertainty),
    uncertaintyKind: 'bound',
    reason: `the longest pause is ${figure(context.ms(worst.gap))} ms`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** HSK-7: width of the reset pulse seen. */
export function judgePulseWidth(context: RuleContext): RuleOutcome {
  if (context.rts === undefined) return notShown(NO_RTS);
  const { resets } = context.decoded;
  if (resets.length === 0) return notShown(NO_RESET);
  const limit = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let narrowest: { width: number; uncertainty: number } | undefined;
  for (const reset of resets) {
    const width = reset.onTicks - reset.offTicks;
    const uncertainty = context.differenceUncertainty(width, 'rts');
    const judged = judgeAtLeast(width, uncertainty, limit, context.setting.decision);
    const isOpen = !reset.isPulseStartSeen && judged !== 'pass';
    if (!isOpen && (narrowest === undefined || width < narrowest.width)) narrowest = { width, uncertainty };
    const atLeast = reset.isPulseStartSeen ? '' : 'at least ';
    places.push({
      verdict: isOpen ? 'not-shown' : judged,
      startTicks: reset.offTicks,
      endTicks: reset.onTicks,
      measured: context.ms(width),
      uncertainty: context.ms(uncertainty),
      message: `RTS was OFF for ${atLeast}${figure(context.ms(width))} ms`,
    });
  }
  if (narrowest === undefined)
    return {
      ...notShown('no reset pulse was recorded from its beginning'),
      findings: cap(places.map((p) => context.finding(p))),
    };
  return {
    verdict: worstVerdict(
      places.filter((place) => place.verdict !== 'not-shown'),
      'not-shown',
    ),
    n: resets.length,
    measured: context.ms(narrowest.width),
    uncertainty: context.ms(narrowest.uncertainty),
    uncertaintyKind: 'bound',
    reason: `the narrowest reset pulse is ${figure(context.ms(narrowest.width))} ms`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** HSK-9 and HSK-13: a supply line keeps its level from RTS ON to the end of the identification. */
function judgeHeldLine(context: RuleContext, role: 'dtr' | 'txd', level: number, words: string): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const line = context.decoded.lines[role]?.trace;
  if (line === undefined) return notShown(`${role.toUpperCase()} is not in the capture`);
  const identified = context.decoded.resets.filter((reset) => reset.identificationEndTicks !== null);
  if (identified.length === 0) return notShown('no reset was answered by an identification');
  const other = 1 - level;
  const doubt = context.differenceUncertainty(0, 'rts', role);
  const places: Place[] = [];
  let n = 0;
  let broken = 0;
  let undecided = 0;
  for (const reset of identified) {
    const end = reset.identificationEndTicks!;
    if (reachesLevel(line, UNKNOWN, reset.onTicks, end)) continue;
    n += 1;
    if (holdsLevel(line, level, reset.onTicks, end)) continue;
    // A line raised together with RTS may seem to follow it by as much as the resolution.
    const isBroken = reachesLevel(line, other, reset.onTicks + doubt, end);
    if (isBroken) broken += 1;
    else undecided += 1;
    places.push({
      verdict: isBroken ? 'violation' : 'inconclusive',
      startTicks: reset.onTicks,
      endTicks: end,
      message: isBroken
        ? `${words} is not kept from RTS ON to the end of the identification`
        : `${words} begins at the same moment as RTS ON, as far as the resolution tells`,
    });
  }
  if (n === 0) return notShown(`the level of ${role.toUpperCase()} is not known during any identification`);
  return {
    verdict: judgeCount(broken, undecided, 0),
    n,
    reason: `${words} through ${n - broken - undecided} of ${plural(n, 'identification')}`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

export function judgeDtrHeld(context: RuleContext): RuleOutcome {
  return judgeHeldLine(context, 'dtr', ON, 'DTR ON');
}

export function judgeTxdAtMark(context: RuleContext): RuleOutcome {
  return judgeHeldLine(context, 'txd', MARK, 'TXD at mark');
}

/** HSK-10: performance index of the latency against the limit of HSK-1; the worse of the kinds of reset. */
export function judgeLatencyIndex(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const upperLimit = context.settings.get('HSK-1')?.limit ?? null;
  if (upperLimit === null) return notShown('the rulebook sets no limit for HSK-1');
  const { powerUp, powered } = splitLatencies(context.decoded.resets);
  const toMs = (list: readonly number[]): number[] => list.map((ticks) => context.ms(ticks));
  const resolution = context.ms(context.decoded.resolutionTicks);
  const latencies = { powerUp: toMs(powerUp), powered: toMs(powered) };
  return judgeLatencies(latencies, resolution, upperLimit, context.setting);
}

/** HSK-11: first character complete in time and no long pause: meets the timing of every host listed. */
export function judgeHostTiming(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (isWithoutIdentification(context)) return notApplicable(NO_IDENTIFICATION);
  const { startTicks, endTicks } = context.decoded.characters;
  const limit = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let worst = 0;
  for (const reset of context.decoded.resets) {
    if (reset.firstCharacter < 0) continue;
    let longest = endTicks[reset.firstCharacter] - reset.onTicks;
    for (let k = 1; k < reset.identification.length; k++) {
      const i = reset.identification[k];
      longest = Math.max(longest, startTicks[i] - endTicks[i - 1]);
    }
    worst = Math.max(worst, longest);
    const uncertainty = context.differenceUncertainty(longest, 'rts', 'data');
    places.push({
      verdict: judgeAtMost(longest, uncertainty, limit, context.setting.decision),
      startTicks: reset.onTicks,
      endTicks: reset.identificationEndTicks ?? endTicks[reset.firstCharacter],
      measured: context.ms(longest),
      uncertainty: context.ms(uncertainty),
      message: `The longest wait of a host, for the first whole character or inside the reply, is ${figure(context.ms(longest))} ms`,
    });
  }
  if (places.length === 0) return notShown('no reset was answered');
  return {
    verdict: worstVerdict(places, 'not-shown'),
    n: places.length,
    measured: context.ms(worst),
    uncertainty: context.ms(context.differenceUncertainty(worst, 'rts', 'data')),
    uncertaintyKind: 'bound',
    reason: `the longest wait is ${figure(context.ms(worst))} ms over ${plural(places.length, 'reply', 'replies')}`,
    findings: cap(places.filter((place) => place.verdict !== 'pass').map((place) => context.finding(place))),
  };
}

/** HSK-12: shortest reset pulse that was answered. */
export function judgeShortestPulse(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  if (!context.isMFamily) return notApplicable(NO_IDENTIFICATION);
  const seen = context.decoded.resets.filter((reset) => reset.isPulseStartSeen && !reset.isWindowCut);
  const widthOf = (reset: Reset): number => reset.onTicks - reset.offTicks;
  const tried = seen.map(widthOf).sort((a, b) => a - b);
  const widths = seen
    .filter((reset) => reset.replyTicks !== null)
    .map(widthOf)
    .sort((a, b) => a - b);
  if (tried.length < 2 || tried[tried.length - 1] < 1.2 * tried[0]) {
    return notShown('reset pulses of several widths are needed, recorded from their beginning');
  }
  if (widths.length === 0) return notShown('no reset was answered');
  if (judgeAtMost(tried[0], 0, context.ticksOfMs(context.limit), 'simple') === 'violation') {
    return notShown(
      `the shortest pulse tried is ${figure(context.ms(tried[0]))} ms; one of ${figure(context.limit)} ms or less is needed`,
    );
  }
  const uncertainty = context.differenceUncertainty(widths[0], 'rts');
  return {
    verdict: judgeAtMost(widths[0], uncertainty, context.ticksOfMs(context.limit), context.setting.decision),
    n: tried.length,
    measured: context.ms(widths[0]),
    uncertainty: context.ms(uncertainty),
    uncertaintyKind: 'bound',
    reason: `the shortest pulse that was answered is ${figure(context.ms(widths[0]))} ms, the shortest tried ${figure(context.ms(tried[0]))} ms`,
  };
}

/** Longest time DSR may take to follow DTR, seconds (house: the specification couples them in hardware). */
const DSR_FOLLOWS_S = 0.01;

/** HSK-14: DSR follows DTR. */
export function judgeDsr(context: RuleContext): RuleOutcome {
  const dsr = context.decoded.lines.dsr?.trace;
  const dtr = context.decoded.lines.dtr?.trace;
  if (dsr === undefined || dtr === undefined) return notShown('DSR and DTR must both be in the capture');
  const follows = DSR_FOLLOWS_S * context.perSecond;
  const changes = context.decoded.controlEvents.filter((event) => event.line === 'dtr');
  if (changes.length === 0) return notShown('DTR does not change in the capture');
  // DTR may change back before DSR had its time; then, and at the end of the record, nothing can be said.
  const events = changes.filter(({ ticks }, i) => {
    const until = ticks + follows;
    const isCut = until > context.decoded.capture.endTicks || (changes.at(i + 1)?.ticks ?? Infinity) <= until;
    return !isCut && levelAt(dsr, until) !== UNKNOWN;
  });
  if (events.length === 0) {
    return notShown('no change of DTR is followed by 10 ms in which DTR stays and DSR is known');
  }
  const doubt = context.differenceUncertainty(follows, 'dtr', 'dsr');
  const hasFollowed = (event: ControlEvent, at: number): boolean =>
    levelAt(dsr, event.ticks + at) === (event.isOn ? ON : OFF);
  const places = events
    .filter((event) => !hasFollowed(event, follows - doubt))
    .map((event): Place => {
      const isLate = !hasFollowed(event, follows + doubt);
      return {
        verdict: isLate ? 'violation' : 'inconclusive',
        startTicks: event.ticks,
        endTicks: event.ticks + follows,
        message: `DTR went ${event.isOn ? 'ON' : 'OFF'}, DSR ${isLate ? 'did not follow within 10 ms' : 'followed after 10 ms, as far as the resolution tells'}`,
      };
    });
  return {
    verdict: worstVerdict(places, 'pass'),
    n: events.length,
    reason: `DSR followed ${events.length - places.length} of ${plural(events.length, 'change')} of DTR within 10 ms`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

function timeAtLevel(
  initialLevel: number,
  ticks: Float64Array,
  levels: Uint8Array,
  endTicks: number,
  wanted: number,
): number {
  let sum = 0;
  let from = 0;
  let level = initialLevel;
  for (let i = 0; i <= ticks.length; i++) {
    const until = i < ticks.length ? ticks[i] : endTicks;
    if (level === wanted) sum += until - from;
    from = until;
    if (i < ticks.length) level = levels[i];
  }
  return sum;
}
