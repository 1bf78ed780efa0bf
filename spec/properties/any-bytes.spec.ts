import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import * as fc from 'fast-check';
import { describe, it } from 'vitest';
import { CaptureError } from '#shared/capture/capture-error';
import { CaptureReader } from '#shared/capture/read-capture';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import { toDecodeResult } from '#shared/writers/to-decode-result';

function swallow(bytes: Uint8Array): void {
  try {
    const reader = new CaptureReader({ sampleRateHz: 100_000 });
    reader.push(bytes);
    const decoded = decode(reader.finish());
    toDecodeResult(decoded, check(decoded, BASELINE), { name: 'x', sha256: '', bytes: bytes.length });
  } catch (error) {
    if (!(error instanceof CaptureError)) throw error;
  }
}

const folder = fileURLToPath(new URL('../captures/', import.meta.url));
const captures = readdirSync(folder)
  .filter((name) => /\.(vcd|csv)$/.test(name))
  .map((name) => readFileSync(folder + name))
  .filter((bytes) => bytes.length < 50_000);

describe('any bytes whatever', () => {
  it('are read or refused with the library’s own error', () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 2000 }), swallow), { numRuns: 500 });
  });

  it('that look like a dump are read or refused', () => {
    const word = fc.constantFrom(
      '$var',
      'wire',
      '1',
      '!',
      'd',
      '$end',
      '$scope',
      '#1',
      '#9007199254740993',
      '0!',
      '1!',
      'x!',
      'b101',
      '!',
      'r1e300',
      '$dumpoff',
      '$enddefinitions',
      '$timescale',
      '1ns',
      '\\a b',
      '[3:0]',
      '$comment',
    );
    fc.assert(
      fc.property(fc.array(word, { maxLength: 120 }), (words) =>
        swallow(new TextEncoder().encode(words.join(' '))),
      ),
      { numRuns: 500 },
    );
  });

  it('that look like a table are read or refused', () => {
    const cell = fc.constantFrom(
      '0',
      '1',
      '0.5',
      '-3',
      '1e-5',
      '"a',
      '"b"',
      '',
      'x',
      'NaN',
      'inf',
      ';',
      ',',
      '\t',
      '\n',
      '\r\n',
      'time',
      '9,5',
      '99999999999999999999',
    );
    fc.assert(
      fc.property(fc.array(cell, { maxLength: 200 }), (cells) =>
        swallow(new TextEncoder().encode(cells.join(','))),
      ),
      { numRuns: 500 },
    );
  });

  it('that look like a log are read or refused', () => {
    const piece = fc.constantFrom(
      ...[
        '0.1',
        '0.5',
        '12:00:01.5',
        '[9]',
        'RX',
        'TX',
        '<',
        '>',
        '4D',
        '40',
        '00',
        '3F 3F',
        '87',
        '0x1',
        '"M3"',
        '<NUL>',
      ],
      ...['zz', ';', ',', '\n', '\n', '\n', '#', 'RTS ON', '1e400', '-1'],
    );
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 200 }), (pieces) => {
        swallow(new TextEncoder().encode(pieces.join(' ')));
        swallow(new TextEncoder().encode(`0.01 RX 4D\n0.02 RX 40\n0.03 RX 00\n${pieces.join(' ')}`));
      }),
      { numRuns: 500 },
    );
  });

  it('that look like packets are read or refused', () => {
    const byte = fc.constantFrom(
      0x4d,
      0x33,
      0x5a,
      0x40,
      0x4f,
      0x00,
      0x3f,
      0x20,
      0x87,
      0x80,
      0xc0,
      0x08,
      0x28,
      0xff,
    );
    fc.assert(
      fc.property(fc.array(byte, { maxLength: 300 }), (bytes) => swallow(Uint8Array.from(bytes))),
      { numRuns: 500 },
    );
  });

  it('made from a real capture by a few wrong bytes are read or refused', () => {
    const change = fc.record({
      at: fc.nat(),
      value: fc.integer({ min: 0, max: 255 }),
      remove: fc.nat({ max: 40 }),
    });
    fc.assert(
      fc.property(
        fc.constantFrom(...captures),
        fc.array(change, { minLength: 1, maxLength: 6 }),
        (bytes, changes) => {
          const damaged = [...bytes];
          for (const { at, value, remove } of changes) damaged.splice(at % damaged.length, remove, value);
          swallow(Uint8Array.from(damaged));
        },
      ),
      { numRuns: 300 },
    );
  });
});
