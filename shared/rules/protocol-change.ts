import { packetSource } from '../decode/packet-source';
import type { Decoded } from '../decode/decoded';
import { countBefore, countUpTo } from '../time/sorted-search';
import { decodePackets } from '../packets/decode-packets';
import type { PacketTable, Protocol } from '../packets/packet-table';
import { EXPLICIT_RELEASE, HAS_FOURTH, MIDDLE } from '../packets/packet-table';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, notShown, plural } from './rule-context';
import { judgeCount } from './verdict';

/** So many packets in a row that only fit another protocol are no accident (house). */
const LEAST_RUN = 10;

/**
 * Protocols a device of the same frame may change to. M, M3 and M-null share their three characters: a change between them shows
 * by a fourth character only, and M → M3 at the first middle press is none. Source: rules.md 5, PKT-6.
 */
const OTHERS: Record<Protocol, readonly Protocol[]> = {
  M: ['MZ', 'five-byte'],
  M3: ['MZ', 'five-byte'],
  'M-null': ['MZ', 'five-byte'],
  MZ: ['M', 'five-byte'],
  'five-byte': ['three-byte', 'M', 'MZ'],
  'three-byte': ['five-byte', 'M', 'MZ'],
  MM: [],
};

/** Packets in a row that fit `protocol` and not the one of the capture. Indexes of characters. */
interface StrangeRun {
  readonly protocol: Protocol;
  readonly packets: number;
  readonly firstCharacter: number;
  readonly lastCharacter: number;
}

