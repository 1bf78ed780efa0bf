import { describe, expect, it } from 'vitest';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import type { GroupMember } from '#shared/rules/group';
import { judgeGroup } from '#shared/rules/group';
import { groupFigures } from '#shared/rules/group-figures';
import type { Recorded } from './judge-script';
import { captureOf, circle, reset, story, wait } from './judge-script';

function memberOf(recorded: Recorded, unit: string | null = null): GroupMember {
  const decoded = decode(captureOf(recorded), recorded.map, recorded.options);
  const { rules } = check(decoded, BASELINE);
  return {
    unit,
    rules,
    figures: groupFigures(decoded),
    hasDefects: decoded.capture.defects.length > 0,
  };
}

const manyResets = (count: number): Recorded => ({
  script: story(Array.from({ length: count }, (_, i) => [reset(10 + (i % 7) / 10), wait(30)]).flat()),
});
const moving: Recorded = { script: story([reset(11), wait(60), circle, circle]) };
const slow: Recorded = { script: story([reset(11), wait(60), { ...circle, pauseMs: 12 } as typeof circle]) };

// Source: rules.md 1, Groups.
describe('groups of capture files', () => {
  it.each([
    ['resets', manyResets(26)],
    ['motion', moving],
    ['slow motion', slow],
  ])('one capture is judged as its check did: %s', (_name, recorded) => {
    const member = memberOf(recorded);
    const group = judgeGroup(BASELINE, [member]);
    expect(group.rules.map(({ id, verdict }) => ({ id, verdict }))).toEqual(
      member.rules.map(({ id, verdict }) => ({ id, verdict })),
    );
    group.rules.forEach(({ measured }, i) => {
      if (measured !== null) expect(measured).toBeCloseTo(member.rules[i].measured!, 6);
    });
  });

  it('twice thirteen resets are enough for the index of the latency', () => {
    const members = [memberOf(manyResets(13), '0001'), memberOf(manyResets(13), '0002')];
    const group = judgeGroup(BASELINE, members);
    const of = (rules: typeof group.rules) => rules.find(({ id }) => id === 'HSK-10');
    expect(of(group.rules)).toMatchObject({ verdict: 'pass', n: 26 });
    expect(group.units.map(({ rules }) => of(rules)?.verdict)).toEqual(['not-shown', 'not-shown']);
  });
});
