import type { Script, Step } from '#shared/composer/script';
import type { VerdictCase } from './judge-script';
import {
  BEGINS_ON,
  circle,
  healthy,
  move,
  reset,
  short,
  silent,
  story,
  wait,
  withoutReset,
} from './judge-script';

const PNP = { eisaId: 'ZZZ', productId: '0A01', className: 'MOUSE', driverId: 'PNP0F0C' };
const fiveByte = story([reset(null), wait(60), circle], { protocol: 'five-byte' });

/** Resets with these latencies, 30 ms apart. */
function resets(latencies: readonly number[]): Script {
  return story(latencies.flatMap((latency): Step[] => [reset(latency), wait(30)]));
}

/** Latencies spread evenly around a mean, ms. */
function spread(count: number, mean: number, width: number): number[] {
  return Array.from({ length: count }, (_, i) => mean + width * (i / (count - 1) - 0.5));
}

/** A line that follows RTS by 60 µs: less than a sample at 10 kS/s. */
function raisedAfterRts(line: 'dtr' | 'txd'): Step[] {
  return [
    { do: 'set', line: 'rts', on: false },
    { do: 'set', line, on: false },
    wait(150),
    { do: 'set', line: 'rts', on: true },
    wait(0.06),
    { do: 'set', line, on: true },
    wait(11),
    { do: 'characters', values: [0x4d] },
    wait(60),
    circle,
  ];
}

const WITH_TXD = { lines: ['data', 'rts', 'dtr', 'txd'] } as const;
const WITH_DSR = { lines: ['data', 'rts', 'dtr', 'dsr'] } as const;

