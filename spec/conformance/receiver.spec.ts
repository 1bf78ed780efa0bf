import { describe, expect, it } from 'vitest';
import { elementsPerCharacter, bitsAfterStart } from '#shared/characters/framing';
import { compose } from '#shared/composer/compose';
import { writeVcd } from '#shared/composer/write-vcd';
import { CaptureReader } from '#shared/capture/read-capture';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import { occurrenceUpperBound, successRun } from '#shared/statistics/success-run';
import { wilsonInterval } from '#shared/statistics/wilson';

const FORMATS = {
  '7N1': { dataBits: 7, parity: 'none', stopBits: 1 },
  '8N1': { dataBits: 8, parity: 'none', stopBits: 1 },
  '8O1': { dataBits: 8, parity: 'odd', stopBits: 1 },
} as const;

describe('start-stop characters', () => {
  // Source: arithmetic of start, data, parity and stop elements at 1200 bit/s (protocol-facts 2.1).
  it.each([
    ['7N1', 7.5],
    ['8N1', 8.333],
    ['8O1', 9.167],
  ] as const)('%s takes %d ms at 1200 bit/s', (name, ms) => {
    expect((elementsPerCharacter(FORMATS[name]) / 1200) * 1000).toBeCloseTo(ms, 3);
  });

  // Source: budget |ε|·p + q < 50 % at the stop sample (protocol-facts 2.3); p = 8.5, 9.5, 10.5.
  it.each([
    ['7N1', 5.88, 5.15],
    ['8N1', 5.26, 4.61],
    ['8O1', 4.76, 4.17],
  ] as const)('%s fails beyond the rate error a receiver can bear', (name, ideal, sixteenTimes) => {
    const position = bitsAfterStart(FORMATS[name]) + 1.5;
    expect(50 / position).toBeCloseTo(ideal, 2);
    expect((50 - 6.25) / position).toBeCloseTo(sixteenTimes, 2);
  });

  // Source: USART tolerance equations of a microcontroller maker's table: R_slow, R_fast with S = 16, S_F = 8, S_M = 9.
  it.each([
    [7, -5.19, 5.11],
    [8, -4.64, 4.58],
    [9, -4.19, 4.14],
  ])('three samples of sixteen, %d bits', (bits, slow, fast) => {
    const rSlow = ((bits + 1) * 16) / (16 - 1 + bits * 16 + 8);
    const rFast = ((bits + 2) * 16) / ((bits + 1) * 16 + 9);
    expect((rSlow - 1) * 100).toBeCloseTo(slow, 1);
    expect((rFast - 1) * 100).toBeCloseTo(fast, 1);
  });
});

describe('margin and distortion of a composed line', () => {
  // Source: link between rate error and gross distortion, δ_gross ≈ −ε·n (protocol-facts 2.2): 8 % at the stop edge for 1 %.
  it('a clock 1 % fast shows 8 % of gross distortion at the stop edge and none at its own rate', () => {
    const composed = compose({
      name: 'one percent',
      protocol: 'M',
      rateErrorPercent: 1,
      steps: [
        { do: 'wait', ms: 100 },
        { do: 'reset', widthMs: 110, latencyMs: 10 },
        { do: 'draw', figure: 'circle', size: 900, packets: 60 },
        { do: 'wait', ms: 50 },
      ],
    });
    const reader = new CaptureReader();
    for (const piece of writeVcd(composed, { unitNs: 100 })) reader.push(new TextEncoder().encode(piece));
    const rules = new Map(check(decode(reader.finish()), BASELINE).rules.map((rule) => [rule.id, rule]));
    expect(rules.get('FRM-2')?.measured).toBeCloseTo(7.92, 1);
    expect(rules.get('FRM-8')?.measured).toBeLessThan(0.1);
    expect(rules.get('FRM-1')?.measured).toBeCloseTo(1, 2);
    expect(rules.get('FRM-10')?.measured).toBeCloseTo(50 - 6.25 - 8.5, 0);
  });
});

describe('statistics of the rules', () => {
  // Source: rules.md section 1; Wilson 1927, from memory.
  it('twenty of twenty: lower bound 0.839', () => {
    expect(wilsonInterval(20, 20).lower).toBeCloseTo(0.839, 3);
  });

  it('the samples that show 95 % and 99 %', () => {
    expect(wilsonInterval(73, 73).lower).toBeGreaterThanOrEqual(0.95);
    expect(wilsonInterval(72, 72).lower).toBeLessThan(0.95);
    expect(wilsonInterval(381, 381).lower).toBeGreaterThanOrEqual(0.99);
    expect(successRun(0.95, 0.95)).toBe(59);
    expect(successRun(0.99, 0.95)).toBe(299);
  });

  it('none of a hundred leaves room for three in a hundred', () => {
    expect(occurrenceUpperBound(100, 0.95)).toBeCloseTo(0.02951, 4);
  });
});
