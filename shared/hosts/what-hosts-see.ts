import type { CharacterTable } from '../characters/character-table';
import type { Reset } from '../resets/reset';
import type { Acceptance, HostModel, HostReset } from './host-model';
import { KNOWN_HOSTS } from './known-hosts';

/** What of a decode the hosts are shown. */
export interface HandshakeRecord {
  /** Seconds of a tick. */
  readonly tickS: number;
  readonly characters: CharacterTable;
  readonly resets: readonly Reset[];
}

export interface HostView {
  readonly host: HostModel;
  /**
   * `found` in all resets of the kind recorded, `sometimes` in a part of them, `missed` in none; `not-shown`: no reset of its kind
   * was recorded; `told`: its user names the protocol.
   */
  readonly outcome: 'found' | 'sometimes' | 'missed' | 'not-shown' | 'told';
  /** Which of its resets finds the device, from 1; null where none does. */
  readonly attempt: number | null;
  /** What it takes the device for; null where it is not found. */
  readonly as: string | null;
  /** Resets of the kind recorded, and in how many of them it finds the device. */
  readonly n: number;
  readonly found: number;
  /** In plain words, of the last reset that fails, or of what is missing. */
  readonly why: string;
}

/** A recorded pulse may be this much longer than the host's, and still stand for it (house). */
const LONGER = 1.25;
/** An unanswered pulse this much shorter than the host's says nothing about it (house). */
const SHORTER = 0.8;

/** What each host would make of the device, as far as resets of its kind were recorded. */
export function whatHostsSee(record: HandshakeRecord, hosts: readonly HostModel[] = KNOWN_HOSTS): HostView[] {
  return hosts.map((host) => lookAs(host, record));
}

interface Sight {
  readonly as: string | null;
  readonly why: string;
}

function lookAs(host: HostModel, record: HandshakeRecord): HostView {
  const nothing = { host, attempt: null, as: null, n: 0, found: 0 };
  if (host.resets.length === 0)
    return { ...nothing, outcome: 'told', why: 'the reply is ignored: the protocol is named by its user' };
  let best: HostView | null = null;
  host.resets.forEach((kind, i) => {
    const sights = record.resets
      .filter((reset) => standsFor(reset, kind, record.tickS))
      .map((reset) => see(host, record, reset));
    if (sights.length === 0) return;
    const good = sights.filter(({ as }) => as !== null);
    const outcome = good.length === sights.length ? 'found' : good.length > 0 ? 'sometimes' : 'missed';
    const failed = sights.findLast(({ as }) => as === null);
    const view: HostView = {
      host,
      outcome,
      attempt: good.length > 0 ? i + 1 : null,
      as: good[0]?.as ?? null,
      n: sights.length,
      found: good.length,
      why: failed?.why ?? good[0].why,
    };
    if (best === null || good.length / sights.length > best.found / best.n) best = view;
  });
  return best ?? { ...nothing, outcome: 'not-shown', why: `no reset ${kindsOf(host)} was recorded` };
}

function kindsOf(host: HostModel): string {
  const kinds = new Set(host.resets.map(({ lines }) => (lines === 'rts' ? 'by RTS alone' : 'by both lines')));
  const pulse = host.resets[0];
  return `${[...kinds].join(' or ')} of about ${Math.round(pulse.leastLowS * 1e3)} ms`;
}

/** A shorter pulse that was answered is at least as hard; a longer one is easier and stands for nothing. */
function standsFor(reset: Reset, kind: HostReset, tickS: number): boolean {
  if (reset.isWindowCut && reset.replyTicks === null) return false;
  if (reset.isPowerUp !== (kind.lines === 'both')) return false;
  const lowS = (reset.onTicks - reset.offTicks) * tickS;
  // Power has to be away long enough to be a power-up at all: then only the upper end matters.
  if (!reset.isPulseStartSeen || lowS > kind.mostLowS * LONGER) return false;
  return reset.replyTicks !== null || lowS >= kind.leastLowS * SHORTER;
}

/** What the host makes of one reset. */
function see(host: HostModel, { tickS, characters }: HandshakeRecord, reset: Reset): Sight {
  const { firstCharacter, onTicks, windowEndTicks } = reset;
  if (firstCharacter < 0 || reset.replyTicks === null) return { as: null, why: 'the reset is not answered' };
  const waitS = (characters.endTicks[firstCharacter] - onTicks) * tickS;
  if (waitS > host.firstWaitS)
    return {
      as: null,
      why: `the first character is complete after ${ms(waitS)}, it waits ${ms(host.firstWaitS)}`,
    };
  const heard: number[] = [];
  const begun = characters.endTicks[firstCharacter];
  let before = begun;
  for (let c = firstCharacter; c < characters.count && heard.length < host.mostCharacters; c++) {
    const end = characters.endTicks[c];
    if (characters.startTicks[c] >= windowEndTicks && reset.identificationEndTicks === null) break;
    if (reset.identificationEndTicks !== null && characters.startTicks[c] >= reset.identificationEndTicks)
      break;
    if ((end - before) * tickS > host.gapS) break;
    if (host.totalS !== null && (end - begun) * tickS > host.totalS) break;
    heard.push(characters.values[c]);
    before = end;
  }
  const taken = host.accepts.find((acceptance) => isTaken(acceptance, heard, reset));
  if (taken !== undefined) return { as: taken.as, why: `takes it for ${taken.as}` };
  return { as: null, why: `does not know the answer ${quote(heard)}` };
}

function isTaken(acceptance: Acceptance, heard: readonly number[], { pnp }: Reset): boolean {
  switch (acceptance.kind) {
    case 'pnp':
      return (
        pnp !== null &&
        (acceptance.form === undefined || pnp.form === acceptance.form) &&
        // All of it was heard before a pause or a limit ended the listening.
        heard.length >= pnp.raw.length &&
        (acceptance.needsEnd !== true || pnp.isComplete)
      );
    case 'begins':
      return textOf(heard).startsWith(acceptance.text);
    case 'holds':
      return textOf(heard).indexOf(acceptance.text) >= acceptance.from;
  }
}

function textOf(values: readonly number[]): string {
  return String.fromCharCode(...values);
}

function quote(values: readonly number[]): string {
  const shown = values.slice(0, 4).map((value) => value.toString(16).toUpperCase().padStart(2, '0'));
  return `${shown.join(' ')}${values.length > shown.length ? ' …' : ''}`;
}

function ms(seconds: number): string {
  return `${(seconds * 1e3).toFixed(1)} ms`;
}
