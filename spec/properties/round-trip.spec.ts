import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CaptureReader } from '#shared/capture/read-capture';
import type { ComposedCapture } from '#shared/composer/compose';
import { compose } from '#shared/composer/compose';
import type { Script, Step } from '#shared/composer/script';
import { writeCsv } from '#shared/composer/write-csv';
import { writeVcd } from '#shared/composer/write-vcd';
import { decode } from '#shared/decode/decode';
import type { Decoded } from '#shared/decode/decoded';
import { BUTTON_NAMES, PROTOCOLS } from '#shared/packets/packet-table';
import type { ButtonName, Protocol } from '#shared/packets/packet-table';
import { toSeconds } from '#shared/time/time-base';

// The composer shares our understanding of the protocols: these tests show that nothing is lost on the way, not that the
// protocols are understood. For that see spec/captures.

function readText(pieces: Iterable<string>, chunkBytes?: number): Decoded {
  const bytes = new TextEncoder().encode([...pieces].join(''));
  const reader = new CaptureReader();
  const size = chunkBytes ?? bytes.length;
  for (let i = 0; i < bytes.length; i += size) reader.push(bytes.subarray(i, i + size));
  return decode(reader.finish());
}

function buttonsOf(protocol: Protocol): ButtonName[] {
  if (protocol === 'M') return ['left', 'right'];
  if (protocol === 'MZ') return ['left', 'middle', 'right', 'fourth'];
  return ['left', 'middle', 'right'];
}

/** A move that says something, or a click and its release with a pause between. */
function stepsFor(protocol: Protocol): fc.Arbitrary<Step[]> {
  const count = fc.integer({ min: -127, max: 127 });
  const move = fc
    .record({
      dx: count,
      dy: count,
      wheel: protocol === 'MZ' ? fc.integer({ min: -8, max: 7 }) : fc.constant(0),
    })
    .filter(({ dx, dy }) => dx !== 0 || dy !== 0)
    .map((step): Step[] => [{ do: 'move', ...step }]);
  if (protocol === 'M-null') return move;
  const click = fc
    .record({ button: fc.constantFrom(...buttonsOf(protocol)), ms: fc.integer({ min: 0, max: 400 }) })
    .map(({ button, ms }): Step[] => [
      { do: 'press', button },
      { do: 'wait', ms },
      { do: 'release', button },
    ]);
  const wait = fc.integer({ min: 0, max: 300 }).map((ms): Step[] => [{ do: 'wait', ms }]);
  return fc.oneof(
    { weight: 5, arbitrary: move },
    { weight: 2, arbitrary: click },
    { weight: 1, arbitrary: wait },
  );
}

/** Enough movement for the format to be told: a few packets that use both signs and all sizes. */
const PREFACE: readonly Step[] = [
  { do: 'move', dx: 5, dy: -3 },
  { do: 'move', dx: -100, dy: 90 },
  { do: 'move', dx: 1, dy: 2 },
  { do: 'move', dx: 64, dy: -127 },
  { do: 'wait', ms: 40 },
  { do: 'move', dx: -7, dy: 33 },
];

/** The middle button of M-null, twice, so that the variant can be told from M. */
const NULL_CLICKS: readonly Step[] = [1, 2].flatMap((): Step[] => [
  { do: 'wait', ms: 100 },
  { do: 'press', button: 'middle' },
  { do: 'wait', ms: 100 },
  { do: 'release', button: 'middle' },
]);

