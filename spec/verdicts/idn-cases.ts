import type { PnpScript, Script } from '#shared/composer/script';
import type { VerdictCase } from './judge-script';
import { circle, healthy, reset, silent, story, wait, withoutReset } from './judge-script';

const PNP: PnpScript = { eisaId: 'ZZZ', productId: '0A01', className: 'MOUSE', driverId: 'PNP0F0C' };

function withString(deviation: Partial<PnpScript> = {}, pnpGapMs = 0): Script {
  return story([reset(11, { pnp: { ...PNP, ...deviation }, pnpGapMs }), wait(60), circle]);
}

/** Rules about the string itself: a string without a fault passes, one with it does not. */
function stringCases(rule: string, deviation: Partial<PnpScript>): VerdictCase[] {
  return [
    { rule, verdict: 'pass', script: withString() },
    { rule, verdict: 'violation', script: withString(deviation) },
    { rule, verdict: 'not-applicable', script: healthy },
    { rule, verdict: 'not-shown', script: silent },
    { rule, verdict: 'not-shown', script: withoutReset },
  ];
}

export const IDN_CASES: readonly VerdictCase[] = [
  ...stringCases('IDN-1', { end: 0x29 }),
  ...stringCases('IDN-2', { checksum: '00' }),
  { rule: 'IDN-2', verdict: 'not-shown', script: withString({ end: 0x29 }) },
  {
    rule: 'IDN-2',
    verdict: 'not-applicable',
    script: withString({ className: undefined, driverId: undefined }),
  },
  ...stringCases('IDN-3', { eisaId: 'Z1Z' }),
  ...stringCases('IDN-4', { revision: 99 }),
  ...stringCases('IDN-5', { serialNumber: '0042' }),
  { rule: 'IDN-6', verdict: 'pass', script: withString() },
  { rule: 'IDN-6', verdict: 'violation', script: withString({}, 210) },
  // No pause is too long, the whole string is: 30 pauses of 100 ms. Source: protocol-facts 3.3, T6 = 2.2 s.
  { rule: 'IDN-6', verdict: 'violation', script: withString({}, 100) },
  {
    rule: 'IDN-6',
    verdict: 'inconclusive',
    // Twelve characters of 7.5 ms and eleven pauses: exactly 2.2 s.
    script: withString({ className: undefined, driverId: undefined }, (2200 - 12 * 7.5) / 11),
  },
  { rule: 'IDN-6', verdict: 'not-applicable', script: healthy },
  { rule: 'IDN-6', verdict: 'not-shown', script: silent },
  { rule: 'IDN-7', verdict: 'pass', script: withString() },
  { rule: 'IDN-7', verdict: 'violation', script: withString({ driverId: 'PNP0F04' }) },
  { rule: 'IDN-7', verdict: 'not-shown', script: withString({ driverId: 'PNP0F06' }) },
  { rule: 'IDN-7', verdict: 'not-applicable', script: withString({ driverId: undefined }) },
  ...stringCases('IDN-8', { userName: 'demo' }),
  { rule: 'IDN-8', verdict: 'not-applicable', script: withString({ form: 7 }) },
];
