import type { ButtonName, Protocol } from '../packets/packet-table';

/** What a packet says. dy positive down; `isRelease`: the middle button went up with this packet. */
export interface Report {
  readonly dx: number;
  readonly dy: number;
  readonly wheel: number;
  readonly buttons: ReadonlySet<ButtonName>;
  /** The middle button was down in the packet before. */
  readonly wasMiddleDown: boolean;
}

/**
 * The characters of one packet, straight from the tables of the formats.
 * Source: mouse(4), Linux man-pages 6.03; protocol-facts 5.1–5.7.
 */
export function encodePacket(protocol: Protocol, report: Report, release: 'explicit' | 'implicit'): number[] {
  switch (protocol) {
    case 'M':
    case 'M-null':
      return threeOfM(report);
    case 'M3':
      return [...threeOfM(report), ...fourthOfM3(report, release)];
    case 'MZ':
      return [...threeOfM(report), fourthOfMz(report)];
    case 'five-byte':
      return fiveBytes(report);
    case 'three-byte':
      return [headerLow(report), byte(report.dx), byte(-report.dy)];
    case 'MM':
      return [headerMm(report), Math.abs(report.dx), Math.abs(report.dy)];
  }
}

/** Largest step of one packet per axis, in either direction. */
export function largestStep(protocol: Protocol): number {
  return protocol === 'five-byte' ? 254 : 127;
}

function threeOfM({ dx, dy, buttons }: Report): number[] {
  const x = byte(dx);
  const y = byte(dy);
  const header =
    0x40 | bit(buttons, 'left', 0x20) | bit(buttons, 'right', 0x10) | ((y >> 4) & 0x0c) | (x >> 6);
  return [header, x & 0x3f, y & 0x3f];
}

function fourthOfM3({ buttons, wasMiddleDown }: Report, release: 'explicit' | 'implicit'): number[] {
  if (buttons.has('middle')) return [0x20];
  return wasMiddleDown && release === 'explicit' ? [0x00] : [];
}

function fourthOfMz({ wheel, buttons }: Report): number {
  return (wheel & 0x0f) | bit(buttons, 'middle', 0x10) | bit(buttons, 'fourth', 0x20);
}

/** The movement goes into two halves. */
function fiveBytes(report: Report): number[] {
  const firstX = Math.trunc(report.dx / 2);
  const firstY = Math.trunc(report.dy / 2);
  const second = [byte(report.dx - firstX), byte(-(report.dy - firstY))];
  return [headerLow(report), byte(firstX), byte(-firstY), ...second];
}

/** Buttons active low. */
function headerLow({ buttons }: Report): number {
  return 0x87 & ~(bit(buttons, 'left', 4) | bit(buttons, 'middle', 2) | bit(buttons, 'right', 1));
}

/** Sign bits: 1 = right, 1 = up. */
function headerMm({ dx, dy, buttons }: Report): number {
  const signs = (dx >= 0 ? 0x10 : 0) | (dy > 0 ? 0 : 0x08);
  return 0x80 | signs | bit(buttons, 'left', 4) | bit(buttons, 'middle', 2) | bit(buttons, 'right', 1);
}

function bit(buttons: ReadonlySet<ButtonName>, name: ButtonName, value: number): number {
  return buttons.has(name) ? value : 0;
}

function byte(value: number): number {
  return value & 0xff;
}
