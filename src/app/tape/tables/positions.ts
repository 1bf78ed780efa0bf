import { formatFigure } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import { secondsAt } from '../drawing/time-scale';

/** A position on the file's clock in seconds to the microsecond, groups of three parted by a thin gap of layout: `0.417|220`. */
export function positionOf(model: TapeModel, ticks: number): string {
  return formatFigure(secondsAt(model.tape, ticks), 6);
}

/** Milliseconds with two decimals. */
export function ms(model: TapeModel, ticks: number): string {
  return formatFigure(ticks * model.tape.tickS * 1e3, 2);
}

/** `L · ·`: which of left, middle, right are held. */
export function heldText(buttons: number): string {
  const letters = ['L', 'M', 'R'].map((letter, bit) => ((buttons >> bit) & 1 ? letter : '·'));
  return `${letters.join(' ')}${(buttons >> 3) & 1 ? ' 4' : ''}`;
}
