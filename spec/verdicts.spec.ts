import { describe, expect, it } from 'vitest';
import { CaptureReader } from '#shared/capture/read-capture';
import { compose } from '#shared/composer/compose';
import type { Script, Step } from '#shared/composer/script';
import { writeCsv } from '#shared/composer/write-csv';
import { writeVcd } from '#shared/composer/write-vcd';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import type { RuleResult } from '#shared/rules/finding';

// Every verdict of every measured rule, reached from a capture file. Inconclusive comes from the resolution of the file alone.

type FileKind = 'vcd' | { readonly samplesHz: number };

function judge(script: Script, kind: FileKind = 'vcd'): ReadonlyMap<string, RuleResult> {
  const composed = compose(script);
  const pieces =
    kind === 'vcd'
      ? writeVcd(composed)
      : writeCsv(composed, { rows: 'samples', sampleRateHz: kind.samplesHz, time: 'us' });
  const reader = new CaptureReader();
  for (const piece of pieces) reader.push(new TextEncoder().encode(piece));
  return new Map(check(decode(reader.finish()), BASELINE).rules.map((rule) => [rule.id, rule]));
}

const wait = (ms: number): Step => ({ do: 'wait', ms });
const reset = (latencyMs: number | null, more: Partial<Extract<Step, { do: 'reset' }>> = {}): Step => ({
  do: 'reset',
  widthMs: 110,
  latencyMs,
  ...more,
});
const circle: Step = { do: 'draw', figure: 'circle', size: 600, packets: 60 };

function story(steps: readonly Step[], head: Partial<Script> = {}): Script {
  return { name: 'verdict', protocol: 'M', ...head, steps: [wait(150), ...steps, wait(60)] };
}

const healthy = story([reset(11.2), wait(60), circle]);

interface Case {
  readonly rule: string;
  readonly verdict: RuleResult['verdict'];
  readonly script: Script;
  readonly kind?: FileKind;
}

const PNP = { eisaId: 'ZZZ', productId: '0A01', className: 'MOUSE', driverId: 'PNP0F0C' };
const silentStart = { start: { rts: true, dtr: true } };

