import { HAS_FOURTH, HAS_RESERVED_BITS, IS_IDLE } from '../packets/packet-table';
import type { PacketIncident } from '../packets/packet-table';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, MOST_PLACES, notApplicable, notShown, plural } from './rule-context';
import { DEFAULT_EXPOSURE, exposureText, judgeCount } from './verdict';

const NO_DATA = 'the data line is not in the capture';

function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.data === undefined && context.decoded.capture.format !== 'bytes') return notShown(NO_DATA);
  if (context.decoded.characters.count === 0) return notShown('there are no characters in the capture');
  if (context.decoded.protocol === null) return notShown('the characters fit no known protocol');
  return undefined;
}

/** Counts incidents of a kind; `weight` says how many events one stands for. */
function judgeIncidents(
  context: RuleContext,
  kind: PacketIncident['kind'],
  what: string,
  weight: (incident: PacketIncident) => number,
): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { characters, incidents } = context.decoded;
  const counted = incidents.filter((incident) => incident.kind === kind && !incident.isAtEdge);
  const count = counted.reduce((sum, incident) => sum + weight(incident), 0);
  const n = characters.count;
  const verdict = judgeCount(count, 0, context.limit);
  const least = context.setting.minimumCount ?? DEFAULT_EXPOSURE;
  if (verdict === 'pass' && n < least) {
    return {
      ...notShown(`no ${what} in ${plural(n, 'character')}; ${least} are needed to call that a pass`),
      n,
    };
  }
  return {
    verdict,
    n,
    measured: count,
    uncertainty: 0,
    uncertaintyKind: 'bound',
    reason:
      count === 0
        ? exposureText(0, n, `characters: ${what}`)
        : `${count} ${what} in ${plural(n, 'character')}`,
    findings: cap(
      counted.map((incident) =>
        context.finding({
          verdict: 'violation',
          startTicks: characters.startTicks[incident.firstCharacter],
          endTicks: characters.endTicks[incident.firstCharacter + incident.characterCount - 1],
          message: sentence(`${messageOf(incident)}: ${incident.reason}`),
        }),
      ),
    ),
  };
}

function messageOf(incident: PacketIncident): string {
  switch (incident.kind) {
    case 'orphan':
      return `${plural(incident.characterCount, 'character belongs', 'characters belong')} to no packet`;
    case 'cut':
      return 'a packet is cut short';
    case 'bad-fourth':
      return 'a fourth character has an undefined value';
  }
}

function sentence(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

/** PKT-1: whole characters that belong to no packet. */
export function judgeOrphans(context: RuleContext): RuleOutcome {
  return judgeIncidents(
    context,
    'orphan',
    'characters outside packets',
    (incident) => incident.characterCount,
  );
}

/** PKT-3: fourth characters with an undefined value. */
export function judgeFourthValues(context: RuleContext): RuleOutcome {
  const { protocol } = context.decoded;
  if (protocol !== null && protocol !== 'M3') {
    return notApplicable('only M3 has a fourth character with undefined values');
  }
  return judgeIncidents(context, 'bad-fourth', 'undefined fourth characters', () => 1);
}

/** PKT-5: packets cut short. */
export function judgeCutPackets(context: RuleContext): RuleOutcome {
  return judgeIncidents(context, 'cut', 'packets cut short', () => 1);
}

/** Counts packets that a test picks out. */
export function judgePackets(
  context: RuleContext,
  picks: (packet: number) => boolean,
  what: string,
  message: string,
): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { characters, packets } = context.decoded;
  if (packets.count === 0) return notShown('there are no packets in the capture');
  const places: Place[] = [];
  let count = 0;
  for (let p = 0; p < packets.count; p++) {
    if (!picks(p)) continue;
    count += 1;
    if (places.length >= MOST_PLACES) continue;
    const first = packets.firstCharacter[p];
    places.push({
      verdict: 'violation',
      startTicks: characters.startTicks[first],
      endTicks: characters.endTicks[first + packets.characterCount[p] - 1],
      message,
    });
  }
  const verdict = judgeCount(count, 0, context.limit);
  const least = context.setting.minimumCount ?? DEFAULT_EXPOSURE;
  if (verdict === 'pass' && characters.count < least) {
    return {
      ...notShown(
        `${count} of ${plural(packets.count, 'packet')} ${what}; ${least} characters are needed to call that a pass, here are ${characters.count}`,
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
    reason: exposureText(count, packets.count, `packets ${what}`),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** PKT-2: reserved bits set. */
export function judgeReservedBits(context: RuleContext): RuleOutcome {
  const { flags } = context.decoded.packets;
  return judgePackets(
    context,
    (p) => (flags[p] & HAS_RESERVED_BITS) !== 0,
    'have reserved bits set',
    'Reserved bits are set in this packet',
  );
}

/** PKT-4: packets that say nothing. */
export function judgeIdlePackets(context: RuleContext): RuleOutcome {
  const { protocol, packets, resetOfCharacter } = context.decoded;
  if (protocol === 'M-null' || protocol === 'five-byte') {
    return notApplicable('packets without movement or change have a meaning, or are usual, in this protocol');
  }
  const { flags, firstCharacter } = packets;
  const isFirstAfterIdentification = (p: number): boolean =>
    firstCharacter[p] > 0 && resetOfCharacter[firstCharacter[p] - 1] >= 0;
  return judgePackets(
    context,
    (p) => (flags[p] & IS_IDLE) !== 0 && !(protocol === 'MZ' && isFirstAfterIdentification(p)),
    'say nothing',
    'No movement, no wheel, no change of a button: the packet says nothing',
  );
}

/** PKT-7: wheel values published hosts drop or misread. */
export function judgeWheelValues(context: RuleContext): RuleOutcome {
  const { packets } = context.decoded;
  if (!packets.hasWheel) return notApplicable('the protocol has no wheel');
  const { wheel, flags } = packets;
  return judgePackets(
    context,
    (p) => (flags[p] & HAS_FOURTH) !== 0 && (Math.abs(wheel[p]) >= 7 || Math.abs(wheel[p]) === 2),
    'have a wheel value some hosts drop or misread',
    'Some hosts drop wheel values of 7 and more and take 2 for a horizontal step',
  );
}
