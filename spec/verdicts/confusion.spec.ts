import { describe, expect, it } from 'vitest';
import type { VoltsLayout } from '#shared/composer/line-voltage';
import type { Script, Step } from '#shared/composer/script';
import type { Recorded } from './judge-script';
import { checkRecorded, circle, move, reset, story, wait } from './judge-script';

/*
 * Every fault the composer can plant × every rule: a fault breaks its rule, and no blocking rule it has nothing to do with. What
 * it breaks besides, by its nature, is listed with it.
 */

interface Planted extends Recorded {
  readonly fault: string;
  /** The rules it must break. */
  readonly rules: readonly string[];
  /** Blocking rules it breaks too, with the reason. */
  readonly also?: Readonly<Record<string, string>>;
}

const PNP = { eisaId: 'ZZZ', productId: '0A01', className: 'MOUSE', driverId: 'PNP0F0C' };
const LINES = ['data', 'rts', 'dtr', 'txd', 'dsr', 'contact'] as const;

/** A healthy life: power-up, a reset, motion, a click seen at its contact, a rest. */
function life(planted: readonly Step[], head: Partial<Script> = {}, first: Step[] = powerUp()): Recorded {
  return {
    script: story(
      [
        ...first,
        wait(60),
        circle,
        wait(120),
        ...planted,
        wait(150),
        circle,
        wait(100),
        { do: 'press', button: 'left', contactMs: 12 },
        wait(120),
        { do: 'release', button: 'left', contactMs: 12 },
        wait(700),
      ],
      { lines: LINES, ...head },
    ),
  };
}

function powerUp(more: Partial<Extract<Step, { do: 'reset' }>> = {}): Step[] {
  return [reset(11.2, { withDtr: true, ...more })];
}

const withString = (deviation: object, more: Partial<Extract<Step, { do: 'reset' }>> = {}): Recorded =>
  life([], {}, powerUp({ pnp: { ...PNP, ...deviation }, ...more }));

interface VoltsFile {
  readonly samplesHz: number;
  readonly volts: VoltsLayout;
}
const VOLTS: VoltsFile = {
  samplesHz: 200_000,
  volts: { high: 9, low: -9, noise: 0.1, edgeUs: 60, roles: { supply: { high: 6.4, low: 6.4 } } },
};
function volts(change: Partial<VoltsLayout>, steps: readonly Step[] = []): Recorded {
  return {
    script: {
      name: 'volts',
      protocol: 'M',
      lines: ['data', 'rts', 'dtr', 'supply'],
      steps: [
        wait(20),
        ...steps,
        reset(12, { widthMs: 60 }),
        wait(10),
        { do: 'draw', figure: 'line', size: 200, packets: 6, angle: 45 },
        wait(30),
      ],
    },
    kind: { ...VOLTS, volts: { ...VOLTS.volts, ...change } },
    map: { probedEnd: 'receiver' },
    limits: { 'PWR-2': 4.6, 'PWR-4': 7 },
  };
}

const M3 = { protocol: 'M3' } as const;
const ENDLESS = 'without its End the string is read on into the packets';
const CUT = 'the damaged character cuts its packet';

