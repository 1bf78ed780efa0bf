import { describe, expect, it } from 'vitest';
import type { FindingView } from '#shared/contract/http/checks';
import { isWorse, leadsBefore, shortValue } from './finding-words';

const finding = (more: Partial<FindingView>): FindingView => ({
  rule: 'HSK-1',
  verdict: 'pass',
  severity: 'blocking',
  startTicks: 0,
  endTicks: 1,
  startS: 0,
  endS: 0,
  measured: 13.24,
  uncertainty: 0.02,
  uncertaintyKind: 'bound',
  limit: 14,
  unit: 'ms',
  message: '',
  ...more,
});

describe('the value of a finding in short', () => {
  it('is the figure alone for a pass, with the limit for a violation, with U where it decides', () => {
    expect(shortValue(finding({}))).toBe('13.24 ms');
    expect(shortValue(finding({ verdict: 'violation', measured: 15.62 }))).toBe('15.62 ms, limit 14');
    const edge = { rule: 'FRM-8', measured: 3.1, uncertainty: 2.4, unit: '% of a bit', limit: 5 };
    expect(shortValue(finding({ ...edge, verdict: 'inconclusive' }))).toBe('3.1 ± 2.4 %');
  });

  it('is two words where nothing was measured', () => {
    const none = { measured: null, uncertainty: null, limit: null, unit: null };
    expect(shortValue(finding({ ...none, rule: 'FRM-3', verdict: 'violation' }))).toBe('stop at space');
    expect(shortValue(finding({ ...none, rule: 'HSK-2' }))).toBe('begins with M');
    expect(shortValue(finding({ ...none, verdict: 'not-shown' }))).toBe('not shown');
  });

  it('names the pulse', () => {
    expect(shortValue(finding({ rule: 'HSK-7', measured: 104.2 }))).toBe('pulse 104.2 ms');
  });
});

describe('which finding leads', () => {
  it('is the worse verdict, among equal ones the graver rule', () => {
    expect(isWorse('violation', 'inconclusive')).toBe(true);
    expect(isWorse('pass', 'not-shown')).toBe(false);
    expect(leadsBefore(finding({ severity: 'note', verdict: 'violation' }), finding({}))).toBe(true);
    expect(leadsBefore(finding({}), finding({ severity: 'note' }))).toBe(true);
    expect(leadsBefore(finding({ severity: 'note' }), finding({}))).toBe(false);
  });
});
