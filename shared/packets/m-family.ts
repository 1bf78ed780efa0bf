import type { Obstacle, PacketSource } from './packet-source';
import { cutReason, ObstacleFinder } from './packet-source';
import { PacketBuilder } from './packet-builder';
import {
  EXPLICIT_RELEASE,
  FOURTH,
  HAS_FOURTH,
  HAS_RESERVED_BITS,
  IMPLICIT_RELEASE,
  IS_IDLE,
  LEFT,
  MIDDLE,
  RIGHT,
} from './packet-table';

export type MProtocol = 'M' | 'M3' | 'MZ' | 'M-null';

/** How an M3 device says that the middle button went up. */
export type ReleaseRule = 'explicit' | 'implicit';

const HEADER = 0x40;
/** Bits a fourth character of M3 may have set: middle, a fourth button, two bits that differ by variant. Source: protocol-facts 5.2. */
const M3_FOURTH_BITS = 0x33;

/**
 * Packets of the M family: three characters of seven bits, the first with bit 6 set; a fourth may (M3) or must (MZ) follow.
 * Source: mouse(4), Linux man-pages 6.03; protocol-facts 5.1–5.4.
 */
export function decodeMFamily(source: PacketSource, protocol: MProtocol): PacketBuilder {
  const release = protocol === 'M3' ? findReleaseRule(source) : 'implicit';
  const decoder = new MDecoder(source, protocol, release);
  decoder.run();
  return decoder.packets;
}

/**
 * A device that sends a fourth character without the middle bit after one with it names the release itself; one that never does
 * means the release by its next three-character packet. Source: protocol-facts 5.2.
 */
export function findReleaseRule(source: PacketSource): ReleaseRule {
  const { values } = source.characters;
  const finder = new ObstacleFinder(source);
  let position = 0;
  let isHeld = false;
  for (let i = 0; i < source.characters.count; i++) {
    if (finder.before(i) !== undefined) {
      position = 0;
      if (source.characters.errors[i] !== 0 || source.isIdentification[i] !== 0) continue;
    }
    if ((values[i] & HEADER) !== 0) position = 1;
    else if (position === 3) {
      if ((values[i] & 0x20) !== 0) isHeld = true;
      else if (isHeld) return 'explicit';
      position = 0;
    } else if (position > 0) position += 1;
  }
  return 'implicit';
}

class MDecoder {
  readonly packets: PacketBuilder;
  /** Characters of the open packet, and the first of them. */
  private have = 0;
  private first = 0;
  /** The packet just closed may still get its fourth character. */
  private waitsForFourth = false;
  private buttons = 0;

  constructor(
    private readonly source: PacketSource,
    private readonly protocol: MProtocol,
    private readonly release: ReleaseRule,
  ) {
    this.packets = new PacketBuilder(source.characters.count >> 2, protocol === 'MZ', false);
  }

  private get want(): number {
    return this.protocol === 'MZ' ? 4 : 3;
  }

  run(): void {
    const { characters, isIdentification } = this.source;
    const finder = new ObstacleFinder(this.source);
    for (let i = 0; i < characters.count; i++) {
      const obstacle = finder.before(i);
      if (obstacle !== undefined) {
        this.breakOff(obstacle);
        if (isIdentification[i] !== 0) {
          // A reset begins anew: no button is known to be held.
          this.buttons = 0;
          continue;
        }
        if (characters.errors[i] !== 0) continue;
      }
      this.take(i, characters.values[i] & 0x7f);
    }
    this.settle();
    if (this.have > 0) this.cut('the record ends', true);
  }

  private take(index: number, value: number): void {
    if ((value & HEADER) !== 0) {
      this.settle();
      if (this.have > 0)
        this.cut(`the next header came after ${this.have} of ${this.want} characters`, false);
      this.first = index;
      this.have = 1;
      return;
    }
    if (this.waitsForFourth) {
      this.takeFourth(value);
      return;
    }
    if (this.have === 0) {
      this.orphan(index);
      return;
    }
    this.have += 1;
    if (this.have < 3) return;
    if (this.protocol === 'MZ' && this.have === 4) this.closeMz(value);
    else if (this.protocol === 'M3') this.waitsForFourth = true;
    else if (this.protocol !== 'MZ') this.closeThree();
  }

  /** A three-character packet of M3 whose fourth character did not come is complete as it is. */
  private settle(): void {
    if (!this.waitsForFourth) return;
    this.waitsForFourth = false;
    this.closeThree();
  }

