import type { Script, Step } from '#shared/composer/script';
import type { VerdictCase } from './judge-script';
import { circle, healthy, move, reset, short, story, wait } from './judge-script';

const moving = [reset(11), wait(60), circle];
const onlyReset = story([reset(11)]);
const m3 = (steps: readonly Step[], head: Partial<Script> = {}): Script =>
  story([...moving, ...steps], { protocol: 'M3', ...head });
const mz = (steps: readonly Step[]): Script => story([...moving, ...steps], { protocol: 'MZ' });
const click = (button: 'left' | 'middle', ms = 120): Step[] => [
  { do: 'press', button },
  wait(ms),
  { do: 'release', button },
];
const changesPackets: readonly Step[] = [...moving, wait(30), { do: 'protocol', protocol: 'MZ' }, circle];
const WITH_TXD = { lines: ['data', 'rts', 'dtr', 'txd'] } as const;
const WITH_CONTACT = { lines: ['data', 'rts', 'dtr', 'contact'] } as const;
const contactClick = (contactMs: number): Script =>
  story(
    [
      ...moving,
      { do: 'press', button: 'left', contactMs },
      wait(100),
      { do: 'release', button: 'left', contactMs },
      wait(600),
    ],
    WITH_CONTACT,
  );

export const PACKET_CASES: readonly VerdictCase[] = [
  { rule: 'PKT-1', verdict: 'pass', script: healthy },
  {
    rule: 'PKT-1',
    verdict: 'violation',
    script: story([...moving, wait(200), { do: 'characters', values: [0x05] }, wait(200)]),
  },
  { rule: 'PKT-1', verdict: 'not-shown', script: short },
  { rule: 'PKT-2', verdict: 'pass', script: m3([]) },
  {
    rule: 'PKT-2',
    verdict: 'violation',
    script: m3([{ do: 'press', button: 'middle', fault: { kind: 'bits', character: 3, mask: 0x08 } }]),
  },
  { rule: 'PKT-2', verdict: 'not-shown', script: short },
  { rule: 'PKT-3', verdict: 'pass', script: m3([]) },
  {
    rule: 'PKT-3',
    verdict: 'violation',
    script: m3([
      { do: 'press', button: 'middle', fault: { kind: 'bits', character: 3, mask: 0x0c } },
      circle,
    ]),
  },
  { rule: 'PKT-3', verdict: 'not-applicable', script: healthy },
  {
    rule: 'PKT-3',
    verdict: 'not-shown',
    script: story([reset(11), wait(60), move(5, 5)], { protocol: 'M3' }),
  },
  { rule: 'PKT-4', verdict: 'pass', script: healthy },
  { rule: 'PKT-4', verdict: 'violation', script: m3([{ do: 'idle-packet' }, circle]) },
  { rule: 'PKT-4', verdict: 'not-shown', script: short },
  {
    rule: 'PKT-4',
    verdict: 'not-applicable',
    script: story([reset(null), wait(60), circle], { protocol: 'five-byte' }),
  },
  { rule: 'PKT-5', verdict: 'pass', script: healthy },
  {
    rule: 'PKT-5',
    verdict: 'violation',
    script: story([...moving, move(3, 3, { fault: { kind: 'lost', character: 1 } }), circle]),
  },
  { rule: 'PKT-5', verdict: 'not-shown', script: short },
  { rule: 'PKT-6', verdict: 'pass', script: healthy },
  { rule: 'PKT-6', verdict: 'violation', script: story(changesPackets, WITH_TXD) },
  // A command of the host, `*X`, explains it. Source: protocol-facts 5.8.
  {
    rule: 'PKT-6',
    verdict: 'pass',
    script: story(
      [...moving, wait(30), { do: 'host', values: [0x2a, 0x58] }, { do: 'protocol', protocol: 'MZ' }, circle],
      WITH_TXD,
    ),
  },
  // So does a reset.
  {
    rule: 'PKT-6',
    verdict: 'pass',
    script: story(
      [...moving, wait(30), { do: 'protocol', protocol: 'MZ' }, reset(11), wait(60), circle],
      WITH_TXD,
    ),
  },
  // M → M3 at the first middle press is none. Source: rules.md 5, PKT-6.
  { rule: 'PKT-6', verdict: 'pass', script: m3(click('middle'), WITH_TXD) },
  { rule: 'PKT-6', verdict: 'inconclusive', script: story(changesPackets) },
  { rule: 'PKT-6', verdict: 'not-shown', script: onlyReset },
  { rule: 'PKT-7', verdict: 'pass', script: mz([move(0, 0, { wheel: 1 })]) },
  { rule: 'PKT-7', verdict: 'violation', script: mz([move(0, 0, { wheel: 7 })]) },
  { rule: 'PKT-7', verdict: 'violation', script: mz([move(0, 0, { wheel: -2 })]) },
  { rule: 'PKT-7', verdict: 'not-applicable', script: healthy },
  {
    rule: 'PKT-7',
    verdict: 'not-shown',
    script: story([reset(11), wait(60), move(5, 5, { wheel: 1 })], { protocol: 'MZ' }),
  },
  { rule: 'BTN-1', verdict: 'pass', script: story([...moving, ...click('left')]) },
  // Packets start 22.5 ms apart.
  { rule: 'BTN-1', verdict: 'violation', script: story([...moving, ...click('left', 0)]) },
  // 35 ms apart.
  { rule: 'BTN-1', verdict: 'inconclusive', script: story([...moving, ...click('left', 12.5)]) },
  { rule: 'BTN-1', verdict: 'not-shown', script: healthy },
  { rule: 'BTN-2', verdict: 'pass', script: healthy },
  // A reset lets go of every button.
  {
    rule: 'BTN-2',
    verdict: 'pass',
    script: story([...moving, { do: 'press', button: 'left' }, wait(60), reset(11)]),
  },
  { rule: 'BTN-2', verdict: 'violation', script: story([...moving, { do: 'press', button: 'left' }]) },
  { rule: 'BTN-2', verdict: 'not-shown', script: onlyReset },
  { rule: 'BTN-3', verdict: 'pass', script: m3(click('middle')) },
  { rule: 'BTN-3', verdict: 'violation', script: m3([...click('middle'), circle], { release: 'implicit' }) },
  { rule: 'BTN-3', verdict: 'not-shown', script: m3([]) },
  { rule: 'BTN-3', verdict: 'not-applicable', script: healthy },
  { rule: 'BTN-4', verdict: 'pass', script: contactClick(12) },
  { rule: 'BTN-4', verdict: 'violation', script: contactClick(60) },
  // 42.5 ms and a packet of 22.5 ms: two packet times and 20 ms. Source: rules.md 6, BTN-4.
  { rule: 'BTN-4', verdict: 'inconclusive', script: contactClick(42.5) },
  { rule: 'BTN-4', verdict: 'not-shown', script: healthy },
  { rule: 'BTN-5', verdict: 'pass', script: contactClick(12) },
  {
    rule: 'BTN-5',
    verdict: 'violation',
    script: story(
      [
        ...moving,
        { do: 'press', button: 'left', contactMs: 12 },
        wait(100),
        { do: 'release', button: 'left', contactMs: 12 },
        wait(200),
        { do: 'set', line: 'contact', on: true },
        wait(100),
        { do: 'set', line: 'contact', on: false },
        wait(700),
      ],
      WITH_CONTACT,
    ),
  },
  // Bounce of 2 ms is one change of the contact.
  {
    rule: 'BTN-5',
    verdict: 'pass',
    script: story(
      [
        ...moving,
        { do: 'glitch', line: 'contact', widthUs: 2000, afterMs: 1 },
        { do: 'press', button: 'left', contactMs: 12 },
        wait(100),
        { do: 'release', button: 'left', contactMs: 12 },
        wait(600),
      ],
      WITH_CONTACT,
    ),
  },
  { rule: 'BTN-5', verdict: 'not-shown', script: healthy },
];
