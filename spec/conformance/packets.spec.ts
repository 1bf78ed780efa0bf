import { describe, expect, it } from 'vitest';
import { CharacterBuilder } from '#shared/characters/character-builder';
import { decodePackets } from '#shared/packets/decode-packets';
import { BUTTON_NAMES, EXPLICIT_RELEASE, IMPLICIT_RELEASE } from '#shared/packets/packet-table';
import type { Protocol } from '#shared/packets/packet-table';

/** Characters one after another at 1200 bit/s, in microseconds, with a pause of a packet between the groups. */
function decodeHex(protocol: Protocol, hex: string) {
  const builder = new CharacterBuilder(16);
  let at = 1e6;
  let edge = 0;
  for (const group of hex.split('|')) {
    for (const byte of group.trim().split(/\s+/)) {
      builder.add(at, at + 7500, parseInt(byte, 16), 0, edge++);
      at += 7500;
    }
    at += 30_000;
  }
  const characters = builder.finish();
  const source = {
    characters,
    isIdentification: new Uint8Array(characters.count),
    barriers: new Float64Array(0),
    ticksPerSecond: 1e6,
  };
  const { packets, incidents } = decodePackets(source, protocol, 0, at + 1e6);
  const rows = Array.from({ length: packets.count }, (_, p) => {
    const held = BUTTON_NAMES.filter((_, bit) => ((packets.buttons[p] >> bit) & 1) === 1);
    return [packets.dx[p], packets.dy[p], ...(packets.hasWheel ? [packets.wheel[p]] : []), held.join(' ')];
  });
  return { rows, incidents, flags: [...packets.flags] };
}

describe('M', () => {
  // Source: mouse(4), Linux man-pages 6.03: bit 6 in the first byte only; L, R, y7 y6, x7 x6.
  it.each([
    ['40 00 00', [0, 0, '']],
    ['60 00 00', [0, 0, 'left']],
    ['50 00 00', [0, 0, 'right']],
    ['4C 05 3D', [5, -3, '']],
    ['56 00 3F', [-128, 127, 'right']],
    ['7F 3F 3F', [-1, -1, 'left right']],
    ['49 00 3F', [64, -65, '']],
  ])('%s', (hex, row) => {
    expect(decodeHex('M', hex).rows).toEqual([row]);
  });
});

describe('M3', () => {
  // Source: mouse(4), Linux man-pages 6.03: a fourth byte 20h while the middle button is down; release rules of open drivers.
  it('takes a fourth character as the middle button, whatever the bits that differ by variant', () => {
    expect(
      decodeHex('M3', '40 00 00 20 | 43 3E 00 20 | 60 02 01 20 | 40 00 00 00 | 40 00 00 22').rows,
    ).toEqual([
      [0, 0, 'middle'],
      [-2, 0, 'middle'],
      [2, 1, 'left middle'],
      [0, 0, ''],
      [0, 0, 'middle'],
    ]);
  });

  it('keeps the button latched where the device releases explicitly', () => {
    const { rows, flags } = decodeHex('M3', '40 00 00 20 | 5C 07 39 | 40 00 00 00');
    expect(rows[1]).toEqual([7, -7, 'middle right']);
    expect(flags[2] & EXPLICIT_RELEASE).not.toBe(0);
  });

  it('releases on a three-character packet where the device never releases explicitly', () => {
    const { rows, flags } = decodeHex('M3', '40 00 00 20 | 43 3E 00 20 | 5C 07 39');
    expect(rows[2]).toEqual([7, -7, 'right']);
    expect(flags[2] & IMPLICIT_RELEASE).not.toBe(0);
  });

  it('reports a fourth character no device sends', () => {
    expect(decodeHex('M3', '40 01 00 2C').incidents.map(({ kind }) => kind)).toEqual(['bad-fourth']);
  });
});