const scripts: fc.Arbitrary<Script> = fc.constantFrom(...PROTOCOLS).chain((protocol) =>
  fc
    .record({
      seed: fc.integer({ min: 1, max: 1e9 }),
      rateErrorPercent: fc.double({ min: -3, max: 3, noNaN: true }),
      jitterPercent: fc.double({ min: 0, max: 10, noNaN: true }),
      polarity: fc.constantFrom('line' as const, 'logic' as const),
      latencyMs: fc.double({ min: 1, max: 60, noNaN: true }),
      steps: fc.array(stepsFor(protocol), { minLength: 3, maxLength: 25 }),
    })
    .map(({ latencyMs, steps, ...head }) => ({
      name: 'random',
      protocol,
      ...head,
      release: 'explicit' as const,
      steps: [
        { do: 'wait', ms: 120 },
        {
          do: 'reset',
          widthMs: 110,
          latencyMs: protocol === 'MM' || protocol === 'three-byte' ? null : latencyMs,
        },
        { do: 'wait', ms: 60 },
        ...PREFACE,
        ...(protocol === 'M-null' ? NULL_CLICKS : []),
        ...steps.flat(),
        { do: 'wait', ms: 60 },
      ] satisfies Step[],
    })),
);

function expectScript(
  decoded: Decoded,
  composed: ComposedCapture,
  protocol: Protocol,
  toleranceNs: number,
): void {
  const at = (ticks: number): number => toSeconds(decoded.capture.timeBase, ticks) * 1e9;
  expect(decoded.protocol).toBe(protocol);
  const { characters, packets, resets } = decoded;
  expect([...characters.values]).toEqual(composed.truth.characters.map(({ value }) => value));
  expect([...characters.errors].every((flags) => flags === 0)).toBe(true);
  composed.truth.characters.forEach((character, i) => {
    expect(Math.abs(at(characters.startTicks[i]) - character.at)).toBeLessThanOrEqual(toleranceNs);
  });
  expect(
    Array.from({ length: packets.count }, (_, p) => ({
      dx: packets.dx[p],
      dy: packets.dy[p],
      wheel: packets.hasWheel ? packets.wheel[p] : 0,
      buttons: BUTTON_NAMES.filter((_, bit) => ((packets.buttons[p] >> bit) & 1) === 1).sort(),
    })),
  ).toEqual(
    composed.truth.packets.map(({ dx, dy, wheel, buttons }) => ({ dx, dy, wheel, buttons: [...buttons] })),
  );
  expect(resets.map((reset) => reset.identity)).toEqual(
    composed.truth.resets.map(({ identity }) => identity),
  );
}

describe('a composed capture comes back as its script', () => {
  it('through VCD, for every protocol, rate errors to 3 %, jitter to 10 %', () => {
    fc.assert(
      fc.property(scripts, (script) => {
        const composed = compose(script);
        expectScript(readText(writeVcd(composed)), composed, script.protocol, 1000);
      }),
      { numRuns: 150 },
    );
  });

  it('through CSV of changes, with decimal commas', () => {
    fc.assert(
      fc.property(scripts, (script) => {
        const composed = compose(script);
        const csv = writeCsv(composed, {
          rows: 'changes',
          separator: ';',
          decimalComma: true,
          lineEnd: '\r\n',
        });
        expectScript(readText(csv), composed, script.protocol, 1000);
      }),
      { numRuns: 60 },
    );
  });

  it('through sampled CSV', () => {
    fc.assert(
      fc.property(scripts, (script) => {
        const composed = compose({ ...script, jitterPercent: 0 });
        const csv = writeCsv(composed, { rows: 'samples', sampleRateHz: 50_000, time: 'us' });
        expectScript(readText(csv), composed, script.protocol, 21_000);
      }),
      { numRuns: 8 },
    );
  });

  it('wherever the chunks are cut', () => {
    const composed = compose({ ...fc.sample(scripts, { seed: 7, numRuns: 1 })[0], jitterPercent: 3 });
    for (const pieces of [[...writeVcd(composed)], [...writeCsv(composed, { rows: 'changes' })]]) {
      for (const size of [1, 2, 3, 7, 64, 1000]) {
        expectScript(readText(pieces, size), composed, decode(readWhole(pieces)).protocol!, 1000);
      }
    }
  });
});

function readWhole(pieces: Iterable<string>): ReturnType<CaptureReader['finish']> {
  const reader = new CaptureReader();
  for (const piece of pieces) reader.push(new TextEncoder().encode(piece));
  return reader.finish();
}
