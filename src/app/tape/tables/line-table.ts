import { countBefore } from '#shared/time/sorted-search';
import type { TapeModel } from '../drawing/tape-model';
import type { FindingsByPlace } from './findings-by-place';
import { marksOf } from './findings-by-place';
import { ms, positionOf } from './positions';
import type { TableRow, TapeTable } from './table-row';

/** Changes of RTS and DTR, with what each reset brought. */
export function lineTable(model: TapeModel, findings: FindingsByPlace): TapeTable {
  const { controlEvents, resets, tickS } = model.tape;
  const starts = Float64Array.from(controlEvents, (event) => event.ticks);
  const resetAt = new Map(resets.map((reset, index) => [reset.onTicks, index]));
  const rowOfReset = new Map<number, number>();
  controlEvents.forEach((event, row) => {
    const reset = event.line === 'rts' && event.isOn ? resetAt.get(event.ticks) : undefined;
    if (reset !== undefined) rowOfReset.set(reset, row);
  });
  const rowAt = (index: number): TableRow => {
    const event = controlEvents[index];
    const reset = event.line === 'rts' && event.isOn ? resetAt.get(event.ticks) : undefined;
    const cells = [positionOf(model, event.ticks), event.line.toUpperCase(), event.isOn ? 'ON' : 'OFF'];
    if (reset === undefined) {
      return {
        cells: [...cells, '', '', '', '', { marks: [] }],
        selection: null,
        startTicks: event.ticks,
        endTicks: event.ticks,
      };
    }
    const { offTicks, replyTicks, onTicks, identity, isPowerUp, isPulseStartSeen, windowEndTicks } =
      resets[reset];
    const pulse = (onTicks - offTicks) * tickS * 1e3;
    return {
      cells: [
        ...cells,
        `${isPulseStartSeen ? '' : '≥ '}${pulse.toFixed(2)} ms`,
        isPowerUp === null ? 'not known' : isPowerUp ? 'power-up' : 'warm reset',
        replyTicks === null ? 'no reply' : `${ms(model, replyTicks - onTicks)} ms`,
        identity ?? '',
        { marks: marksOf(model, findings.ofReset.get(reset)) },
      ],
      selection: { kind: 'reset', index: reset },
      startTicks: onTicks,
      endTicks: replyTicks ?? windowEndTicks,
    };
  };
  return {
    columns: [
      { head: 'Time s', width: '104px', align: 'right', isMono: true, isPosition: true },
      { head: 'Line', width: '56px', isMono: true },
      { head: 'Goes', width: '52px', isMono: true },
      { head: 'Pulse', width: '104px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Kind', width: '96px', isRoomy: true },
      { head: 'Reply after', width: '104px', align: 'right', isMono: true },
      { head: 'As', width: '64px', isMono: true },
      { head: 'Findings', width: 'minmax(90px, 1fr)' },
    ],
    count: controlEvents.length,
    empty: 'No changes of RTS or DTR. Without them no reset can be judged.',
    rowAt,
    indexAt: (ticks) => countBefore(starts, ticks),
    indexOf: (selection) => (selection.kind === 'reset' ? (rowOfReset.get(selection.index) ?? -1) : -1),
  };
}
