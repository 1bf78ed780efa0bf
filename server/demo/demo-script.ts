import type { AboutCapture } from '#shared/contract/http/captures';
import type { NewDevice } from '#shared/contract/http/devices';
import type { Role } from '#shared/contract/http/accounts';

/*
 * The demo workspace: two invented firms, invented people. The captures are the samples of the composer, taken in and decoded like
 * anybody's.
 */

export interface DemoPerson {
  readonly key: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
}

export const DEMO_PEOPLE: readonly DemoPerson[] = [
  { key: 'ines', name: 'Ines Carvalho', email: 'ines@norrhavn.example', role: 'firmware' },
  { key: 'tomas', name: 'Tomas Rebelo', email: 'tomas@quintal.example', role: 'firmware' },
  { key: 'johanna', name: 'Johanna Hauk', email: 'johanna@norrhavn.example', role: 'qa' },
  { key: 'aurelio', name: 'Aurelio Pinto', email: 'aurelio@quintal.example', role: 'qa' },
  { key: 'mira', name: 'Mira Lindqvist', email: 'mira@norrhavn.example', role: 'support' },
  { key: 'kofi', name: 'Kofi Darko', email: 'kofi@quintal.example', role: 'support' },
  { key: 'rosa', name: 'Rosa Teixeira', email: 'rosa@norrhavn.example', role: 'admin' },
  { key: 'bernd', name: 'Bernd Ohlsen', email: 'bernd@quintal.example', role: 'admin' },
];

export interface DemoDevice extends NewDevice {
  readonly builds: readonly { readonly name: string; readonly board: string; readonly notes: string }[];
}

export const DEMO_DEVICES: readonly DemoDevice[] = [
  {
    name: 'Trackball proto C',
    kind: 'trackball',
    maker: 'Norrhavn Input Devices',
    countsPerInch: 400,
    protocol: 'M3',
    notes: 'Three buttons, 55 mm ball. Powered from RTS and DTR.',
    builds: [
      { name: '2.3.0-rc4', board: 'C2', notes: 'New supervisor threshold.' },
      { name: '2.3.0-rc5', board: 'C2', notes: 'Identification sent before the sensor starts.' },
    ],
  },
  {
    name: 'Panel mouse W2',
    kind: 'mouse',
    maker: 'Norrhavn Input Devices',
    countsPerInch: 400,
    protocol: 'MZ',
    notes: 'Sealed mouse with a wheel for panels.',
    builds: [{ name: '1.9.4', board: 'W2-B', notes: 'Wheel filter.' }],
  },
  {
    name: 'Desk mouse D1',
    kind: 'mouse',
    maker: 'Quintal Pointing Works',
    countsPerInch: 400,
    protocol: 'M',
    notes: 'Two buttons.',
    builds: [
      { name: '0.8.1', board: 'D1', notes: 'Internal oscillator, not trimmed.' },
      { name: '0.8.2', board: 'D1', notes: 'Oscillator trimmed at the end of the line.' },
    ],
  },
  {
    name: 'Adapter S5',
    kind: 'adapter',
    maker: 'Quintal Pointing Works',
    countsPerInch: null,
    protocol: 'five-byte',
    notes: 'Makes a modern mouse speak to a serial host.',
    builds: [{ name: '3.0.0', board: 'S5-A', notes: 'First build with five-byte packets.' }],
  },
];

export interface DemoCapture {
  readonly file: string;
  readonly owner: string;
  /** `device build`; undefined: not known. */
  readonly build?: string;
  readonly about: AboutCapture;
  /** Left with its lines not mapped yet. */
  readonly isUnmapped?: boolean;
}

const BENCH = {
  instrument: 'Bench recorder 3, eight channels',
  calibrationDue: '2027-03-31',
  probe: 'Line receivers, 3 kΩ',
  hostPort: 'Bench port B',
  cable: '1.8 m, shielded',
  supply: 'RTS and DTR of the port',
  temperatureC: 23,
} as const;

export const DEMO_CAPTURES: readonly DemoCapture[] = [
  {
    file: 'lost-character.vcd',
    owner: 'tomas',
    build: 'Desk mouse D1 0.8.1',
    about: { ...BENCH, subject: 'Jumps while moving', unitSerial: 'D1-0031', operator: 'Tomas Rebelo' },
  },
  {
    file: 'fast-clock.csv',
    owner: 'tomas',
    build: 'Desk mouse D1 0.8.1',
    about: { ...BENCH, subject: 'Oscillator not trimmed', unitSerial: 'D1-0033', operator: 'Tomas Rebelo' },
  },
  {
    file: 'healthy-m.vcd',
    owner: 'aurelio',
    build: 'Desk mouse D1 0.8.2',
    about: {
      ...BENCH,
      subject: 'Reset and reference strokes',
      unitSerial: 'D1-0040',
      operator: 'Aurelio Pinto',
    },
  },
  {
    file: 'identification-string.vcd',
    owner: 'aurelio',
    build: 'Desk mouse D1 0.8.2',
    about: { ...BENCH, subject: 'Identification string', unitSerial: 'D1-0040', operator: 'Aurelio Pinto' },
  },
  {
    file: 'volts.csv',
    owner: 'aurelio',
    build: 'Desk mouse D1 0.8.2',
    about: {
      ...BENCH,
      subject: 'Levels at the receiver',
      unitSerial: 'D1-0040',
      instrument: 'Bench recorder 5, two analog channels',
      probe: 'Dividers 10:1',
      probedEnd: 'receiver',
      operator: 'Aurelio Pinto',
    },
  },
  {
    file: 'wheel-and-buttons.csv',
    owner: 'johanna',
    build: 'Panel mouse W2 1.9.4',
    about: { ...BENCH, subject: 'Wheel, line by line', unitSerial: 'W2-1187', operator: 'Johanna Hauk' },
  },
  {
    file: 'late-warm-reset.vcd',
    owner: 'ines',
    build: 'Trackball proto C 2.3.0-rc4',
    about: {
      ...BENCH,
      subject: 'Late reply after warm reset',
      unitSerial: 'PC-07',
      operator: 'Ines Carvalho',
    },
  },
  {
    file: 'many-resets.vcd',
    owner: 'ines',
    build: 'Trackball proto C 2.3.0-rc5',
    about: { ...BENCH, subject: 'Warm resets, 24 times', unitSerial: 'PC-07', operator: 'Ines Carvalho' },
  },
  {
    file: 'five-byte.csv',
    owner: 'kofi',
    build: 'Adapter S5 3.0.0',
    about: { ...BENCH, subject: 'Fast strokes, logic side', unitSerial: 'S5-210', operator: 'Kofi Darko' },
  },
  {
    file: 'silent.vcd',
    owner: 'mira',
    about: {
      subject: 'Customer says: not found by the host',
      notes: 'Sent in with the adapter unplugged twice.',
    },
  },
  {
    file: 'healthy-m.vcd',
    owner: 'mira',
    about: { subject: 'Customer capture, second try' },
    isUnmapped: true,
  },
];
