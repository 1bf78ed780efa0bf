import { describe, expect, it } from 'vitest';
import { readBytes, readText } from '#shared/capture/spec-texts';
import { decodeResultSchema } from '#shared/contract/decode-result';
import { linesSchema } from '#shared/contract/http/mapping';
import { encodeTape } from '#shared/contract/tape-payload';
import { decode } from '#shared/decode/decode';
import type { Decoded } from '#shared/decode/decoded';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import { writeLog } from '#shared/writers/log';
import { writePacketsCsv } from '#shared/writers/packets-csv';
import { toDecodeResult } from '#shared/writers/to-decode-result';
import { describeLines } from '../../server/jobs/describe-lines';

const FILE = { name: 'port.log', sha256: '0'.repeat(64), bytes: 1 };

/** Ten packets of M behind `M`, from 1 s on. */
const LOG = `0.194 RX 4D\n${Array.from({ length: 10 }, (_, i) => `${(1 + i / 20).toFixed(2)} RX 4C 05 3D\n`).join('')}1.6 TX 2A\n`;

const CASES: readonly (readonly [string, Decoded])[] = [
  ['with times', decode(readText(LOG))],
  ['without times', decode(readBytes(Uint8Array.of(0x4d, 0x4c, 5, 0x3d, 0x4c, 5, 0x3d, 0x40, 1, 0)))],
  ['of the host alone', decode(readText('0.1 TX 2A\n0.2 TX 71\n'))],
];

describe.each(CASES)('bytes %s', (_, decoded) => {
  const result = check(decoded, BASELINE);

  it('are written in every form there is', () => {
    const json = decodeResultSchema.parse(toDecodeResult(decoded, result, FILE));
    expect(json).toMatchObject({
      capture: { format: 'bytes', channels: [] },
      framing: null,
      resets: [],
      controlEvents: [],
      glitches: [],
      lines: { data: null, rts: null },
    });
    expect(json.characters).toHaveLength(decoded.characters.count);
    expect(json.packets).toHaveLength(decoded.packets.count);
    expect(encodeTape(decoded).length).toBeGreaterThan(0);
    expect([...writePacketsCsv(decoded)].join('').trim().split('\r\n')).toHaveLength(1 + decoded.packets.count);
    expect([...writeLog(decoded, result, FILE)].join('')).toContain('port.log');
  });

  it('are described for the map without a line', () => {
    const lines = describeLines(decoded);
    expect(linesSchema.parse({ ...lines, presets: [] })).toMatchObject({ format: 'bytes', channelCount: 0, channels: [] });
  });

  it('show nothing of what needs edges', () => {
    const needing = result.rules.filter(({ id }) => /^(HSK|FRM|LVL|RPT)-/.test(id));
    expect(new Set(needing.map(({ verdict }) => verdict))).toEqual(new Set(['not-shown']));
    expect(result.verdict).toBe('inconclusive');
  });
});