  private breakOff(obstacle: Obstacle): void {
    this.settle();
    if (this.have > 0) this.cut(cutReason(obstacle, this.have, this.want), false);
  }

  private cut(reason: string, isAtEdge: boolean): void {
    this.packets.incidents.push({
      kind: 'cut',
      firstCharacter: this.first,
      characterCount: this.have,
      reason,
      isAtEdge,
    });
    this.have = 0;
  }

  private orphan(index: number): void {
    const last = this.packets.incidents.at(-1);
    if (last?.kind === 'orphan' && last.firstCharacter + last.characterCount === index) {
      this.packets.incidents[this.packets.incidents.length - 1] = {
        ...last,
        characterCount: last.characterCount + 1,
      };
      return;
    }
    this.packets.incidents.push({
      kind: 'orphan',
      firstCharacter: index,
      characterCount: 1,
      reason: 'a character without bit 6 where a header is due',
      isAtEdge: false,
    });
  }

  private takeFourth(value: number): void {
    this.waitsForFourth = false;
    this.have = 4;
    if ((value & ~M3_FOURTH_BITS) !== 0) {
      this.packets.incidents.push({
        kind: 'bad-fourth',
        firstCharacter: this.first + 3,
        characterCount: 1,
        reason: `the fourth character is ${value.toString(16).toUpperCase().padStart(2, '0')}`,
        isAtEdge: false,
      });
    }
    const wasHeld = (this.buttons & MIDDLE) !== 0;
    const isHeld = (value & 0x20) !== 0;
    const extra = (isHeld ? MIDDLE : 0) | ((value & 0x10) !== 0 ? FOURTH : 0);
    this.close(4, extra, 0, HAS_FOURTH | (wasHeld && !isHeld ? EXPLICIT_RELEASE : 0));
  }

  private closeThree(): void {
    if (this.protocol === 'M-null') {
      this.closeNull();
      return;
    }
    const held = this.buttons & (MIDDLE | FOURTH);
    if (this.protocol !== 'M3' || held === 0) this.close(3, 0, 0, 0);
    else if (this.release === 'explicit') this.close(3, held, 0, 0);
    else this.close(3, 0, 0, IMPLICIT_RELEASE);
  }

  /** No movement and nothing else changed: the middle button did. Source: protocol-facts 5.4, toggle rule. */
  private closeNull(): void {
    const { values } = this.source.characters;
    const middle = this.buttons & MIDDLE;
    const isNull =
      movement(values, this.first) === 0 && leftRight(values[this.first]) === (this.buttons & (LEFT | RIGHT));
    this.close(3, isNull ? middle ^ MIDDLE : middle, 0, 0);
  }

  private closeMz(fourth: number): void {
    const wheel = ((fourth & 0x0f) << 28) >> 28;
    const extra = ((fourth & 0x10) !== 0 ? MIDDLE : 0) | ((fourth & 0x20) !== 0 ? FOURTH : 0);
    this.close(4, extra, wheel, HAS_FOURTH);
  }

  private close(count: number, extraButtons: number, wheel: number, flags: number): void {
    const { values } = this.source.characters;
    const header = values[this.first];
    const x = ((((header & 0x03) << 6) | (values[this.first + 1] & 0x3f)) << 24) >> 24;
    const y = ((((header & 0x0c) << 4) | (values[this.first + 2] & 0x3f)) << 24) >> 24;
    const buttons = leftRight(header) | extraButtons;
    const saysNothing = x === 0 && y === 0 && wheel === 0 && buttons === this.buttons;
    // In the eight-bit frame a set top bit is not reserved: it falls on the stop element of a seven-bit receiver.
    const reserved =
      HAS_RESERVED_BITS *
      (count === 4 && this.protocol === 'M3' && (values[this.first + 3] & 0x4c) !== 0 ? 1 : 0);
    this.packets.add(this.first, count, x, y, wheel, buttons, flags | reserved | (saysNothing ? IS_IDLE : 0));
    this.buttons = buttons;
    this.have = 0;
  }
}

function leftRight(header: number): number {
  return ((header & 0x20) !== 0 ? LEFT : 0) | ((header & 0x10) !== 0 ? RIGHT : 0);
}

/** 0 where both axes are at rest. */
function movement(values: Uint8Array, first: number): number {
  return (values[first] & 0x0f) | (values[first + 1] & 0x3f) | (values[first + 2] & 0x3f);
}
