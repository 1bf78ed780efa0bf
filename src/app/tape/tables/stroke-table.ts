import { countBefore } from '#shared/time/sorted-search';
import { formatFigure, formatSigned } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import type { FindingsByPlace } from './findings-by-place';
import { marksOf } from './findings-by-place';
import { heldText, positionOf } from './positions';
import type { TapeTable } from './table-row';

/** Runs of moving packets. */
export function strokeTable(model: TapeModel, findings: FindingsByPlace): TapeTable {
  const { runs } = model;
  const { packets, tickS } = model.tape;
  const starts = Float64Array.from(runs, (run) => run.startTicks);
  return {
    columns: [
      { head: 'No.', width: '48px', align: 'right', isMono: true },
      { head: 'Start s', width: '104px', align: 'right', isMono: true, isPosition: true },
      { head: 'Lasts s', width: '68px', align: 'right', isMono: true },
      { head: 'Packets', width: '64px', align: 'right', isMono: true },
      { head: 'Mean rate /s', width: '84px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Lowest /s', width: '76px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Line use %', width: '80px', align: 'right', isMono: true },
      { head: 'Path', width: '64px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Net Δx, Δy', width: 'minmax(100px, 1fr)', align: 'right', isMono: true },
      { head: 'Held', width: '64px', isMono: true, isRoomy: true },
      { head: 'Findings', width: 'minmax(90px, 1fr)' },
    ],
    count: runs.length,
    empty: 'No strokes. A stroke is at least ten moving packets one after the other.',
    rowAt: (index) => {
      const run = runs[index];
      let path = 0;
      let held = 0;
      const found: number[] = [];
      for (let p = run.firstPacket; p <= run.lastPacket; p++) {
        path += Math.hypot(packets.dx[p], packets.dy[p]);
        held |= packets.buttons[p];
        found.push(...(findings.ofPacket.get(p) ?? []));
      }
      const lowest = run.longestStep > 0 ? 1 / (run.longestStep * tickS) : 0;
      return {
        cells: [
          String(index + 1),
          positionOf(model, run.startTicks),
          formatFigure((run.endTicks - run.startTicks) * tickS, 3),
          String(run.lastPacket - run.firstPacket + 1),
          formatFigure(run.packetRate, 1),
          formatFigure(lowest, 1),
          formatFigure(run.lineUse * 100, 1),
          formatFigure(path, 0),
          `${formatSigned(run.dx)}, ${formatSigned(run.dy)}`,
          heldText(held),
          { marks: marksOf(model, found).filter(({ kind }) => kind !== 'pass') },
        ],
        selection: { kind: 'packet', index: run.firstPacket },
        startTicks: run.startTicks,
        endTicks: run.endTicks,
      };
    },
    indexAt: (ticks) => countBefore(starts, ticks),
    indexOf: (selection) =>
      selection.kind === 'packet'
        ? runs.findIndex((run) => selection.index >= run.firstPacket && selection.index <= run.lastPacket)
        : -1,
  };
}
