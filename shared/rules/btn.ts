import {
  BUTTON_NAMES,
  EXPLICIT_RELEASE,
  HAS_FOURTH,
  IMPLICIT_RELEASE,
  MIDDLE,
} from '../packets/packet-table';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, notApplicable, notShown, plural } from './rule-context';
import { judgeCount } from './verdict';

function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.decoded.packets.count === 0) return notShown('there are no packets in the capture');
  return undefined;
}

/** BTN-1: press and release of a button closer together than a hand can do. */
export function judgeBounce(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { packets, characters } = context.decoded;
  const { buttons, firstCharacter, characterCount } = packets;
  const fastest = context.ticksOfMs(context.limit);
  const places: Place[] = [];
  let changes = 0;
  BUTTON_NAMES.forEach((name, bit) => {
    let changedAt = -Infinity;
    let before = 0;
    for (let p = 0; p < packets.count; p++) {
      const now = (buttons[p] >> bit) & 1;
      if (now === before) continue;
      before = now;
      changes += 1;
      const start = characters.startTicks[firstCharacter[p]];
      const shortest = Math.max(fastest, 1.2 * characterCount[p] * context.characterTicks);
      if (start - changedAt < shortest) {
        places.push({
          verdict: 'violation',
          startTicks: changedAt,
          endTicks: start,
          measured: context.ms(start - changedAt),
          uncertainty: context.ms(context.differenceUncertainty(start - changedAt, true)),
          limit: context.ms(shortest),
          message: `The ${name} button changes twice within ${figure(context.ms(start - changedAt))} ms: possibly bounce`,
        });
      }
      changedAt = start;
    }
  });
  if (changes === 0) return notShown('no button changes in the capture');
  return {
    verdict: judgeCount(places.length, 0, 0),
    n: changes,
    measured: places.length,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason: `${places.length} of ${plural(changes, 'change')} may be bounce`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** BTN-2: a button held at the end of the capture. */
export function judgeHeldAtEnd(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { packets, characters, capture } = context.decoded;
  const last = packets.count - 1;
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
        startTicks: characters.startTicks[packets.firstCharacter[last]],
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
      reason: 'the third button is told by packets without movement: only hosts that toggle on them follow',
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
      ? `${implicit} of ${plural(presses, 'release')} are told by a three-character packet only: hosts that hold the button until a fourth character comes keep it down`
      : gapsWhileHeld > 0
        ? `${gapsWhileHeld} packets while held have no fourth character: hosts that take this for a release let the button go`
        : 'a fourth character comes in each packet while held and once on release: suits both families of hosts';
  return { verdict: implicit > 0 || gapsWhileHeld > 0 ? 'violation' : 'pass', n: presses, reason };
}
