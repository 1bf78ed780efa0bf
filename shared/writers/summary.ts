import type { CheckResult } from '../rules/finding';
import { definitionOf } from '../rules/definitions';
import { framingName } from '../characters/framing';
import type { Decoded } from '../decode/decoded';
import { printable } from './plain-text';

/** One file's line of a summary. */
export interface SummaryRow {
  readonly file: string;
  readonly verdict: CheckResult['verdict'] | 'unusable';
  readonly protocol: string;
  readonly framing: string;
  readonly resets: number;
  readonly packets: number;
  /** What weighs most, in words. */
  readonly leading: string;
}

export function toSummaryRow(file: string, decoded: Decoded, check: CheckResult): SummaryRow {
  const rank = { violation: 0, inconclusive: 1, 'not-shown': 2, pass: 3, 'not-applicable': 4 };
  const weight = { blocking: 0, warning: 1, note: 2 };
  // What weighs on the overall verdict comes first: a blocking rule that is open before a warning that is violated.
  const worst = check.rules
    .filter((rule) => definitionOf(rule.id)?.isMeasured === true)
    .sort((a, b) => weight[a.severity] - weight[b.severity] || rank[a.verdict] - rank[b.verdict])[0];
  return {
    file: printable(file),
    verdict: check.verdict,
    protocol: decoded.protocol ?? 'none',
    framing: decoded.framing === null ? 'none' : framingName(decoded.framing),
    resets: decoded.resets.length,
    packets: decoded.packets.count,
    leading:
      worst.verdict === 'pass' ? 'all shown rules pass' : `${worst.id} ${worst.verdict}: ${worst.reason}`,
  };
}

const RANK: Record<SummaryRow['verdict'], number> = { unusable: 0, fail: 1, inconclusive: 2, pass: 3 };

/** A table of files, worst first. */
export function writeSummary(rows: readonly SummaryRow[]): string {
  const sorted = [...rows].sort((a, b) => RANK[a.verdict] - RANK[b.verdict] || a.file.localeCompare(b.file));
  const head = ['verdict', 'protocol', 'framing', 'resets', 'packets', 'file', 'leading'];
  const cells = sorted.map((row) => [
    row.verdict,
    row.protocol,
    row.framing,
    String(row.resets),
    String(row.packets),
    row.file,
    row.leading,
  ]);
  const widths = head.map((name, i) => Math.max(name.length, ...cells.map((row) => row[i].length)));
  const render = (row: readonly string[]): string =>
    row
      .map((cell, i) => (i === 3 || i === 4 ? cell.padStart(widths[i]) : cell.padEnd(widths[i])))
      .join('  ')
      .trimEnd();
  return `${[head, ...cells].map(render).join('\n')}\n`;
}
