import type { CsvLayout } from '#shared/composer/write-csv';
import type { Script, Step } from '#shared/composer/script';
import type { VcdLayout } from '#shared/composer/write-vcd';

/** A sample: its story, the file it becomes, and a line for the README. */
export interface Sample {
  readonly file: string;
  readonly holds: string;
  readonly script: Script;
  readonly layout: ({ readonly format: 'vcd' } & VcdLayout) | ({ readonly format: 'csv' } & CsvLayout);
}

const wait = (ms: number): Step => ({ do: 'wait', ms });
const draw = (
  figure: 'line' | 'circle' | 'square' | 'spiral' | 'eight',
  size: number,
  packets: number,
  angle = 0,
): Step => ({
  do: 'draw',
  figure,
  size,
  packets,
  angle,
});
const click = (button: 'left' | 'middle' | 'right' | 'fourth', ms = 120): Step[] => [
  { do: 'press', button },
  wait(ms),
  { do: 'release', button },
];
const reset = (latencyMs: number | null, more: Partial<Extract<Step, { do: 'reset' }>> = {}): Step => ({
  do: 'reset',
  widthMs: 104.2,
  latencyMs,
  ...more,
});

const LONG_MOTION: readonly Step[] = [
  draw('square', 900, 120),
  wait(400),
  ...click('left'),
  wait(300),
  draw('circle', 800, 110),
  wait(250),
  draw('spiral', 1100, 180),
  wait(500),
  { do: 'press', button: 'left' },
  draw('eight', 1200, 150),
  { do: 'release', button: 'left' },
  wait(350),
  draw('line', 1500, 70, 35),
  wait(150),
  draw('line', 1500, 70, 215),
  wait(420),
  ...click('right', 200),
  draw('circle', 300, 60),
];

/** Latencies of a device that mostly answers in time; the fourteenth reply is late. */
const LATENCIES = [
  11.2, 11.9, 12.4, 11.4, 12.1, 13.0, 11.7, 12.6, 11.1, 12.2, 11.8, 13.3, 12.0, 15.62, 11.5, 12.3, 11.6, 12.8,
  11.3, 12.5, 11.9, 12.7, 11.4, 12.9,
];

