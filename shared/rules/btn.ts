import {
  BUTTON_NAMES,
  EXPLICIT_RELEASE,
  HAS_FOURTH,
  IMPLICIT_RELEASE,
  MIDDLE,
} from '../packets/packet-table';
import { findButtonChanges } from '../packets/button-changes';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, MOST_PLACES, notApplicable, notShown, plural } from './rule-context';
import type { Judgement } from './verdict';
import { judgeAtLeast, worseOf } from './verdict';

function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.decoded.packets.count === 0) return notShown('there are no packets in the capture');
  return undefined;
}

/** BTN-1: press and release of a button closer together than a hand can do. */
export function judgeBounce(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { packets, characters, resets } = context.decoded;
  const { firstCharacter, characterCount } = packets;
  const startOf = (p: number): number => characters.startTicks[firstCharacter[p]];
  const resetTicks = resets.map((reset) => reset.onTicks);
  const fastest = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let verdict: Judgement = 'pass';
  let changes = 0;
  let pairs = 0;
  let suspects = 0;
  let closest: { apart: number; limit: number } | undefined;
  BUTTON_NAMES.forEach((name, bit) => {
    const list = findButtonChanges(packets, bit, startOf, resetTicks);
    changes += list.length;
    for (let i = 1; i < list.length; i++) {
      const from = startOf(list[i - 1].packet);
      const to = startOf(list[i].packet);
      const limit = Math.max(fastest, 1.2 * characterCount[list[i].packet] * context.characterTicks);
      const uncertainty = context.differenceUncertainty(to - from, 'data');
      const judged = judgeAtLeast(to - from, uncertainty, limit, context.setting.decision);
      pairs += 1;
      verdict = worseOf(verdict, judged) as Judgement;
      if (closest === undefined || to - from - limit < closest.apart - closest.limit)
        closest = { apart: to - from, limit };
      if (judged === 'pass') continue;
      suspects += 1;
      if (places.length >= MOST_PLACES) continue;
      places.push({
        verdict: judged,
        startTicks: from,
        endTicks: to,
        measured: context.ms(to - from),
        uncertainty: context.ms(uncertainty),
        limit: limit === fastest ? context.limit : context.ms(limit),
        message: `The ${name} button changes twice within ${figure(context.ms(to - from))} ms: possibly bounce`,
      });
    }
  });
  if (changes === 0) return notShown('no button changes in the capture');
  if (closest === undefined) return notShown('no button changes twice in the capture');
  return {
    verdict,
    n: pairs,
    measured: context.ms(closest.apart),
    uncertainty: context.ms(context.differenceUncertainty(closest.apart, 'data')),
    uncertaintyKind: 'bound',
    limit: closest.limit === fastest ? context.limit : context.ms(closest.limit),
    reason: `the closest of ${plural(pairs, 'pair')} of changes are ${figure(context.ms(closest.apart))} ms apart; ${suspects} may be bounce`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** BTN-2: a button held at the end of the capture. */
export function judgeHeldAtEnd(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { packets, characters, capture, resets } = context.decoded;
  const last = packets.count - 1;
  const lastTicks = characters.startTicks[packets.firstCharacter[last]];
  if (resets.some((reset) => reset.onTicks > lastTicks)) {
    return {
      verdict: 'pass',
      n: packets.count,
      reason: 'a reset after the last packet lets go of every button',
    };
  }
  const held = BUTTON_NAMES.filter((_, bit) => ((packets.buttons[last] >> bit) & 1) === 1);
  if (held.length === 0) return { verdict: 'pass', n: packets.count, reason: 'no button is held at the end' };
  const words = `${held.join(' and ')} ${held.length === 1 ? 'is' : 'are'} still held at the end of the capture`;
  return {
    verdict: 'violation',
    n: packets.count,
    reason: words,
    findings: [
      context.finding({
        verdict: 'violation',
        startTicks: lastTicks,
        endTicks: capture.endTicks,
        message: `${words.charAt(0).toUpperCase()}${words.slice(1)}`,
      }),
    ],
  };
}

/** BTN-3: how the third button is told, and which hosts that suits. */
export function judgeThirdButton(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { protocol, packets } = context.decoded;
  if (protocol === 'M-null') {
    return {
      verdict: 'violation',
      n: packets.count,
      reason:
        'the third button is told by packets without movement: only hosts that toggle on them follow (A, G, H)',
    };
  }
  if (protocol !== 'M3') return notApplicable('only M3 and M-null have variants of the third button');
  let presses = 0;
  let implicit = 0;
  let explicit = 0;
  let gapsWhileHeld = 0;
  for (let p = 0; p < packets.count; p++) {
    const isHeld = (packets.buttons[p] & MIDDLE) !== 0;
    const wasHeld = p > 0 && (packets.buttons[p - 1] & MIDDLE) !== 0;
    if (isHeld && !wasHeld) presses += 1;
    if (isHeld && (packets.flags[p] & HAS_FOURTH) === 0) gapsWhileHeld += 1;
    if ((packets.flags[p] & IMPLICIT_RELEASE) !== 0) implicit += 1;
    if ((packets.flags[p] & EXPLICIT_RELEASE) !== 0) explicit += 1;
  }
  if (implicit + explicit === 0)
    return notShown('the middle button is not pressed and released in the capture');
  const reason =
    implicit > 0
      ? `${implicit} of ${plural(presses, 'release')} are told by a three-character packet only: suits host G; hosts that hold the button until a fourth character comes (B, C, H) keep it down`
      : gapsWhileHeld > 0
        ? `${gapsWhileHeld} packets while held have no fourth character: hosts that take this for a release (G) let the button go`
        : 'a fourth character comes in each packet while held and once on release: suits both families of hosts (B, C, H and G)';
  return { verdict: implicit > 0 || gapsWhileHeld > 0 ? 'violation' : 'pass', n: presses, reason };
}
