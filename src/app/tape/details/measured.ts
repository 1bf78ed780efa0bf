import { formatFigure } from '../drawing/figures';

/** Decimals of a measured value by its unit; others get three digits. */
const DECIMALS: Readonly<Record<string, number>> = {
  ms: 2,
  '%': 1,
  '% of a bit': 1,
  characters: 0,
  resets: 0,
};

/** A measured value the way a person at a bench says it. */
export function measuredText(value: number, unit: string | null): string {
  const known = DECIMALS[unit ?? ''];
  if (known !== undefined) return formatFigure(value, known);
  return Number.isInteger(value) ? formatFigure(value, 0) : formatFigure(Number(value.toPrecision(3)), 2);
}

/** An uncertainty, never rounded to nothing: two digits. */
export function uncertaintyText(value: number): string {
  if (value === 0) return '0';
  const digits = Math.max(0, 1 - Math.floor(Math.log10(Math.abs(value))));
  return formatFigure(value, Math.min(6, digits));
}

/** The unit where it is not part of the sentence. */
export function unitText(unit: string | null): string {
  return unit ?? '';
}
