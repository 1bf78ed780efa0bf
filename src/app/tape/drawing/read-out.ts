import { formatFigure, formatPlain } from './figures';
import { countBefore } from '#shared/time/sorted-search';
import { secondsAt } from './time-scale';
import type { TapeModel } from './tape-model';

/** What the dividers measure. */
export interface DividerReadOut {
  /** Positions on the file's clock, seconds; null where that divider is not set. */
  readonly aS: number | null;
  readonly bS: number | null;
  /** Between the two, never negative; null unless both are set. */
  readonly spanS: number | null;
  /** In bits at the nominal rate. */
  readonly bits: number | null;
  /** One over the span; null where it is 0. */
  readonly hertz: number | null;
  /** Packets that begin between the two, A included, B not. */
  readonly packets: number | null;
  readonly packetsPerSecond: number | null;
}

export function readOut(model: TapeModel, dividers: { a: number | null; b: number | null }): DividerReadOut {
  const { a, b } = dividers;
  const aS = a === null ? null : secondsAt(model.tape, a);
  const bS = b === null ? null : secondsAt(model.tape, b);
  if (a === null || b === null) {
    return { aS, bS, spanS: null, bits: null, hertz: null, packets: null, packetsPerSecond: null };
  }
  const ticks = Math.abs(b - a);
  const spanS = ticks * model.tape.tickS;
  const from = countBefore(model.packetStarts, Math.min(a, b));
  const to = countBefore(model.packetStarts, Math.max(a, b));
  return {
    aS,
    bS,
    spanS,
    bits: model.tape.framing === null ? null : ticks / model.nominalBitTicks,
    hertz: spanS > 0 ? 1 / spanS : null,
    packets: to - from,
    packetsPerSecond: spanS > 0 ? (to - from) / spanS : null,
  };
}

/** A span: `25.400 ms`, `2.600 s` from one second on, `12.5 µs` below a tenth of a millisecond. */
export function formatSpan(seconds: number, decimals = 3): string {
  if (seconds >= 1) return `${formatFigure(seconds, 3)} s`;
  if (seconds > 0 && seconds < 1e-4) return `${formatPlain(seconds * 1e6, 2)} µs`;
  return `${formatFigure(seconds * 1e3, decimals)} ms`;
}

/** The parts written on the beam: span, bits, hertz; from one second on the span alone. */
export function beamTexts(readOut: DividerReadOut): string[] {
  const { spanS, bits, hertz } = readOut;
  if (spanS === null) return [];
  if (spanS >= 1) return [formatSpan(spanS)];
  const isShort = bits !== null && bits < 10;
  const texts = [formatSpan(spanS, isShort ? 3 : 2)];
  if (bits !== null) texts.push(`${formatFigure(bits, isShort ? 3 : 1)} bits`);
  if (hertz !== null && !isShort) texts.push(`${formatFigure(hertz, 1)} Hz`);
  return texts;
}

/** The read-out as one line of text for the clipboard. */
export function readOutText(readOut: DividerReadOut): string {
  const parts: string[] = [];
  if (readOut.aS !== null) parts.push(`A ${formatFigure(readOut.aS, 6)} s`);
  if (readOut.bS !== null) parts.push(`B ${formatFigure(readOut.bS, 6)} s`);
  if (readOut.spanS !== null) parts.push(`span ${formatSpan(readOut.spanS)}`);
  if (readOut.bits !== null) parts.push(`${formatFigure(readOut.bits, 2)} bits`);
  if (readOut.hertz !== null) parts.push(`${formatFigure(readOut.hertz, 1)} Hz`);
  if (readOut.packets !== null) parts.push(`${readOut.packets} packets`);
  return parts.join(', ');
}
