import type { CharacterTable } from '../characters/character-table';
import { endFor, isBegin, parsePnp } from './parse-pnp';
import type { PnpString } from './pnp-string';

/** What a reply was read as. */
export interface Identification {
  /** The part before a PnP string; null where the reply is a bare PnP string. */
  readonly identity: string | null;
  /** Indexes of its characters, ascending. */
  readonly characters: readonly number[];
  readonly pnp: PnpString | null;
}

const M = 0x4d;
/** Replies of one character other than `M`. Source: protocol-facts 5.5 (`H`), 4.2 (`B`). */
const OTHER_SINGLE = [0x48, 0x42];
const SECOND_OF_M = [0x33, 0x5a];
/** Longest pause before `3` or `Z`, seconds. Source: rules.md 2. */
const SECOND_WITHIN_S = 0.1;
/** Characters of one packet lie closer together than this, seconds. Source: protocol-facts 5.9, timing rule. */
const PACKET_GAP_S = 0.1;
/** Pause that ends a PnP string for good, seconds: well above the 200 ms a host allows (house). */
const PNP_GAP_S = 0.5;
/** Hosts buffer 256 characters of a PnP string. Source: protocol-facts 4.1. */
const LONGEST_PNP = 256;
/** Longest Other ID. Source: Plug and Play External COM Device Specification 1.00, 3.1. */
const LONGEST_OTHER_ID = 16;

/** Characters [from, to) that may belong to one reply. */
export class ReplyReader {
  constructor(
    private readonly characters: CharacterTable,
    private readonly to: number,
    private readonly ticksPerSecond: number,
    /** Eight data bits: headers of packets have bit 7 set, so no identity can be taken for one. */
    private readonly hasEightBits: boolean,
  ) {}

  /** Reads an identification that begins with character `from`; null if none does. */
  read(from: number): Identification | null {
    if (from >= this.to) return null;
    const bare = this.readBare(from);
    const afterBare = from + (bare?.length ?? 0);
    if (bare !== null && this.isPnpAt(afterBare, true)) return this.withPnp(bare, from, afterBare);
    if (bare !== null) return { identity: bare, characters: indexes(from, afterBare), pnp: null };
    const begin = this.findBegin(from);
    return begin === null ? null : this.withPnp(this.otherId(from, begin), from, begin);
  }

  /** `M`, `M3`, `MZ`, `H`, `B`; null where the characters are something else, such as a packet that begins with 4Dh. */
  private readBare(from: number): string | null {
    const first = this.value(from);
    if (OTHER_SINGLE.includes(first)) {
      return this.isPacketFrom(from) && !this.isPnpAt(from + 1, true) ? null : String.fromCharCode(first);
    }
    if (first !== M) return null;
    const second = from + 1;
    const isSecond =
      second < this.to && SECOND_OF_M.includes(this.value(second)) && this.gapS(from) <= SECOND_WITHIN_S;
    if (isSecond && this.isPnpAt(second + 1, true)) return `M${String.fromCharCode(this.value(second))}`;
    if (isSecond && !this.isPacketFrom(second)) return `M${String.fromCharCode(this.value(second))}`;
    if (this.isPacketFrom(from) && !this.isPnpAt(second, true)) return null;
    return 'M';
  }

  /** Whether two characters without bit 6 follow closely: then this one is a packet's header, no identification. */
  private isPacketFrom(index: number): boolean {
    if (this.hasEightBits && (this.characters.values[index] & 0x80) === 0) return false;
    for (let i = index + 1; i <= index + 2; i++) {
      if (i >= this.to || this.gapS(i - 1) > PACKET_GAP_S) return false;
      if (this.characters.errors[i] !== 0 || (this.value(i) & 0x40) !== 0) return false;
    }
    return true;
  }

  /**
   * Whether a PnP string begins here. After a known identity four more characters without bit 6 (or three capital letters in
   * the 7-bit form) are enough, so that a string with a damaged field is still seen as one.
   */
  private isPnpAt(index: number, isAfterIdentity: boolean): boolean {
    if (index >= this.to || !isBegin(this.value(index)) || this.characters.errors[index] !== 0) return false;
    if (index + 5 >= this.to) return false;
    for (let i = index; i < index + 5; i++) if (this.gapS(i) > PNP_GAP_S) return false;
    const shift = this.value(index) === 0x08 ? 0x20 : 0;
    let letters = 0;
    let plain = 0;
    for (let i = index + 1; i <= index + 5; i++) {
      const value = this.value(i);
      if ((value & 0x40) === 0) plain += 1;
      if (i > index + 2 && value + shift >= 0x41 && value + shift <= 0x5a) letters += 1;
    }
    const hasRevision = this.value(index + 1) <= 0x3f && this.value(index + 2) <= 0x3f;
    if (isAfterIdentity && shift !== 0) return plain >= 4;
    return hasRevision && letters === 3;
  }

  /** Begin PnP within the first characters of a reply whose Other ID is none of the known ones. */
  private findBegin(from: number): number | null {
    for (let i = from; i < this.to && i <= from + LONGEST_OTHER_ID; i++) {
      if (i > from && this.gapS(i - 1) > PNP_GAP_S) return null;
      if (this.isPnpAt(i, false)) return i;
    }
    return null;
  }

  private otherId(from: number, begin: number): string | null {
    let text = '';
    for (let i = from; i < begin; i++) text += String.fromCharCode(this.value(i));
    const visible = text.replace(/[^\x21-\x7e]/g, '');
    return visible === '' ? null : visible;
  }

  private withPnp(identity: string | null, from: number, begin: number): Identification {
    const end = endFor(this.value(begin));
    let last = begin;
    for (let i = begin + 1; i < this.to && i < begin + LONGEST_PNP; i++) {
      if (this.gapS(i - 1) > PNP_GAP_S) break;
      last = i;
      // The two revision characters are raw numbers and may look like anything.
      if (i >= begin + 3 && this.value(i) === end) break;
    }
    const raw: number[] = [];
    for (let i = begin; i <= last; i++) raw.push(this.value(i));
    return { identity, characters: indexes(from, last + 1), pnp: parsePnp(raw) };
  }

  /** Identifications have seven bits, whatever the frame. */
  private value(index: number): number {
    return this.characters.values[index] & 0x7f;
  }

  /** Pause between the end of a character and the start of the next, seconds. */
  private gapS(index: number): number {
    if (index + 1 >= this.characters.count) return Infinity;
    return (this.characters.startTicks[index + 1] - this.characters.endTicks[index]) / this.ticksPerSecond;
  }
}

function indexes(from: number, to: number): number[] {
  return Array.from({ length: to - from }, (_, i) => from + i);
}
