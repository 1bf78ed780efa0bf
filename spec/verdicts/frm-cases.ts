import type { VerdictCase } from './judge-script';
import { circle, healthy, move, reset, short, silent, story, wait } from './judge-script';

const moving = [reset(11), wait(60), circle];

export const FRM_CASES: readonly VerdictCase[] = [
  { rule: 'FRM-1', verdict: 'pass', script: healthy },
  { rule: 'FRM-1', verdict: 'violation', script: story(moving, { rateErrorPercent: 3.4 }) },
  { rule: 'FRM-1', verdict: 'inconclusive', script: story(moving, { rateErrorPercent: 2.498 }) },
  { rule: 'FRM-1', verdict: 'not-shown', script: short },
  { rule: 'FRM-2', verdict: 'pass', script: healthy },
  { rule: 'FRM-2', verdict: 'violation', script: story(moving, { rateErrorPercent: 3.4 }) },
  { rule: 'FRM-2', verdict: 'inconclusive', script: healthy, kind: { samplesHz: 20_000 } },
  { rule: 'FRM-2', verdict: 'not-shown', script: silent },
  { rule: 'FRM-3', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-3',
    verdict: 'violation',
    script: story([...moving, move(3, 3, { fault: { kind: 'stop', character: 2 } })]),
  },
  { rule: 'FRM-3', verdict: 'not-shown', script: short },
  { rule: 'FRM-4', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-4',
    verdict: 'violation',
    script: story([...moving, { do: 'glitch', widthUs: 200, afterMs: 20 }]),
  },
  {
    rule: 'FRM-4',
    verdict: 'inconclusive',
    // Half a bit is 417 µs; a pulse of 410 µs spans four or five samples of 100 µs.
    script: story([...moving, { do: 'glitch', widthUs: 410, afterMs: 20 }]),
    kind: { samplesHz: 10_000 },
  },
  // Coarser than an eighth of a bit.
  { rule: 'FRM-4', verdict: 'not-shown', script: healthy, kind: { samplesHz: 8000 } },
  { rule: 'FRM-5', verdict: 'pass', script: story([reset(null), wait(60), circle], { protocol: 'MM' }) },
  {
    rule: 'FRM-5',
    verdict: 'violation',
    script: story([reset(null), circle, move(3, 3, { fault: { kind: 'parity', character: 1 } })], {
      protocol: 'MM',
    }),
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
  { rule: 'FRM-6', verdict: 'violation', script: story([...moving, wait(20), { do: 'break', ms: 30 }]) },
  { rule: 'FRM-6', verdict: 'not-shown', script: short },
  { rule: 'FRM-7', verdict: 'pass', script: healthy },
  { rule: 'FRM-7', verdict: 'violation', script: story([...moving, move(3, 3, { gapMs: 20 })]) },
  // Exactly a character of nine elements at 1200 bit/s. Source: protocol-facts 2.1.
  { rule: 'FRM-7', verdict: 'inconclusive', script: story([...moving, move(3, 3, { gapMs: 7.5 })]) },
  { rule: 'FRM-7', verdict: 'not-shown', script: story([reset(11)]) },
  { rule: 'FRM-8', verdict: 'pass', script: healthy },
  { rule: 'FRM-8', verdict: 'violation', script: story(moving, { jitterPercent: 12 }) },
  { rule: 'FRM-8', verdict: 'inconclusive', script: healthy, kind: { samplesHz: 20_000 } },
  { rule: 'FRM-8', verdict: 'not-shown', script: silent },
  { rule: 'FRM-9', verdict: 'pass', script: healthy },
  { rule: 'FRM-9', verdict: 'violation', script: story(moving, { biasPercent: 6 }) },
  {
    rule: 'FRM-9',
    verdict: 'inconclusive',
    script: story(moving, { biasPercent: 3 }),
    kind: { samplesHz: 10_000 },
  },
  { rule: 'FRM-9', verdict: 'not-shown', script: silent },
  { rule: 'FRM-10', verdict: 'pass', script: healthy },
  {
    rule: 'FRM-10',
    verdict: 'violation',
    script: story(moving, { rateErrorPercent: 3.6, jitterPercent: 4 }),
  },
  // 50 − 6.25 − 8.5 · 3.38 leaves 15.02 %. Source: rules.md 4, FRM-10.
  { rule: 'FRM-10', verdict: 'inconclusive', script: story(moving, { rateErrorPercent: 3.38 }) },
  { rule: 'FRM-10', verdict: 'not-shown', script: silent },
];
