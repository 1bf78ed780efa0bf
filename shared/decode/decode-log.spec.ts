import { describe, expect, it } from 'vitest';
import { readBytes, readText } from '../capture/spec-texts';
import { BUTTON_NAMES } from '../packets/packet-table';
import { BASELINE } from '../rules/baseline';
import { check } from '../rules/check';
import { toSeconds } from '../time/time-base';
import { decode } from './decode';
import type { Decoded } from './decoded';

/** `5,-3 left@0.9`: movement, buttons and time of each packet. */
function packetsOf({ packets, characters, capture }: Decoded): string[] {
  return Array.from({ length: packets.count }, (_, p) => {
    const buttons = BUTTON_NAMES.filter((_name, bit) => ((packets.buttons[p] >> bit) & 1) === 1).join('+');
    const t = toSeconds(capture.timeBase, characters.startTicks[packets.firstCharacter[p]]);
    return `${packets.dx[p]},${packets.dy[p]} ${buttons}@${Math.round(t * 1e6) / 1e6}`;
  });
}

function log(...lines: string[]): Decoded {
  return decode(readText(`${lines.join('\n')}\n`));
}

describe('a log of bytes', () => {
  // Source: mouse(4), Linux man-pages 6.03: M and M3 packets; worked examples of protocol-facts 5.1 and 5.2.
  it('gives characters at their stamps and packets, without the identification', () => {
    const decoded = log(
      '0.194 RX 4D',
      '0.257 RX 33',
      '0.9 RX 4C 05 3D',
      '1.5 RX 60',
      '1.508 RX 02',
      '1.516 RX 01',
      '1.524 RX 20',
    );
    expect(decoded.protocol).toBe('M3');
    expect(packetsOf(decoded)).toEqual(['5,-3 @0.9', '2,1 left+middle@1.5']);
    const times = Array.from(decoded.characters.startTicks, (tick) =>
      toSeconds(decoded.capture.timeBase, tick),
    );
    [0.194, 0.257, 0.9, 0.9075, 0.915, 1.5, 1.508, 1.516, 1.524].forEach((t, i) =>
      expect(times[i]).toBeCloseTo(t, 9),
    );
    expect(decoded).toMatchObject({ framing: null, lines: {}, resets: [], incidents: [] });
  });

  it('leaves out what the host sent', () => {
    const decoded = log('0.1 TX 2A 71', '0.9 RX 4C', '0.905 TX 4D', '0.91 RX 05', '0.92 RX 3D');
    expect(packetsOf(decoded)).toEqual(['5,-3 @0.9']);
    expect(decoded.characters.count).toBe(3);
  });

  it('keeps bytes under one stamp in front of the next', () => {
    const decoded = log('0.900 RX 4C 05 3D', '0.903 RX 40 01 00', '0.950 RX 40 02 00');
    const { startTicks, endTicks, count } = decoded.characters;
    for (let i = 1; i < count; i++) expect(startTicks[i]).toBeGreaterThanOrEqual(endTicks[i - 1]);
    expect(decoded.capture.endTicks).toBeGreaterThanOrEqual(endTicks[count - 1]);
    expect(packetsOf(decoded)).toHaveLength(3);
  });

  // Source: worked examples of protocol-facts 5.1, 5.3, 5.5, 5.6 and 5.7.
  it.each([
    ['M', '4C 05 3D', '56 00 3F', '7F 3F 3F', ['5,-3 ', '-128,127 right', '-1,-1 left+right']],
    ['M', 'CC 85 BD', 'D6 80 BF', 'FF BF BF', ['5,-3 ', '-128,127 right', '-1,-1 left+right']],
    ['MZ', '40 00 00 0F', '4C 05 3D 1E', '76 00 3F 08', ['0,0 ', '5,-3 middle', '-128,127 left+right']],
    [
      'five-byte',
      '86 7F 7F 7F 7F',
      '83 05 03 04 FE',
      '85 FF FF FF 00',
      ['254,-254 right', '9,-1 left', '-2,1 middle'],
    ],
    ['three-byte', '86 7F 80', '83 05 03', '85 FF FF', ['127,128 right', '5,-3 left', '-1,1 middle']],
    ['MM', '94 05 03', '9A 10 10', '87 7F 7F', ['5,3 left', '16,-16 middle', '-127,127 left+middle+right']],
  ])('is read as %s: %s, %s, %s', (protocol, a, b, c, packets) => {
    const decoded = log(`1.0 RX ${a}`, `2.0 RX ${b}`, `3.0 RX ${c}`);
    expect(decoded.protocol).toBe(protocol);
    expect(packetsOf(decoded)).toEqual(packets.map((packet, i) => `${packet}@${i + 1}`));
  });

  it('shows nothing of the rules that need edges, and counts packets', () => {
    const decoded = log(...Array.from({ length: 40 }, (_, i) => `${(1 + i * 0.03).toFixed(3)} RX 4C 05 3D`));
    const { rules, verdict } = check(decoded, BASELINE);
    const verdictOf = (id: string): string | undefined => rules.find((rule) => rule.id === id)?.verdict;
    for (const id of ['HSK-1', 'FRM-1', 'RPT-1', 'LVL-1']) expect(verdictOf(id)).toBe('not-shown');
    expect(verdictOf('PKT-1')).toBe('pass');
    expect(verdict).toBe('inconclusive');
  });

  it('has no channels to map', () => {
    const capture = readText('0.1 RX 4C\n0.2 RX 05\n0.3 RX 3D\n');
    expect(() => decode(capture, { lines: { data: { channel: 'rxd', polarity: 'auto' } } })).toThrow(
      'there is no channel "rxd": a log of bytes has no channels',
    );
  });

  it('of the host alone gives no packets', () => {
    expect(log('0.1 TX 2A', '0.2 TX 71')).toMatchObject({
      protocol: null,
      framing: null,
      characters: { count: 0 },
    });
  });
});

describe('bytes without times', () => {
  it('give the same packets', () => {
    const decoded = decode(readBytes(Uint8Array.of(0x4d, 0x33, 0x4c, 5, 0x3d, 0x40, 0, 0, 0x20, 0x40, 1, 0)));
    expect(decoded.protocol).toBe('M3');
    expect(packetsOf(decoded).map((packet) => packet.split('@')[0])).toEqual([
      '5,-3 ',
      '0,0 middle',
      expect.any(String),
    ]);
  });
});