export const HSK_CASES: readonly VerdictCase[] = [
  { rule: 'HSK-1', verdict: 'pass', script: healthy },
  { rule: 'HSK-1', verdict: 'violation', script: story([reset(19), wait(60), circle]) },
  {
    rule: 'HSK-1',
    verdict: 'inconclusive',
    script: story([reset(13.9), wait(60), circle]),
    kind: { samplesHz: 4000 },
  },
  // A device at exactly 14 ms is inconclusive. Source: rules.md 2.
  { rule: 'HSK-1', verdict: 'inconclusive', script: story([reset(14), wait(60), circle]) },
  { rule: 'HSK-1', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  { rule: 'HSK-1', verdict: 'not-applicable', script: fiveByte },
  { rule: 'HSK-2', verdict: 'pass', script: healthy },
  { rule: 'HSK-2', verdict: 'violation', script: story([reset(11, { strays: [0x33] }), wait(60), circle]) },
  { rule: 'HSK-2', verdict: 'not-applicable', script: fiveByte },
  { rule: 'HSK-2', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  { rule: 'HSK-3', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-3',
    verdict: 'violation',
    script: story([reset(11), wait(60), circle, { do: 'set', line: 'rts', on: false }, move(4, 4)]),
  },
  { rule: 'HSK-3', verdict: 'not-shown', script: withoutReset },
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
  {
    rule: 'HSK-4',
    verdict: 'inconclusive',
    // RTS goes OFF again before the window is over.
    script: story([{ do: 'set', line: 'rts', on: true }, wait(100), reset(11), wait(60), circle]),
  },
  { rule: 'HSK-4', verdict: 'not-shown', script: withoutReset },
  { rule: 'HSK-4', verdict: 'not-applicable', script: fiveByte },
  { rule: 'HSK-5', verdict: 'pass', script: healthy },
  { rule: 'HSK-5', verdict: 'violation', script: story([reset(11, { strays: [0x00] }), wait(60), circle]) },
  { rule: 'HSK-5', verdict: 'not-shown', script: story([reset(null), wait(60), circle]) },
  {
    rule: 'HSK-6',
    verdict: 'pass',
    script: story([reset(11, { gapMs: 63 }), wait(60), circle], { protocol: 'M3' }),
  },
  {
    rule: 'HSK-6',
    verdict: 'violation',
    script: story([reset(11, { pnp: PNP, pnpGapMs: 120 }), wait(60), circle]),
  },
  {
    rule: 'HSK-6',
    verdict: 'inconclusive',
    script: story([reset(11, { pnp: PNP, pnpGapMs: 100 }), wait(60), circle]),
  },
  { rule: 'HSK-6', verdict: 'not-shown', script: healthy },
  { rule: 'HSK-7', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-7',
    verdict: 'violation',
    script: story([reset(11, { widthMs: 20 }), wait(60), circle], BEGINS_ON),
  },
  {
    rule: 'HSK-7',
    verdict: 'inconclusive',
    script: story([reset(11, { widthMs: 50 }), wait(60), circle], BEGINS_ON),
    kind: { samplesHz: 5000 },
  },
  { rule: 'HSK-7', verdict: 'not-shown', script: withoutReset },
  { rule: 'HSK-8', verdict: 'pass', script: story([reset(11, { withDtr: true }), wait(60), circle]) },
  { rule: 'HSK-8', verdict: 'violation', script: story([reset(30, { withDtr: true }), wait(60), circle]) },
  {
    rule: 'HSK-8',
    verdict: 'inconclusive',
    script: story([reset(13.9, { withDtr: true }), wait(60), circle]),
    kind: { samplesHz: 4000 },
  },
  { rule: 'HSK-8', verdict: 'not-shown', script: healthy },
  { rule: 'HSK-9', verdict: 'pass', script: healthy },
  {
    rule: 'HSK-9',
    verdict: 'violation',
    script: story([{ do: 'glitch', line: 'dtr', widthUs: 2000, afterMs: 115 }, reset(11), wait(60), circle]),
  },
  {
    rule: 'HSK-9',
    verdict: 'inconclusive',
    script: story(raisedAfterRts('dtr')),
    kind: { samplesHz: 10_000 },
  },
  {
    rule: 'HSK-9',
    verdict: 'not-shown',
    script: story([reset(11), wait(60), circle], { lines: ['data', 'rts'] }),
  },
  { rule: 'HSK-10', verdict: 'pass', script: resets(spread(30, 11, 1)) },
  { rule: 'HSK-10', verdict: 'violation', script: resets(spread(30, 13, 2)) },
  // Every latency the same: the spread is not wider than the resolution.
  { rule: 'HSK-10', verdict: 'inconclusive', script: resets(spread(30, 12, 0)) },
  { rule: 'HSK-10', verdict: 'not-shown', script: resets(spread(24, 12, 1)) },
  { rule: 'HSK-11', verdict: 'pass', script: healthy },
  { rule: 'HSK-11', verdict: 'violation', script: story([reset(95), wait(60), circle]) },
  // 92.5 ms and a character of 7.5 ms: exactly 100 ms. Source: rules.md 2, HSK-1, Host limits.
  { rule: 'HSK-11', verdict: 'inconclusive', script: story([reset(92.5), wait(60), circle]) },
  { rule: 'HSK-11', verdict: 'not-shown', script: silent },
  {
    rule: 'HSK-12',
    verdict: 'pass',
    script: story([reset(11, { widthMs: 50 }), wait(60), reset(11), wait(60), circle], BEGINS_ON),
  },
  {
    rule: 'HSK-12',
    verdict: 'violation',
    script: story([reset(null, { widthMs: 50 }), wait(60), reset(11), wait(60), circle], BEGINS_ON),
  },
  {
    rule: 'HSK-12',
    verdict: 'inconclusive',
    script: story([reset(11, { widthMs: 55 }), wait(60), reset(11), wait(60), circle], BEGINS_ON),
  },
  // Two widths, but none short enough to say that the device needs more.
  {
    rule: 'HSK-12',
    verdict: 'not-shown',
    script: story([reset(11, { widthMs: 200 }), wait(60), reset(11), wait(60), circle], BEGINS_ON),
  },
  { rule: 'HSK-13', verdict: 'pass', script: story([reset(11), wait(60), circle], WITH_TXD) },
  {
    rule: 'HSK-13',
    verdict: 'violation',
    script: story(
      [{ do: 'glitch', line: 'txd', widthUs: 2000, afterMs: 115 }, reset(11), wait(60), circle],
      WITH_TXD,
    ),
  },
  {
    rule: 'HSK-13',
    verdict: 'inconclusive',
    script: story(raisedAfterRts('txd'), WITH_TXD),
    kind: { samplesHz: 10_000 },
  },
  { rule: 'HSK-13', verdict: 'not-shown', script: healthy },
  {
    rule: 'HSK-14',
    verdict: 'pass',
    script: story([reset(11, { withDtr: true }), wait(60), circle], WITH_DSR),
  },
  {
    rule: 'HSK-14',
    verdict: 'violation',
    script: story([reset(11, { withDtr: true }), wait(60), circle], { ...WITH_DSR, dsrFollows: false }),
  },
  {
    rule: 'HSK-14',
    verdict: 'inconclusive',
    script: story(
      [
        reset(11),
        wait(60),
        circle,
        { do: 'set', line: 'dtr', on: false },
        wait(10),
        { do: 'set', line: 'dsr', on: false },
        wait(60),
      ],
      { ...WITH_DSR, dsrFollows: false },
    ),
  },
  { rule: 'HSK-14', verdict: 'not-shown', script: healthy },
  { rule: 'HSK-5', verdict: 'not-applicable', script: fiveByte },
  { rule: 'HSK-2', verdict: 'pass', script: short },
];