export const SAMPLES: readonly Sample[] = [
  {
    file: 'healthy-m.vcd',
    holds:
      'A two-button device (M) that answers a reset 11.2 ms after RTS goes ON, then moves and clicks. Nothing is wrong with it.',
    script: {
      name: 'healthy M',
      protocol: 'M',
      jitterPercent: 0.6,
      steps: [
        wait(1000),
        reset(11.2),
        wait(120),
        ...LONG_MOTION.slice(0, 8),
        wait(300),
        reset(11.6, { withDtr: true }),
        wait(200),
        draw('circle', 500, 60),
        wait(200),
      ],
    },
    layout: { format: 'vcd', scope: 'bench' },
  },
  {
    file: 'late-warm-reset.vcd',
    holds:
      'A three-button trackball (M3). After power-up it answers in 13.1 ms; after the warm reset it needs 15.62 ms, over the limit of 14 ms.',
    script: {
      name: 'late reply after warm reset',
      seed: 412,
      protocol: 'M3',
      framing: '7N2',
      jitterPercent: 2.4,
      steps: [
        wait(150),
        reset(13.1, { withDtr: true, gapMs: 0.4 }),
        wait(120),
        { do: 'move', dx: 9, dy: -4 },
        wait(60),
        reset(15.62, { gapMs: 0.4 }),
        wait(10),
        { do: 'press', button: 'left' },
        draw('circle', 700, 150),
        { do: 'release', button: 'left' },
        ...LONG_MOTION,
        wait(300),
        reset(13.24, { gapMs: 0.4 }),
        wait(150),
        ...click('middle', 300),
        draw('square', 700, 90),
        wait(150),
      ],
    },
    layout: { format: 'vcd', unitNs: 1000, scope: 'bench.port', names: { data: 'rxd' } },
  },
  {
    file: 'wheel-and-buttons.csv',
    holds:
      'A wheel device (MZ): slow and fast wheel, the fourth button, three buttons held at once. Changes only, times in milliseconds.',
    script: {
      name: 'wheel and buttons',
      protocol: 'MZ',
      steps: [
        wait(200),
        reset(12.3),
        wait(100),
        ...[1, 1, -1, 2, -3, 7].flatMap((wheel): Step[] => [{ do: 'move', dx: 0, dy: 0, wheel }, wait(70)]),
        draw('circle', 400, 40),
        { do: 'press', button: 'left' },
        { do: 'press', button: 'middle' },
        { do: 'press', button: 'right' },
        draw('line', 600, 30, 20),
        { do: 'release', button: 'left' },
        { do: 'release', button: 'middle' },
        { do: 'release', button: 'right' },
        wait(80),
        ...click('fourth'),
        wait(150),
      ],
    },
    layout: { format: 'csv', rows: 'changes', time: 'ms', separator: ';', decimalComma: true },
  },
  {
    file: 'identification-string.vcd',
    holds: 'An M device with a complete six-bit PnP string whose checksum is wrong.',
    script: {
      name: 'wrong checksum',
      protocol: 'M',
      steps: [
        wait(250),
        reset(8.2, {
          pnp: {
            eisaId: 'ZZZ',
            productId: '0A01',
            serialNumber: '00000412',
            className: 'MOUSE',
            driverId: 'PNP0F0C',
            userName: 'PANEL POINTER',
            checksum: '5B',
          },
        }),
        wait(200),
        draw('eight', 500, 60),
        wait(200),
      ],
    },
    layout: { format: 'vcd', unitNs: 10000 },
  },
  {
    file: 'lost-character.vcd',
    holds: 'An M device that drops the second character of one packet and recovers with the next header.',
    script: {
      name: 'lost character',
      protocol: 'M',
      steps: [
        wait(150),
        reset(11.1),
        wait(90),
        draw('line', 900, 40, 10),
        { do: 'move', dx: 13, dy: 4, fault: { kind: 'lost', character: 1 } },
        draw('line', 900, 40, 190),
        wait(200),
      ],
    },
    layout: { format: 'vcd' },
  },
  {
    file: 'many-resets.vcd',
    holds: 'Twenty-four resets of one M3 device; one reply is late. Enough for the latency of a population.',
    script: {
      name: 'many resets',
      protocol: 'M3',
      steps: [
        wait(400),
        ...LATENCIES.flatMap((latency): Step[] => [
          reset(latency, { gapMs: 1 }),
          wait(320),
          { do: 'move', dx: 3, dy: 2 },
          wait(150),
        ]),
      ],
    },
    layout: { format: 'vcd', names: { data: 'from_device' } },
  },
  {
    file: 'fast-clock.csv',
    holds: 'An M device whose clock is 2.9 % fast, with 4 % jitter. Changes only, times in microseconds.',
    script: {
      name: 'fast clock',
      protocol: 'M',
      rateErrorPercent: 2.9,
      jitterPercent: 4,
      steps: [
        wait(150),
        reset(10.4),
        wait(120),
        draw('spiral', 900, 140),
        wait(200),
        draw('square', 600, 60),
        wait(150),
      ],
    },
    layout: { format: 'csv', rows: 'changes', time: 'us' },
  },
  {
    file: 'silent.vcd',
    holds: 'Three resets and a device that never answers. A result, not an error.',
    script: {
      name: 'silent device',
      protocol: 'M',
      steps: [
        wait(300),
        reset(null),
        wait(200),
        reset(null),
        wait(200),
        reset(null, { withDtr: true }),
        wait(200),
      ],
    },
    layout: { format: 'vcd' },
  },
  {
    file: 'five-byte.csv',
    holds: 'A five-byte device at the logic side of the driver, with data that looks like headers.',
    script: {
      name: 'five-byte at the logic side',
      protocol: 'five-byte',
      polarity: 'logic',
      steps: [
        wait(120),
        reset(null),
        wait(60),
        { do: 'move', dx: -250, dy: 246 },
        { do: 'move', dx: -254, dy: 254 },
        draw('circle', 3000, 70),
        ...click('middle'),
        draw('eight', 2500, 60),
        wait(150),
      ],
    },
    layout: { format: 'csv', rows: 'changes', time: 's', names: { data: 'RXD', rts: 'RTS_N', dtr: 'DTR_N' } },
  },
  {
    file: 'volts.csv',
    holds: 'Voltages of data and RTS at 20 kS/s: a short handshake and four packets of an M device.',
    script: {
      name: 'volts on the line',
      protocol: 'M',
      lines: ['data', 'rts'],
      steps: [wait(40), reset(12.4, { widthMs: 60 }), wait(30), draw('line', 200, 6, 45), wait(30)],
    },
    layout: {
      format: 'csv',
      rows: 'volts',
      sampleRateHz: 20_000,
      names: { data: 'CH1 (V)', rts: 'CH2 (V)' },
      volts: { high: 9.4, low: -9.6, noise: 0.15 },
    },
  },
];