const CASES: readonly Case[] = [
  { rule: 'HSK-1', verdict: 'pass', script: healthy },
  { rule: 'HSK-1', verdict: 'violation', script: story([reset(19), wait(60), circle]) },
  {
    rule: 'HSK-1',
    verdict: 'inconclusive',
    script: story([reset(13.9), wait(60), circle]),
    kind: { samplesHz: 4000 },
  },
  { rule: 'HSK-1', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  { rule: 'HSK-2', verdict: 'pass', script: healthy },
  { rule: 'HSK-2', verdict: 'violation', script: story([reset(11, { strays: [0x33] }), wait(60), circle]) },
  {
    rule: 'HSK-2',
    verdict: 'not-applicable',
    script: story([reset(11), wait(60), circle], { protocol: 'five-byte' }),
  },
  { rule: 'HSK-2', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  { rule: 'HSK-3', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-3',
    verdict: 'violation',
    script: story([
      reset(11),
      wait(60),
      circle,
      { do: 'set', line: 'rts', on: false },
      { do: 'move', dx: 4, dy: 4 },
    ]),
  },
  { rule: 'HSK-3', verdict: 'not-shown', script: story([circle], { ...silentStart }) },
  {
    rule: 'HSK-3',
    verdict: 'inconclusive',
    // The character starts 60 µs after RTS drops: one sample at 10 kS/s cannot tell.
    script: story([
      reset(11),
      wait(60),
      circle,
      { do: 'set', line: 'rts', on: false },
      wait(0.06),
      { do: 'characters', values: [0x40] },
      { do: 'set', line: 'rts', on: true },
    ]),
    kind: { samplesHz: 10_000 },
  },
  { rule: 'HSK-4', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-4',
    verdict: 'violation',
    script: story([reset(11), wait(60), reset(null), wait(60), circle]),
  },
  { rule: 'HSK-4', verdict: 'not-shown', script: story([circle], { ...silentStart }) },
  {
    rule: 'HSK-4',
    verdict: 'not-applicable',
    script: story([reset(11), wait(60), circle], { protocol: 'five-byte' }),
  },
  { rule: 'HSK-5', verdict: 'pass', script: healthy },
  { rule: 'HSK-5', verdict: 'violation', script: story([reset(11, { strays: [0x00] }), wait(60), circle]) },
  { rule: 'HSK-5', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  { rule: 'HSK-7', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-7',
    verdict: 'violation',
    script: story([reset(11, { widthMs: 20 }), wait(60), circle], { ...silentStart }),
  },
  {
    rule: 'HSK-7',
    verdict: 'inconclusive',
    script: story([reset(11, { widthMs: 50 }), wait(60), circle], { ...silentStart }),
    kind: { samplesHz: 5000 },
  },
  { rule: 'HSK-7', verdict: 'not-shown', script: story([circle], { ...silentStart }) },
  { rule: 'HSK-8', verdict: 'pass', script: story([reset(11, { withDtr: true }), wait(60), circle]) },
  { rule: 'HSK-8', verdict: 'violation', script: story([reset(30, { withDtr: true }), wait(60), circle]) },
  {
    rule: 'HSK-8',
    verdict: 'inconclusive',
    script: story([reset(13.9, { withDtr: true }), wait(60), circle]),
    kind: { samplesHz: 4000 },
  },
  { rule: 'HSK-8', verdict: 'not-shown', script: healthy },
  { rule: 'IDN-2', verdict: 'pass', script: story([reset(11, { pnp: PNP }), wait(60), circle]) },
  {
    rule: 'IDN-2',
    verdict: 'violation',
    script: story([reset(11, { pnp: { ...PNP, checksum: '00' } }), wait(60), circle]),
  },
  { rule: 'IDN-2', verdict: 'not-applicable', script: healthy },
  { rule: 'IDN-2', verdict: 'not-shown', script: story([circle], { ...silentStart }) },
  { rule: 'FRM-1', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-1',
    verdict: 'violation',
    script: story([reset(11), wait(60), circle], { rateErrorPercent: 3.4 }),
  },
  {
    rule: 'FRM-1',
    verdict: 'inconclusive',
    script: story([reset(11), wait(60), circle], { rateErrorPercent: 2.498 }),
  },
  { rule: 'FRM-1', verdict: 'not-shown', script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }]) },
  { rule: 'FRM-3', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-3',
    verdict: 'violation',
    script: story([
      reset(11),
      wait(60),
      circle,
      { do: 'move', dx: 3, dy: 3, fault: { kind: 'stop', character: 2 } },
    ]),
  },
  { rule: 'FRM-3', verdict: 'not-shown', script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }]) },
  {
    rule: 'FRM-5',
    verdict: 'pass',
    script: story([reset(null), wait(60), circle], { protocol: 'MM' }),
  },
  {
    rule: 'FRM-5',
    verdict: 'violation',
    script: story(
      [reset(null), circle, { do: 'move', dx: 3, dy: 3, fault: { kind: 'parity', character: 1 } }],
      { protocol: 'MM' },
    ),
  },
  { rule: 'FRM-5', verdict: 'not-applicable', script: healthy },
  {
    rule: 'FRM-5',
    verdict: 'not-shown',
    script: story([reset(null), { do: 'draw', figure: 'line', size: 200, packets: 12, angle: 30 }], {
      protocol: 'MM',
    }),
  },
  { rule: 'FRM-6', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-6',
    verdict: 'violation',
    script: story([reset(11), wait(60), circle, wait(20), { do: 'break', ms: 30 }]),
  },
  { rule: 'FRM-6', verdict: 'not-shown', script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }]) },
  { rule: 'PKT-1', verdict: 'pass', script: healthy },
  {
    rule: 'PKT-1',
    verdict: 'violation',
    script: story([reset(11), wait(60), circle, wait(200), { do: 'characters', values: [0x05] }, wait(200)]),
  },
  { rule: 'PKT-1', verdict: 'not-shown', script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }]) },
  { rule: 'PKT-3', verdict: 'pass', script: story([reset(11), wait(60), circle], { protocol: 'M3' }) },
  {
    rule: 'PKT-3',
    verdict: 'violation',
    script: story(
      [
        reset(11),
        wait(60),
        circle,
        { do: 'press', button: 'middle', fault: { kind: 'bits', character: 3, mask: 0x0c } },
        circle,
      ],
      { protocol: 'M3' },
    ),
  },
  { rule: 'PKT-3', verdict: 'not-applicable', script: healthy },
  {
    rule: 'PKT-3',
    verdict: 'not-shown',
    script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }], { protocol: 'M3' }),
  },
  { rule: 'PKT-5', verdict: 'pass', script: healthy },
  {
    rule: 'PKT-5',
    verdict: 'violation',
    script: story([
      reset(11),
      wait(60),
      circle,
      { do: 'move', dx: 3, dy: 3, fault: { kind: 'lost', character: 1 } },
      circle,
    ]),
  },
  { rule: 'PKT-5', verdict: 'not-shown', script: story([reset(11), wait(60), { do: 'move', dx: 5, dy: 5 }]) },
  { rule: 'BTN-2', verdict: 'pass', script: healthy },
  {
    rule: 'BTN-2',
    verdict: 'violation',
    script: story([reset(11), wait(60), circle, { do: 'press', button: 'left' }]),
  },
  { rule: 'BTN-2', verdict: 'not-shown', script: story([reset(11)]) },
];

describe('rules over capture files', () => {
  it.each(CASES)('$rule: $verdict', ({ rule, verdict, script, kind }) => {
    const result = judge(script, kind).get(rule);
    expect({ verdict: result?.verdict, reason: result?.reason }).toEqual({
      verdict,
      reason: expect.any(String) as string,
    });
    expect(result?.reason).not.toBe('');
  });

  it('list every rule with a reason, whatever the capture', () => {
    const rules = [...judge(story([reset(null)])).values()];
    expect(rules.map(({ id }) => id)).toEqual(BASELINE.rules.map(({ id }) => id));
    expect(rules.every(({ reason }) => reason.length > 0)).toBe(true);
  });
});
