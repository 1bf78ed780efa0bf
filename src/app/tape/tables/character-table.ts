import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '#shared/characters/character-table';
import { countBefore } from '#shared/time/sorted-search';
import { hexByte } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import type { FindingsByPlace } from './findings-by-place';
import { marksOf } from './findings-by-place';
import { ms, positionOf } from './positions';
import type { TapeTable } from './table-row';

/** Names of the flags of a character. */
export function errorNames(flags: number): string[] {
  return [
    ...(flags & FRAMING_ERROR ? ['stop element at space'] : []),
    ...(flags & PARITY_ERROR ? ['parity'] : []),
    ...(flags & BREAK_ERROR ? ['break'] : []),
  ];
}

/** Every character received, whole or damaged. */
export function characterTable(model: TapeModel, findings: FindingsByPlace): TapeTable {
  const { characters, packetOfCharacter, resetOfCharacter } = model.tape;
  const dataBits = model.tape.framing?.dataBits ?? 7;
  return {
    columns: [
      { head: 'No.', width: '64px', align: 'right', isMono: true },
      { head: 'Time s', width: '104px', align: 'right', isMono: true, isPosition: true },
      { head: 'After ms', width: '84px', align: 'right', isMono: true, isRoomy: true },
      { head: 'Hex', width: '44px', isMono: true },
      { head: 'Bits, first sent first', width: '140px', isMono: true, isRoomy: true },
      { head: 'Belongs to', width: 'minmax(110px, 1fr)' },
      { head: 'Errors', width: 'minmax(70px, 1fr)' },
      { head: 'Findings', width: 'minmax(90px, 1fr)' },
    ],
    count: characters.count,
    empty: 'No characters. The data line never left mark, or it is not mapped.',
    rowAt: (index) => {
      const startTicks = characters.startTicks[index];
      const packet = packetOfCharacter[index];
      const reset = resetOfCharacter[index];
      const bits = characters.values[index].toString(2).padStart(dataBits, '0');
      return {
        cells: [
          String(index),
          positionOf(model, startTicks),
          index === 0 ? '' : ms(model, startTicks - characters.startTicks[index - 1]),
          hexByte(characters.values[index]),
          [...bits].reverse().join(' '),
          packet >= 0 ? `packet ${packet}` : reset >= 0 ? 'identification' : 'nothing',
          errorNames(characters.errors[index]).join(', '),
          { marks: marksOf(model, findings.ofCharacter.get(index)) },
        ],
        selection: { kind: 'character', index },
        startTicks,
        endTicks: characters.endTicks[index],
      };
    },
    indexAt: (ticks) => countBefore(characters.startTicks, ticks),
    indexOf: (selection) => {
      switch (selection.kind) {
        case 'character':
          return selection.index;
        case 'packet':
          return model.tape.packets.firstCharacter[selection.index];
        case 'reset':
          return model.tape.resets[selection.index].identification[0] ?? -1;
        case 'finding':
          return -1;
      }
    },
  };
}