const FAULTS: readonly Planted[] = [
  { fault: 'late reply', rules: ['HSK-1'], ...life([reset(19)]) },
  {
    fault: 'late reply after power-up',
    rules: ['HSK-8'],
    also: { 'HSK-1': 'HSK-8 is HSK-1 after power-up' },
    ...life([], {}, powerUp({ latencyMs: 19 })),
  },
  { fault: 'no reply', rules: ['HSK-4'], ...life([reset(null), wait(60)]) },
  { fault: 'wrong identity', rules: ['HSK-2'], ...life([reset(11, { identity: 'B' })]) },
  {
    fault: 'stray character before the identity',
    rules: ['HSK-5'],
    also: { 'HSK-2': 'it is the first character of the reply', 'PKT-1': 'it belongs to no packet' },
    ...life([reset(11, { strays: [0x15] })]),
  },
  {
    fault: 'long pause in the identity',
    rules: ['HSK-6', 'HSK-11'],
    ...withString({}, { pnpGapMs: 120 }),
    also: { 'IDN-6': 'the pauses make the string too long' },
  },
  { fault: 'short reset pulse', rules: ['HSK-7'], ...life([reset(11, { widthMs: 20 })]) },
  {
    fault: 'characters while RTS is OFF',
    rules: ['HSK-3'],
    ...life([
      { do: 'set', line: 'rts', on: false },
      wait(20),
      move(4, 4),
      wait(20),
      { do: 'set', line: 'rts', on: true },
      wait(11.2),
      { do: 'characters', values: [0x4d] },
      wait(100),
    ]),
  },
  {
    fault: 'DTR drops',
    rules: ['HSK-9'],
    ...life([{ do: 'glitch', line: 'dtr', widthUs: 15_000, afterMs: 112 }, reset(11)]),
  },
  {
    fault: 'TXD leaves mark',
    rules: ['HSK-13'],
    ...life([{ do: 'glitch', line: 'txd', widthUs: 2000, afterMs: 115 }, reset(11)]),
  },
  { fault: 'DSR does not follow', rules: ['HSK-14'], ...life([], { dsrFollows: false }) },
  {
    fault: 'wrong End PnP',
    rules: ['IDN-1'],
    also: { 'IDN-5': ENDLESS, 'IDN-6': ENDLESS, 'IDN-8': ENDLESS },
    ...withString({ end: 0x29 }),
  },
  { fault: 'wrong checksum', rules: ['IDN-2'], ...withString({ checksum: '00' }) },
  { fault: 'maker of two letters and a digit', rules: ['IDN-3'], ...withString({ eisaId: 'Z1Z' }) },
  { fault: 'other revision', rules: ['IDN-4'], ...withString({ revision: 99 }) },
  {
    fault: 'no revision',
    rules: ['IDN-4'],
    also: { 'IDN-8': 'its character has bit 6 set' },
    ...withString({ revisionBytes: [0x41, 0x24] }),
  },
  { fault: 'short serial number', rules: ['IDN-5'], ...withString({ serialNumber: '0042' }) },
  { fault: 'pauses in the string', rules: ['IDN-6'], ...withString({}, { pnpGapMs: 210 }) },
  { fault: 'compatible id of another protocol', rules: ['IDN-7'], ...withString({ driverId: 'PNP0F04' }) },
  { fault: 'lower case in the 6-bit form', rules: ['IDN-8'], ...withString({ userName: 'demo' }) },
  {
    fault: 'fast clock',
    rules: ['FRM-1'],
    also: { 'FRM-2': 'a rate error of 3.4 % is 27 % at the stop element' },
    ...life([], { rateErrorPercent: 3.4 }),
  },
  {
    fault: 'slow clock',
    rules: ['FRM-1'],
    also: { 'FRM-2': 'a rate error of 3.4 % is 27 % at the stop element' },
    ...life([], { rateErrorPercent: -3.4 }),
  },
  { fault: 'jitter', rules: ['FRM-8'], ...life([], { jitterPercent: 12 }) },
  { fault: 'bias', rules: ['FRM-9'], ...life([], { biasPercent: 8 }) },
  {
    fault: 'jitter and fast clock',
    rules: ['FRM-10'],
    also: { 'FRM-1': 'the clock', 'FRM-2': 'the clock' },
    ...life([], { jitterPercent: 4, rateErrorPercent: 3.4 }),
  },
  {
    fault: 'stop element at space',
    rules: ['FRM-3'],
    also: { 'PKT-5': CUT },
    ...life([move(3, 3, { fault: { kind: 'stop', character: 2 } })]),
  },
  { fault: 'glitch', rules: ['FRM-4'], ...life([{ do: 'glitch', widthUs: 200, afterMs: 20 }, wait(60)]) },
  {
    fault: 'wrong parity',
    rules: ['FRM-5'],
    also: { 'PKT-5': CUT, 'PKT-1': 'what follows the damaged character belongs to no packet' },
    ...life([move(3, 3, { fault: { kind: 'parity', character: 1 } })], { protocol: 'MM' }, [reset(null)]),
  },
  { fault: 'break', rules: ['FRM-6'], ...life([{ do: 'break', ms: 30 }]) },
  { fault: 'pauses in a packet', rules: ['FRM-7'], ...life([move(3, 3, { gapMs: 20 })]) },
  {
    fault: 'lost header',
    rules: ['PKT-1'],
    ...life([move(3, 3, { fault: { kind: 'lost', character: 0 } })]),
  },
  {
    fault: 'lost character',
    rules: ['PKT-5'],
    ...life([move(3, 3, { fault: { kind: 'lost', character: 1 } })]),
  },
  {
    fault: 'undefined fourth character',
    rules: ['PKT-2', 'PKT-3'],
    ...life(
      [
        { do: 'press', button: 'middle', fault: { kind: 'bits', character: 3, mask: 0x0c } },
        wait(100),
        { do: 'release', button: 'middle' },
      ],
      M3,
    ),
  },
  { fault: 'idle packet', rules: ['PKT-4'], ...life([{ do: 'idle-packet' }], M3) },
  {
    fault: 'other packets without a word',
    rules: ['PKT-6'],
    also: { 'PKT-1': 'the fourth characters belong to no packet of M' },
    ...life([{ do: 'protocol', protocol: 'MZ' }]),
  },
  { fault: 'wheel too fast', rules: ['PKT-7'], ...life([move(0, 0, { wheel: 7 })], { protocol: 'MZ' }) },
  {
    fault: 'bounce',
    rules: ['BTN-1'],
    ...life([
      { do: 'press', button: 'right' },
      { do: 'release', button: 'right' },
    ]),
  },
  { fault: 'button held at the end', rules: ['BTN-2'], ...life([{ do: 'press', button: 'right' }]) },
  {
    fault: 'implicit release',
    rules: ['BTN-3'],
    ...life([{ do: 'press', button: 'middle' }, wait(100), { do: 'release', button: 'middle' }, circle], {
      ...M3,
      release: 'implicit',
    }),
  },
  {
    fault: 'late report of a contact',
    rules: ['BTN-4'],
    ...life([
      { do: 'press', button: 'left', contactMs: 90 },
      wait(100),
      { do: 'release', button: 'left', contactMs: 90 },
    ]),
  },
  {
    fault: 'contact not reported',
    rules: ['BTN-5'],
    ...life([
      { do: 'set', line: 'contact', on: true },
      wait(100),
      { do: 'set', line: 'contact', on: false },
      wait(600),
    ]),
  },
  { fault: 'saturation', rules: ['MOV-1'], ...life(Array.from({ length: 40 }, () => move(127, 3))) },
  { fault: 'wrap', rules: ['MOV-2'], ...life([move(120, 3), move(-120, 3)]) },
  {
    fault: 'movement at rest',
    rules: ['MOV-5'],
    ...life([wait(1000), move(1, 0), wait(1000)]),
    map: { declared: [{ kind: 'rest', startS: 2, endS: 4 }] },
  },
  { fault: 'slow reports', rules: ['RPT-1'], ...life([{ ...circle, packets: 200, pauseMs: 15 } as Step]) },
  { fault: 'a packet left out', rules: ['RPT-3'], ...life([circle, wait(30), circle]) },
  { fault: 'mark at 0 V', rules: ['LVL-1'], ...volts({ low: 0 }) },
  {
    fault: 'space at 2.5 V',
    rules: ['LVL-2'],
    ...volts({
      high: 2.5,
      roles: { rts: { high: 9, low: -9 }, dtr: { high: 9, low: -9 }, supply: { high: 6.4, low: 6.4 } },
    }),
  },
  { fault: 'slow edges', rules: ['LVL-5'], ...volts({ edgeUs: 120 }) },
  { fault: 'edges that turn back', rules: ['LVL-6'], ...volts({ edgeUs: 45, turnBackV: 2 }) },
  {
    fault: 'sag of RTS',
    rules: ['LVL-7'],
    ...volts({}, [{ do: 'sag', line: 'rts', volts: 5, ms: 8, afterMs: 63 }]),
  },
  {
    fault: 'brown-out',
    rules: ['PWR-2'],
    ...volts({}, [{ do: 'sag', line: 'supply', volts: 3, ms: 20, afterMs: 20 }]),
  },
  { fault: 'rail too high', rules: ['PWR-4'], ...volts({ roles: { supply: { high: 8, low: 8 } } }) },
];

