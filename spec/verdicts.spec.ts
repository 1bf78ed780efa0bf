import { describe, expect, it } from 'vitest';
import { BASELINE } from '#shared/rules/baseline';
import { RULE_DEFINITIONS } from '#shared/rules/definitions';
import { FRM_CASES } from './verdicts/frm-cases';
import { HSK_CASES } from './verdicts/hsk-cases';
import { IDN_CASES } from './verdicts/idn-cases';
import { rulesOf, silent } from './verdicts/judge-script';
import { MOTION_CASES } from './verdicts/motion-cases';
import { PACKET_CASES } from './verdicts/packet-cases';
import { VOLTS_CASES } from './verdicts/volts-cases';

// Every verdict of every rule, reached from a capture file. Inconclusive comes from the resolution of the file alone.
// Source of definitions and limits: rules.md 2–10.

const CASES = [...HSK_CASES, ...IDN_CASES, ...FRM_CASES, ...PACKET_CASES, ...MOTION_CASES, ...VOLTS_CASES];

const BY_CHARACTERS = 'the characters decide, and each of them is read or damaged';
const BY_COUNTS = 'counts of whole packets have no uncertainty';
/** Verdicts no capture leads to. */
const UNREACHABLE: Record<string, string> = {
  'HSK-2 inconclusive': BY_CHARACTERS,
  'HSK-5 inconclusive': BY_CHARACTERS,
  'IDN-1 inconclusive': BY_CHARACTERS,
  'IDN-2 inconclusive': BY_CHARACTERS,
  'IDN-3 inconclusive': BY_CHARACTERS,
  'IDN-4 inconclusive': BY_CHARACTERS,
  'IDN-5 inconclusive': BY_CHARACTERS,
  'IDN-7 inconclusive': BY_CHARACTERS,
  'IDN-8 inconclusive': BY_CHARACTERS,
  'FRM-3 inconclusive': BY_CHARACTERS,
  'FRM-5 inconclusive': BY_CHARACTERS,
  'FRM-6 inconclusive': BY_CHARACTERS,
  'PKT-1 inconclusive': BY_COUNTS,
  'PKT-2 inconclusive': BY_COUNTS,
  'PKT-3 inconclusive': BY_COUNTS,
  'PKT-4 inconclusive': BY_COUNTS,
  'PKT-5 inconclusive': BY_COUNTS,
  'PKT-7 inconclusive': BY_COUNTS,
  'BTN-2 inconclusive': BY_COUNTS,
  'BTN-3 inconclusive': BY_COUNTS,
  'BTN-5 inconclusive': BY_COUNTS,
  'MOV-1 inconclusive': BY_COUNTS,
  'MOV-2 inconclusive': BY_COUNTS,
  'MOV-5 inconclusive': BY_COUNTS,
};
/** Judged on the sheet of a build. */
const FROM_SHEET = ['PWR-1', 'PWR-3'];

describe('rules over capture files', () => {
  it.each(CASES)('$rule: $verdict', ({ rule, verdict, ...recorded }) => {
    const result = rulesOf(recorded).get(rule);
    expect({ verdict: result?.verdict, reason: result?.reason }).toEqual({
      verdict,
      reason: expect.any(String) as string,
    });
    expect(result?.reason).not.toBe('');
  });

  it('reach each verdict, or say why not', () => {
    const reached = new Set(CASES.map(({ rule, verdict }) => `${rule} ${verdict}`));
    const open = RULE_DEFINITIONS.filter(({ id }) => !FROM_SHEET.includes(id)).flatMap(({ id }) =>
      ['pass', 'violation', 'inconclusive', 'not-shown']
        .map((verdict) => `${id} ${verdict}`)
        .filter((name) => !reached.has(name) && !(name in UNREACHABLE)),
    );
    expect(open).toEqual([]);
    expect(Object.keys(UNREACHABLE).filter((name) => reached.has(name))).toEqual([]);
  });

  it('list every rule with a reason, whatever the capture', () => {
    const rules = [...rulesOf({ script: silent }).values()];
    expect(rules.map(({ id }) => id)).toEqual(BASELINE.rules.map(({ id }) => id));
    expect(rules.every(({ reason }) => reason.length > 0)).toBe(true);
  });
});
