import type { LaneId } from './lanes';
import { TimeScale } from './time-scale';
import type { TapeWindow } from './time-scale';

/** What is selected; indexes into the findings, packets, characters and resets of the model. */
export type TapeSelection =
  | { readonly kind: 'finding'; readonly index: number }
  | { readonly kind: 'packet'; readonly index: number }
  | { readonly kind: 'character'; readonly index: number }
  | { readonly kind: 'reset'; readonly index: number };

/** What of the tape is on the screen, in CSS px of the whole canvas: the gutter lies at its left and is part of `widthPx`. */
export interface TapeView {
  readonly window: TapeWindow;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly gutterPx: number;
  readonly isPhone: boolean;
  readonly selection: TapeSelection | null;
  /** In ticks. */
  readonly dividers: { readonly a: number | null; readonly b: number | null };
  readonly hover: { readonly xPx: number; readonly yPx: number } | null;
  readonly hiddenLanes: readonly LaneId[];
  /** Lanes not named keep their own order behind those that are. */
  readonly laneOrder?: readonly LaneId[];
  /** Stretch of the ruler that is being drawn up, in ticks. */
  readonly drag?: { readonly fromTicks: number; readonly toTicks: number } | null;
  /** What has the keyboard's focus on the canvas. */
  readonly focus?: TapeSelection | null;
  /** Where the Edges lane takes the due places from; the measured rate if left out. */
  readonly edgeReference?: 'measured' | 'nominal';
}

/** Width of the paper: the canvas without its gutter. */
export function paperWidth(view: Pick<TapeView, 'widthPx' | 'gutterPx'>): number {
  return Math.max(1, view.widthPx - view.gutterPx);
}

/** The time scale of a view; x counts from the left edge of the canvas. */
export function timeScaleOf(view: Pick<TapeView, 'window' | 'widthPx' | 'gutterPx'>): TimeScale {
  return new TimeScale(view.window, paperWidth(view), view.gutterPx);
}
