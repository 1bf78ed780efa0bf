import type { TapeSelection } from '../drawing/view';
import type { GlyphKind } from '../../ui/verdict-glyph';

export interface TableColumn {
  readonly head: string;
  /** CSS grid track. */
  readonly width: string;
  readonly align?: 'right';
  /** Figures, codes and times. */
  readonly isMono?: boolean;
  /** Seconds to the microsecond: the last three digits stand a little apart. */
  readonly isPosition?: boolean;
  /** Left out where there is little room. */
  readonly isRoomy?: boolean;
}

export interface CellMark {
  readonly kind: GlyphKind;
  readonly text: string;
}

/** One cell: text, or verdicts with their codes, or the plate of an identification, which takes two columns: null follows it. */
export type TableCell =
  null | string | { readonly marks: readonly CellMark[] } | { readonly plate: string; readonly text: string };

export interface TableRow {
  readonly cells: readonly TableCell[];
  readonly selection: TapeSelection | null;
  /** Where the row stands, in ticks. */
  readonly startTicks: number;
  readonly endTicks: number;
}

/** A table that mirrors the tape, row by row, in order of time unless it says otherwise. */
export interface TapeTable {
  readonly columns: readonly TableColumn[];
  readonly count: number;
  readonly empty: string;
  rowAt(index: number): TableRow;
  /** First row that stands at or after an instant; −1 where the order is another one. */
  indexAt(ticks: number): number;
  /** The row of a selected thing; −1 where it has none here. */
  indexOf(selection: TapeSelection): number;
}
