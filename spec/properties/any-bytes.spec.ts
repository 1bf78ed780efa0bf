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
