import type { RuleResultView } from '#shared/contract/http/checks';
import { shortValue, VERDICT_WORDS } from '../drawing/finding-words';
import type { TapeModel } from '../drawing/tape-model';
import { positionOf } from './positions';
import type { TapeTable } from './table-row';

export type FindingOrder = 'worst' | 'time';

const RANK = { violation: 0, inconclusive: 1, 'not-shown': 2, pass: 3 } as const;
const WEIGHT = { blocking: 0, warning: 1, note: 2 } as const;

/** Every place where a rule was judged; the worst first, or in order of time. */
export function findingTable(
  model: TapeModel,
  rules: readonly RuleResultView[],
  order: FindingOrder,
): TapeTable {
  const names = new Map(rules.map(({ id, name }) => [id, name]));
  const { findings, findingOrder } = model;
  const rows = [...findingOrder];
  if (order === 'worst') {
    const rank = (i: number): number => RANK[findings[i].verdict] * 4 + WEIGHT[findings[i].severity];
    rows.sort((a, b) => rank(a) - rank(b) || model.places[a].ticks - model.places[b].ticks);
  }
  const rowOf = new Map(rows.map((finding, row) => [finding, row]));
  return {
    columns: [
      { head: 'Verdict', width: '124px' },
      { head: 'Rule', width: '72px', isMono: true },
      { head: 'What', width: 'minmax(110px, 1fr)', isRoomy: true },
      { head: 'Severity', width: '76px', isRoomy: true },
      { head: 'Time s', width: '104px', align: 'right', isMono: true, isPosition: true },
      { head: 'Measured', width: 'minmax(110px, 1fr)', isMono: true },
      { head: 'In words', width: 'minmax(120px, 3fr)', isRoomy: true },
    ],
    count: rows.length,
    empty: 'No findings: no rule of this rulebook was judged at a place of this capture.',
    rowAt: (row) => {
      const index = rows[row];
      const finding = findings[index];
      return {
        cells: [
          { marks: [{ kind: finding.verdict, text: VERDICT_WORDS[finding.verdict] }] },
          finding.rule,
          names.get(finding.rule) ?? '',
          finding.severity,
          positionOf(model, model.places[index].ticks),
          shortValue(finding),
          finding.message,
        ],
        selection: { kind: 'finding', index },
        startTicks: finding.startTicks,
        endTicks: finding.endTicks,
      };
    },
    indexAt: (ticks) => {
      if (order !== 'time') return -1;
      const at = model.findingTicks.findIndex((place) => place >= ticks);
      return at < 0 ? rows.length : at;
    },
    indexOf: (selection) => (selection.kind === 'finding' ? (rowOf.get(selection.index) ?? -1) : -1),
  };
}
