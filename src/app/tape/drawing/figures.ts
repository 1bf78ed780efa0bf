import type { Tape } from '#shared/contract/tape-payload';
import { secondsAt } from './time-scale';

/** The minus of print, U+2212. */
export const MINUS = '\u2212';

/** A figure with the given decimals and a real minus; never "−0". */
export function formatFigure(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? MINUS + text : text;
}

/** The same with a sign in front of everything but 0. */
export function formatSigned(value: number, decimals = 0): string {
  const text = formatFigure(value, decimals);
  return value > 0 && Number(text) !== 0 ? `+${text}` : text;
}

/** A figure without needless zeros behind the point. */
export function formatPlain(value: number, mostDecimals = 3): string {
  return formatFigure(Number(value.toFixed(mostDecimals)), 0) === formatFigure(value, mostDecimals)
    ? formatFigure(value, 0)
    : formatFigure(value, mostDecimals).replace(/\.?0+$/, '');
}

/**
 * A position in groups of three behind the point: `['0.417', '220']`. The gaps are laid out, they are no characters.
 */
export function formatSeconds(seconds: number, decimals = 6): readonly string[] {
  const text = formatFigure(seconds, decimals);
  const point = text.indexOf('.');
  if (point < 0) return [text];
  const behind = text.slice(point + 1).match(/\d{1,3}/g) ?? [];
  return [`${text.slice(0, point)}.${behind[0]}`, ...behind.slice(1)];
}

/** Milliseconds with two decimals, as dimension lines show them; three below a millisecond. */
export function formatMs(seconds: number): string {
  const ms = seconds * 1e3;
  return `${formatFigure(ms, Math.abs(ms) < 1 ? 3 : 2)} ms`;
}

/** A position in short: `0.417 s`. */
export function shortPosition(tape: Pick<Tape, 'tickS' | 'originS'>, ticks: number): string {
  return `${formatFigure(secondsAt(tape, ticks), 3)} s`;
}

export function hexByte(value: number): string {
  return value.toString(16).toUpperCase().padStart(2, '0');
}
