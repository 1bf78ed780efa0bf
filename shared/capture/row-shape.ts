import type { ColumnSink } from './csv-channels';
import type { CsvRow } from './csv-row';

/** What a byte of a row may be in the next row: the same … */
export const FIXED = 0;
/** … another digit where it was a digit (the time, and columns that are no channels) … */
const DIGIT = 1;
/** … or, from here on, the level of the channel with the index `kind − CELL`. */
export const CELL = 2;

/** Channels whose cells are told apart in a byte. */
const MOST_CELLS = 253;

/** Where the parts of a row stand that was read cell by cell, as offsets from its first byte. */
export interface RowShape {
  /** Bytes of the row with its end of line. */
  readonly length: number;
  /** The time cell, without quotes; empty where rows have no times. All channel cells stand behind it. */
  readonly timeStart: number;
  readonly timeEnd: number;
  /** Place of the only character of each channel's cell. */
  readonly cells: readonly number[];
  /** `FIXED`, `DIGIT` or `CELL + channel` for each byte. */
  readonly kinds: Uint8Array;
}

/** Null: the row is not one of single characters behind a time. `timeColumn`: −1 where rows have no times. */
export function findRowShape(
  row: CsvRow,
  length: number,
  timeColumn: number,
  sinks: readonly ColumnSink[],
  fieldCount: number,
): RowShape | null {
  const timeStart = timeColumn < 0 ? 0 : row.starts[timeColumn] - row.start;
  const timeEnd = timeColumn < 0 ? 0 : row.ends[timeColumn] - row.start;
  if (sinks.length > MOST_CELLS) return null;
  for (const { column } of sinks) {
    const isSingle = row.ends[column.index] === row.starts[column.index] + 1;
    if (!isSingle || row.starts[column.index] - row.start < timeEnd) return null;
  }
  const cells: number[] = [];
  const kinds = new Uint8Array(length);
  for (let index = 0; index < fieldCount; index++) {
    const from = row.starts[index] - row.start;
    if (sinks[cells.length]?.column.index === index) {
      kinds[from] = CELL + cells.length;
      cells.push(from);
    } else {
      kinds.fill(DIGIT, from, row.ends[index] - row.start);
    }
  }
  return { length, timeStart, timeEnd, cells, kinds };
}
