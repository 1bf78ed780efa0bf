import type { VoltsLayout } from '#shared/composer/line-voltage';
import type { Script, Step } from '#shared/composer/script';
import type { VerdictCase } from './judge-script';
import { healthy, reset, wait } from './judge-script';

type Volts = Partial<VoltsLayout>;
type Probed = 'receiver' | 'driver' | 'open-circuit';

const handshake = (extra: readonly Step[] = []): Script => ({
  name: 'volts',
  protocol: 'M',
  lines: ['data', 'rts'],
  steps: [
    wait(20),
    ...extra,
    reset(12, { widthMs: 60 }),
    wait(10),
    { do: 'draw', figure: 'line', size: 200, packets: 6, angle: 45 },
    wait(30),
  ],
});

/** A handshake and six packets in volts. */
function levels(
  volts: Volts,
  probedEnd?: Probed,
  samplesHz = 100_000,
): Omit<VerdictCase, 'rule' | 'verdict'> {
  return {
    script: handshake(),
    kind: { samplesHz, volts: { high: 9, low: -9, noise: 0.1, ...volts } },
    map: { probedEnd },
  };
}

/** One character at 9600 bit/s, fast enough to see an edge of a few hundred nanoseconds. */
function fastEdge(edgeUs: number): Omit<VerdictCase, 'rule' | 'verdict'> {
  return {
    script: {
      name: 'edge',
      protocol: 'M',
      bitRate: 9600,
      lines: ['data'],
      steps: [wait(0.3), { do: 'characters', values: [0x55] }, wait(0.3)],
    },
    kind: { samplesHz: 50_000_000, volts: { high: 9, low: -9, noise: 0.02, edgeUs } },
    options: {
      polarity: 'line',
      bitRate: 9600,
      framing: { dataBits: 7, parity: 'none', stopBits: 1 },
      protocol: 'M',
    },
  };
}

/** A rail beside the lines; the brown-out voltage and the maximum come from the rulebook of the device. */
function rail(volts: number, extra: readonly Step[] = []): Omit<VerdictCase, 'rule' | 'verdict'> {
  return {
    script: { ...handshake(extra), lines: ['data', 'rts', 'dtr', 'supply'] },
    kind: {
      samplesHz: 50_000,
      volts: { high: 9, low: -9, noise: 0.02, roles: { supply: { high: volts, low: volts } } },
    },
    limits: { 'PWR-2': 4.6, 'PWR-4': 7 },
  };
}

const sag = (line: 'rts' | 'supply', volts: number, afterMs: number): Step => ({
  do: 'sag',
  line,
  volts,
  ms: 8,
  afterMs,
});
/** RTS sags 3 ms after it went ON. */
function sagging(volts: number): Omit<VerdictCase, 'rule' | 'verdict'> {
  return { ...levels({}), script: handshake([sag('rts', volts, 63)]) };
}