describe('MZ', () => {
  // Source: published host drivers for the wheel format, checked rows of protocol-facts 5.3.
  it.each([
    ['40 00 00 0F', [0, 0, -1, '']],
    ['40 00 00 01', [0, 0, 1, '']],
    ['40 00 00 10', [0, 0, 0, 'middle']],
    ['40 00 00 20', [0, 0, 0, 'fourth']],
    ['4C 05 3D 1E', [5, -3, -2, 'middle']],
    ['76 00 3F 08', [-128, 127, -8, 'left right']],
  ])('%s', (hex, row) => {
    expect(decodeHex('MZ', hex).rows).toEqual([row]);
  });
});

describe('M-null', () => {
  // Source: the toggle rule of the Linux serial mouse driver 1.17 and others; sequence of protocol-facts 5.4.
  it('toggles the middle button on packets without movement or change', () => {
    const hex = '40 00 00 | 40 03 00 | 40 00 00 | 60 00 00 | 60 00 00 | 40 00 00 | 40 00 00';
    expect(decodeHex('M-null', hex).rows).toEqual([
      [0, 0, 'middle'],
      [3, 0, 'middle'],
      [0, 0, ''],
      [0, 0, 'left'],
      [0, 0, 'left middle'],
      [0, 0, 'middle'],
      [0, 0, ''],
    ]);
  });
});

describe('five-byte', () => {
  // Source: published host drivers (eight-bit signed halves, buttons active low); mouse(4) draws seven bits, see protocol-facts 5.5.
  it.each([
    ['87 00 00 00 00', [0, 0, '']],
    ['86 7F 7F 7F 7F', [254, -254, 'right']],
    ['83 05 03 04 FE', [9, -1, 'left']],
    ['80 80 7F 80 7F', [-256, -254, 'left middle right']],
    ['85 FF FF FF 00', [-2, 1, 'middle']],
    ['87 0A EC F6 14', [0, 0, '']],
  ])('%s', (hex, row) => {
    expect(decodeHex('five-byte', hex).rows).toEqual([row]);
  });

  it('is not led astray by data that looks like a header', () => {
    const hex = '87 80 81 82 83 | 87 84 85 86 87 87 87 87 87 87 | 83 87 80 87 80';
    const { rows, incidents } = decodeHex('five-byte', hex);
    expect(rows).toHaveLength(4);
    expect(incidents).toEqual([]);
  });

  it('finds its place again after a lost character', () => {
    const { rows, incidents } = decodeHex('five-byte', '87 01 02 03 | 87 05 05 05 05 | 87 06 06 06 06');
    expect(rows).toEqual([
      [10, -10, ''],
      [12, -12, ''],
    ]);
    expect(incidents.map(({ kind }) => kind)).toEqual(['cut']);
  });
});

describe('three-byte', () => {
  // Source: mouse(4), Linux man-pages 6.03, bytes 1 to 3 of its five-byte relative; rows of protocol-facts 5.6.
  it.each([
    ['87 00 00', [0, 0, '']],
    ['86 7F 80', [127, 128, 'right']],
    ['83 05 03', [5, -3, 'left']],
    ['82 80 7F', [-128, -127, 'left right']],
    ['85 FF FF', [-1, 1, 'middle']],
  ])('%s', (hex, row) => {
    expect(decodeHex('three-byte', hex).rows).toEqual([row]);
  });
});

describe('MM', () => {
  // Source: published host drivers: sign bit 1 = positive; mouse(4) says the opposite, see protocol-facts 5.7.
  it.each([
    ['90 00 00', [0, 0, '']],
    ['9A 10 10', [16, -16, 'middle']],
    ['94 05 03', [5, 3, 'left']],
    ['87 7F 7F', [-127, 127, 'left middle right']],
    ['89 02 7F', [-2, -127, 'right']],
  ])('%s', (hex, row) => {
    expect(decodeHex('MM', hex).rows.map((values) => values.map((v) => (v === 0 ? 0 : v)))).toEqual([row]);
  });
});