/** PKT-6: the protocol changes without a reset or a host command. */
export function judgeProtocolChange(context: RuleContext): RuleOutcome {
  const { decoded } = context;
  const { packets, protocol, lines } = decoded;
  if (protocol === null || packets.count === 0) return notShown('there are no packets in the capture');
  const runs = findStrangeRuns(decoded, protocol, context.perSecond);
  const changes = runs.flatMap((run) => changesAt(decoded, protocol, run));
  const told = changes.filter((change) => isExplained(context, change.from, change.to));
  const places: Place[] = changes
    .filter((change) => !told.includes(change))
    .map((change) => ({
      // Without RTS or TXD nobody can say that there was no reset and no command.
      verdict: lines.rts === undefined || lines.txd === undefined ? 'inconclusive' : 'violation',
      startTicks: change.from,
      endTicks: change.to,
      message: `The packets change from ${change.before} to ${change.after} without a reset or a command of the host`,
    }));
  const definite = places.filter((place) => place.verdict === 'violation').length;
  const missing = (['rts', 'txd'] as const).filter((role) => lines[role] === undefined);
  return {
    verdict: judgeCount(definite, places.length - definite, context.limit),
    n: packets.count,
    measured: definite,
    uncertainty: places.length - definite,
    uncertaintyKind: 'bound',
    reason:
      `${plural(places.length, 'unexplained change')} of protocol in ${plural(packets.count, 'packet')}` +
      (told.length > 0 ? `, ${told.length} after a reset or a command` : '') +
      (places.length > definite
        ? `; ${missing.map((role) => role.toUpperCase()).join(' and ')} must be recorded to exclude a reset or a command`
        : ''),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** Stretches that another protocol explains and the one of the capture does not. */
function findStrangeRuns(decoded: Decoded, protocol: Protocol, perSecond: number): StrangeRun[] {
  const strange = markStrange(decoded, protocol);
  if (strange === undefined) return [];
  const { characters, lines, resetOfCharacter, framing } = decoded;
  const others = OTHERS[protocol].filter((other) => framing?.dataBits === 8 || other !== 'five-byte');
  const rts = lines.rts?.trace ?? null;
  const data = lines.data?.trace ?? null;
  const source = packetSource(characters, resetOfCharacter, rts, data, perSecond);
  const runs = others
    .flatMap((other) => runsOf(decodePackets(source, other, 0, Infinity).packets, other, strange))
    .sort((a, b) => a.firstCharacter - b.firstCharacter);
  const kept: StrangeRun[] = [];
  for (const run of runs) {
    // Where two protocols explain the same stretch the longer run counts.
    const last = kept.at(-1);
    if (last === undefined || run.firstCharacter > last.lastCharacter) kept.push(run);
    else if (run.packets > last.packets) kept[kept.length - 1] = run;
  }
  return kept;
}

/** Per character: 1 where the protocol does not explain it. undefined where too few are left for a run. */
function markStrange(decoded: Decoded, protocol: Protocol): Uint8Array | undefined {
  const { characters, packets, packetOfCharacter, resetOfCharacter } = decoded;
  const strange = new Uint8Array(characters.count);
  let count = 0;
  const mark = (character: number): void => {
    strange[character] = 1;
    count += 1;
  };
  for (let c = 0; c < characters.count; c++) {
    if (packetOfCharacter[c] < 0 && resetOfCharacter[c] < 0 && characters.errors[c] === 0) mark(c);
  }
  if (protocol === 'M3') {
    // A fourth character that neither holds nor lets go of the middle button is none of M3.
    for (let p = 0; p < packets.count; p++) {
      const isFourth = (packets.flags[p] & HAS_FOURTH) !== 0 && (packets.flags[p] & EXPLICIT_RELEASE) === 0;
      if (isFourth && (packets.buttons[p] & MIDDLE) === 0) mark(packets.firstCharacter[p] + 3);
    }
  }
  return count < LEAST_RUN ? undefined : strange;
}

/** Runs of adjacent packets each of which holds a strange character. */
function runsOf(packets: PacketTable, protocol: Protocol, strange: Uint8Array): StrangeRun[] {
  const runs: StrangeRun[] = [];
  let from = -1;
  let next = -1;
  const close = (to: number): void => {
    if (from >= 0 && to - from >= LEAST_RUN) {
      runs.push({
        protocol,
        packets: to - from,
        firstCharacter: packets.firstCharacter[from],
        lastCharacter: packets.firstCharacter[to - 1] + packets.characterCount[to - 1] - 1,
      });
    }
    from = -1;
  };
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    const isStrange = strange.subarray(first, first + packets.characterCount[p]).includes(1);
    if (from >= 0 && (first !== next || !isStrange)) close(p);
    if (isStrange && from < 0) from = p;
    next = first + packets.characterCount[p];
  }
  close(packets.count);
  return runs;
}

interface Change {
  readonly from: number;
  readonly to: number;
  readonly before: Protocol;
  readonly after: Protocol;
}

/** The begin and the end of a run, as far as packets of the capture's protocol lie before and after it. */
function changesAt({ characters, packets }: Decoded, protocol: Protocol, run: StrangeRun): Change[] {
  const firstPackets = packets.firstCharacter;
  const before = countBefore(firstPackets, run.firstCharacter) - 1;
  const after = countUpTo(firstPackets, run.lastCharacter);
  const changes: Change[] = [];
  if (before >= LEAST_RUN - 1) {
    const end = firstPackets[before] + packets.characterCount[before] - 1;
    changes.push({
      from: characters.endTicks[Math.min(end, run.firstCharacter)],
      to: characters.startTicks[run.firstCharacter],
      before: protocol,
      after: run.protocol,
    });
  }
  if (packets.count - after >= LEAST_RUN) {
    changes.push({
      from: characters.endTicks[run.lastCharacter],
      to: characters.startTicks[firstPackets[after]],
      before: run.protocol,
      after: protocol,
    });
  }
  return changes.map((change) => ({ ...change, to: Math.max(change.to, change.from) }));
}

/** A device may take so long to follow a command, seconds. Source: protocol-facts 3.2, host H: echo within 1 s. */
const COMMAND_WITHIN_S = 1;

/** Whether RTS changes between two instants, or the host sends something shortly before. */
function isExplained({ decoded, perSecond }: RuleContext, from: number, to: number): boolean {
  const changes = (role: 'rts' | 'txd', begin: number): boolean => {
    const ticks = decoded.lines[role]?.trace.ticks;
    return ticks !== undefined && countUpTo(ticks, to) > countUpTo(ticks, begin);
  };
  return changes('rts', from) || changes('txd', from - COMMAND_WITHIN_S * perSecond);
}