export const VOLTS_CASES: readonly VerdictCase[] = [
  { rule: 'LVL-1', verdict: 'pass', ...levels({}, 'receiver') },
  { rule: 'LVL-1', verdict: 'pass', ...levels({}) },
  { rule: 'LVL-1', verdict: 'violation', ...levels({ low: 0 }, 'receiver') },
  // Enough at a receiver, too little at a driver. Source: protocol-facts 1.1.
  { rule: 'LVL-1', verdict: 'pass', ...levels({ low: -4 }, 'receiver') },
  { rule: 'LVL-1', verdict: 'violation', ...levels({ low: -4 }, 'driver') },
  { rule: 'LVL-1', verdict: 'inconclusive', ...levels({ low: -4 }) },
  { rule: 'LVL-1', verdict: 'inconclusive', ...levels({ low: -3 }, 'receiver') },
  { rule: 'LVL-1', verdict: 'violation', ...levels({ low: -17 }, 'receiver') },
  { rule: 'LVL-1', verdict: 'not-shown', ...levels({}, 'open-circuit') },
  { rule: 'LVL-1', verdict: 'not-shown', script: healthy },
  // Two samples in the middle half of an element are too few.
  { rule: 'LVL-1', verdict: 'not-shown', ...levels({}, 'receiver', 4500) },
  { rule: 'LVL-2', verdict: 'pass', ...levels({}, 'driver') },
  { rule: 'LVL-2', verdict: 'violation', ...levels({ high: 2.5 }, 'receiver') },
  { rule: 'LVL-2', verdict: 'inconclusive', ...levels({ high: 3 }, 'receiver') },
  { rule: 'LVL-2', verdict: 'not-shown', script: healthy },
  { rule: 'LVL-3', verdict: 'pass', ...levels({ high: 12, low: -12 }, 'open-circuit') },
  { rule: 'LVL-3', verdict: 'violation', ...levels({ high: 12, low: -27 }, 'open-circuit') },
  { rule: 'LVL-3', verdict: 'inconclusive', ...levels({ high: 25, low: -12 }, 'open-circuit') },
  { rule: 'LVL-3', verdict: 'not-shown', ...levels({}, 'receiver') },
  { rule: 'LVL-4', verdict: 'pass', ...levels({ edgeUs: 60 }, 'receiver', 400_000) },
  // 18 V in 0.3 µs are 60 V/µs, in 0.6 µs the limit itself. Source: 30 V/µs, protocol-facts 1.1.
  { rule: 'LVL-4', verdict: 'violation', ...fastEdge(0.3) },
  { rule: 'LVL-4', verdict: 'inconclusive', ...fastEdge(0.6) },
  { rule: 'LVL-4', verdict: 'not-shown', ...levels({}, 'receiver') },
  // 6 of 18 V: a third of the edge lies within ±3 V; the limit is 25 µs at 1200 bit/s. Source: protocol-facts 1.1.
  { rule: 'LVL-5', verdict: 'pass', ...levels({ edgeUs: 60 }, 'receiver', 400_000) },
  { rule: 'LVL-5', verdict: 'violation', ...levels({ edgeUs: 90 }, 'receiver', 400_000) },
  { rule: 'LVL-5', verdict: 'inconclusive', ...levels({ edgeUs: 75 }, 'receiver', 400_000) },
  { rule: 'LVL-5', verdict: 'not-shown', ...levels({ edgeUs: 60 }, 'receiver') },
  // A line that never leaves the region has no transition time; its level is wrong.
  { rule: 'LVL-5', verdict: 'not-shown', ...levels({ low: 0, edgeUs: 60 }, 'receiver', 400_000) },
  { rule: 'LVL-6', verdict: 'pass', ...levels({ edgeUs: 60 }, 'receiver', 400_000) },
  { rule: 'LVL-6', verdict: 'violation', ...levels({ edgeUs: 60, turnBackV: 2 }, 'receiver', 400_000) },
  { rule: 'LVL-6', verdict: 'inconclusive', ...levels({ edgeUs: 80, turnBackV: 0.5 }, 'receiver', 400_000) },
  { rule: 'LVL-6', verdict: 'not-shown', ...levels({}, 'receiver') },
  { rule: 'LVL-7', verdict: 'pass', ...levels({}) },
  { rule: 'LVL-7', verdict: 'violation', ...sagging(5) },
  { rule: 'LVL-7', verdict: 'inconclusive', ...sagging(4) },
  { rule: 'LVL-7', verdict: 'not-shown', script: healthy },
  { rule: 'PWR-1', verdict: 'not-shown', script: healthy },
  { rule: 'PWR-2', verdict: 'pass', ...rail(6.4) },
  // Down during the reset pulse, when only DTR feeds the device. Source: protocol-facts 7.
  { rule: 'PWR-2', verdict: 'violation', ...rail(6.4, [sag('supply', 3, 20)]) },
  { rule: 'PWR-2', verdict: 'inconclusive', ...rail(6.4, [sag('supply', 1.8, 20)]) },
  { rule: 'PWR-2', verdict: 'not-shown', ...rail(6.4), limits: {} },
  { rule: 'PWR-2', verdict: 'not-shown', script: healthy, limits: { 'PWR-2': 4.6 } },
  // While both lines are OFF the rail is down by design.
  {
    rule: 'PWR-2',
    verdict: 'pass',
    ...rail(6.4),
    script: {
      ...handshake(),
      lines: ['data', 'rts', 'dtr', 'supply'],
      steps: [
        wait(20),
        sag('supply', 6, 10),
        reset(12, { widthMs: 60, withDtr: true }),
        wait(10),
        { do: 'draw', figure: 'line', size: 200, packets: 6, angle: 45 },
        wait(30),
      ],
    },
  },
  { rule: 'PWR-3', verdict: 'not-shown', script: healthy },
  { rule: 'PWR-4', verdict: 'pass', ...rail(6.4) },
  { rule: 'PWR-4', verdict: 'violation', ...rail(8) },
  { rule: 'PWR-4', verdict: 'inconclusive', ...rail(7) },
  { rule: 'PWR-4', verdict: 'not-shown', ...rail(6.4), limits: {} },
];
