import { countBefore } from '#shared/time/sorted-search';
import { formatFigure, formatSigned, hexByte } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import type { FindingsByPlace } from './findings-by-place';
import { marksOf } from './findings-by-place';
import { heldText, ms, positionOf } from './positions';
import type { TableRow, TapeTable } from './table-row';

/** Packets and identifications in order of time. An identification is no packet: it has no number. */
export function packetTable(model: TapeModel, findings: FindingsByPlace): TapeTable {
  const { packets, characters, resets } = model.tape;
  const rows = mergeByTime(model);
  const starts = Float64Array.from(rows, (row) => startOf(model, row));
  const rowOfPacket = new Map<number, number>();
  const rowOfReset = new Map<number, number>();
  rows.forEach((row, index) => (row >= 0 ? rowOfPacket.set(row, index) : rowOfReset.set(-row - 1, index)));
  const hasWheel = packets.hasWheel;

  const rowAt = (index: number): TableRow => {
    const row = rows[index];
    const startTicks = starts[index];
    const after = index === 0 ? '' : ms(model, startTicks - starts[index - 1]);
    if (row < 0) {
      const reset = resets[-row - 1];
      const values = reset.identification.map((c) => characters.values[c]);
      const text = values.slice(0, 8).map(hexByte).join(' ') + (values.length > 8 ? ' …' : '');
      return {
        cells: [
          '',
          positionOf(model, startTicks),
          after,
          text,
          // Takes the columns of both movements.
          { plate: reset.identity ?? '?', text: reset.pnp === null ? 'identification' : 'with PnP string' },
          null,
          ...(hasWheel ? [''] : []),
          '',
          '',
          { marks: marksOf(model, findings.ofReset.get(-row - 1)) },
        ],
        selection: { kind: 'reset', index: -row - 1 },
        startTicks,
        endTicks: reset.identificationEndTicks ?? startTicks,
      };
    }
    const first = packets.firstCharacter[row];
    const values = Array.from(
      characters.values.subarray(first, first + packets.characterCount[row]),
      hexByte,
    );
    const beforeTicks = row === 0 ? 0 : startTicks - model.packetStarts[row - 1];
    const rate = beforeTicks > 0 ? 1 / (beforeTicks * model.tape.tickS) : 0;
    return {
      cells: [
        String(row),
        positionOf(model, startTicks),
        after,
        values.join(' '),
        formatSigned(packets.dx[row]),
        formatSigned(packets.dy[row]),
        ...(hasWheel ? [formatSigned(packets.wheel[row])] : []),
        heldText(packets.buttons[row]),
        rate >= 1 ? formatFigure(rate, 1) : '',
        { marks: marksOf(model, findings.ofPacket.get(row)) },
      ],
      selection: { kind: 'packet', index: row },
      startTicks,
      endTicks: model.packetEnds[row],
    };
  };

  return {
    columns: [
      { head: 'No.', width: '56px', align: 'right', isMono: true },
      { head: 'Time s', width: '104px', align: 'right', isMono: true, isPosition: true },
      { head: 'After ms', width: '84px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Characters', width: 'minmax(96px, 1fr)', isMono: true, isRoomy: true },
      { head: 'Δx', width: 'minmax(52px, 84px)', align: 'right', isMono: true },
      { head: 'Δy', width: '52px', align: 'right', isMono: true },
      ...(hasWheel ? [{ head: 'Wheel', width: '52px', align: 'right' as const, isMono: true }] : []),
      { head: 'Held', width: '64px', isMono: true },
      { head: 'Rate /s', width: '60px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Findings', width: 'minmax(90px, 1.2fr)' },
    ],
    count: rows.length,
    empty:
      resets.length > 0 && characters.count > 0
        ? 'No packets. The device answered the reset but did not move.'
        : 'No packets.',
    rowAt,
    indexAt: (ticks) => countBefore(starts, ticks),
    indexOf: (selection) => {
      if (selection.kind === 'packet') return rowOfPacket.get(selection.index) ?? -1;
      if (selection.kind === 'reset') return rowOfReset.get(selection.index) ?? -1;
      if (selection.kind !== 'character') return -1;
      const packet = model.tape.packetOfCharacter[selection.index];
      return packet >= 0 ? (rowOfPacket.get(packet) ?? -1) : -1;
    },
  };
}

/** Packets as their index, identifications as −1 − index of the reset. */
function mergeByTime(model: TapeModel): Int32Array {
  const identified = [...model.tape.resets.keys()].filter(
    (r) => model.tape.resets[r].identification.length > 0,
  );
  const rows = new Int32Array(model.tape.packets.count + identified.length);
  let p = 0;
  let i = 0;
  for (let row = 0; row < rows.length; row++) {
    const next = identified[i];
    const isReset =
      next !== undefined &&
      (p >= model.tape.packets.count || startOf(model, -1 - next) <= model.packetStarts[p]);
    rows[row] = isReset ? -1 - next : p;
    if (isReset) i++;
    else p++;
  }
  return rows;
}

function startOf(model: TapeModel, row: number): number {
  if (row >= 0) return model.packetStarts[row];
  const reset = model.tape.resets[-row - 1];
  return model.tape.characters.startTicks[reset.identification[0]];
}