/** Rules broken, and the blocking ones among them. */
function broken(recorded: Recorded): { all: string[]; blocking: string[] } {
  const rules = checkRecorded(recorded).rules.filter(({ verdict }) => verdict === 'violation');
  return {
    all: rules.map(({ id }) => id),
    blocking: rules.filter(({ severity }) => severity === 'blocking').map(({ id }) => id),
  };
}

describe('faults and rules', () => {
  it.each([
    ['M', life([])],
    ['M with a string', withString({})],
    ['M3', life([{ do: 'press', button: 'middle' }, wait(100), { do: 'release', button: 'middle' }], M3)],
    ['MZ', life([move(0, 0, { wheel: 1 })], { protocol: 'MZ' })],
    ['in volts', volts({})],
  ] as const)('without a fault nothing is broken: %s', (_name, recorded) => {
    expect(broken(recorded).all).toEqual([]);
  });

  it.each(FAULTS)('$fault breaks $rules', ({ rules, also = {}, fault, ...recorded }) => {
    void fault;
    const { all, blocking } = broken(recorded);
    expect(all).toEqual(expect.arrayContaining([...rules]));
    const unrelated = blocking.filter((id) => !rules.includes(id) && !(id in also));
    expect(unrelated).toEqual([]);
  });

  it('what a fault is said to break besides, it breaks', () => {
    const idle = FAULTS.flatMap(({ fault, also, ...recorded }) => {
      if (also === undefined) return [];
      const { blocking } = broken(recorded);
      return Object.keys(also)
        .filter((id) => !blocking.includes(id))
        .map((id) => `${fault}: ${id}`);
    });
    expect(idle).toEqual([]);
  });
});
