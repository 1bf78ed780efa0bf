import { composeModel, LATE_REPLY } from '../drawing/testing/composed-tape';
import { characterTable } from './character-table';
import { sortFindings } from './findings-by-place';
import { findingTable } from './finding-table';
import { lineTable } from './line-table';
import { packetTable } from './packet-table';
import { strokeTable } from './stroke-table';

describe('tables of the tape', () => {
  const model = composeModel(LATE_REPLY);
  const findings = sortFindings(model);

  it.each([
    ['packets', packetTable(model, findings)],
    ['characters', characterTable(model, findings)],
    ['lines', lineTable(model, findings)],
    ['strokes', strokeTable(model, findings)],
    ['findings in order of time', findingTable(model, [], 'time')],
  ])('%s stand in order of time and are found again by what they select', (_, table) => {
    expect(table.count).toBeGreaterThan(0);
    let before = -1;
    for (let i = 0; i < table.count; i++) {
      const row = table.rowAt(i);
      expect(row.cells.length).toBe(table.columns.length);
      const place =
        row.selection?.kind === 'finding' ? model.places[row.selection.index].ticks : row.startTicks;
      expect(place).toBeGreaterThanOrEqual(before);
      before = place;
      if (row.selection !== null) expect(table.indexOf(row.selection)).toBe(i);
    }
  });

  it('puts identifications between the packets, without a number', () => {
    const table = packetTable(model, findings);
    const plates = Array.from({ length: table.count }, (_, i) => table.rowAt(i)).filter(({ cells }) =>
      cells.some((cell) => typeof cell === 'object' && cell !== null && 'plate' in cell),
    );
    expect(plates.length).toBe(2);
    expect(plates.every(({ cells }) => cells[0] === '')).toBe(true);
    expect(table.count).toBe(model.tape.packets.count + 2);
  });

  it('shows the late reply where it is', () => {
    const table = lineTable(model, findings);
    const late = Array.from({ length: table.count }, (_, i) => table.rowAt(i)).find(({ cells }) =>
      cells.includes('15.62 ms'),
    );
    expect(late?.cells.at(-1)).toMatchObject({ marks: [{ kind: 'violation', text: 'HSK-1' }] });
  });

  it('begins with the worst finding where it is asked to', () => {
    const { cells } = findingTable(model, [], 'worst').rowAt(0);
    expect(cells[0]).toMatchObject({ marks: [{ kind: 'violation' }] });
  });
});
