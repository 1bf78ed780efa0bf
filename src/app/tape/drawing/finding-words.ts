import type { FindingView } from '#shared/contract/http/checks';
import { formatPlain } from './figures';

/** What to say of a rule's finding in two or three words, where there is no figure to say. */
const SHORT: Readonly<Record<string, string>> = {
  'HSK-2': 'first character',
  'HSK-3': 'character while OFF',
  'HSK-4': 'no reply',
  'HSK-5': 'stray character',
  'HSK-9': 'DTR in the reply',
  'HSK-11': 'timing of hosts',
  'HSK-13': 'TXD not at mark',
  'HSK-14': 'DSR',
  'IDN-1': 'Begin and End',
  'IDN-2': 'checksum',
  'IDN-3': 'maker and product',
  'IDN-4': 'revision',
  'IDN-5': 'optional fields',
  'IDN-7': 'compatible ids',
  'IDN-8': 'six-bit form',
  'FRM-3': 'stop at space',
  'FRM-4': 'short element',
  'FRM-5': 'parity',
  'FRM-6': 'break',
  'PKT-1': 'no packet',
  'PKT-2': 'reserved bits',
  'PKT-3': '4th character',
  'PKT-4': 'says nothing',
  'PKT-5': 'cut short',
  'PKT-6': 'protocol change',
  'PKT-7': 'wheel value',
  'BTN-1': 'possible bounce',
  'BTN-2': 'held at the end',
  'BTN-3': 'third button',
  'MOV-2': 'possible wrap',
  'MOV-5': 'counts at rest',
};

/** Decimals by unit. Source: the resolution a reader can use at the bench (house). */
const DECIMALS: Readonly<Record<string, number>> = { ms: 2, '%': 1, '% of a bit': 1 };

function withUnit(value: number, unit: string | null): string {
  const decimals = DECIMALS[unit ?? ''] ?? 2;
  const figure = decimals === 2 && unit !== 'ms' ? formatPlain(value, 2) : value.toFixed(decimals);
  return `${figure}${unitSign(unit)}`;
}

function unitSign(unit: string | null): string {
  if (unit === null) return '';
  return unit.startsWith('%') ? ' %' : ` ${unit}`;
}

/** Value of a finding for its head: `15.62 ms, limit 14`, `3.1 ± 2.4 %`, `13.24 ms`, or two words. */
export function shortValue(finding: FindingView): string {
  const { measured, uncertainty, limit, unit, verdict, rule } = finding;
  if (measured === null) {
    if (rule === 'HSK-2' && verdict === 'pass') return 'begins with M';
    if (verdict === 'not-shown') return 'not shown';
    return SHORT[rule] ?? '';
  }
  if (rule === 'HSK-7') return `pulse ${formatPlain(measured, 1)}${unitSign(unit)}`;
  if (verdict === 'inconclusive' && uncertainty !== null) {
    const decimals = DECIMALS[unit ?? ''] ?? 2;
    return `${measured.toFixed(decimals)} ± ${uncertainty.toFixed(decimals)}${unitSign(unit)}`;
  }
  const value = withUnit(measured, unit);
  return verdict === 'violation' && limit !== null ? `${value}, limit ${formatPlain(limit, 2)}` : value;
}

/** Verdicts in words. */
export const VERDICT_WORDS: Readonly<Record<FindingView['verdict'], string>> = {
  pass: 'pass',
  violation: 'violation',
  inconclusive: 'inconclusive',
  'not-shown': 'not shown',
};

const RANK: Readonly<Record<FindingView['verdict'], number>> = {
  violation: 3,
  inconclusive: 2,
  'not-shown': 1,
  pass: 0,
};

/** Whether the first verdict weighs more than the second. */
export function isWorse(a: FindingView['verdict'], b: FindingView['verdict']): boolean {
  return RANK[a] > RANK[b];
}

const SEVERITY: Readonly<Record<FindingView['severity'], number>> = { blocking: 2, warning: 1, note: 0 };

/** Whether the first finding leads a head before the second: the worse verdict, then the graver rule. */
export function leadsBefore(a: FindingView, b: FindingView): boolean {
  if (a.verdict !== b.verdict) return isWorse(a.verdict, b.verdict);
  return SEVERITY[a.severity] > SEVERITY[b.severity];
}
