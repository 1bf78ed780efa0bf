import { ticksAtSeconds } from './time-scale';
import type { Tape } from '#shared/contract/tape-payload';

/** A stretch of which a person says what the hand did, or that it is left out. Ticks. */
export interface StatedSpan {
  readonly startTicks: number;
  readonly endTicks: number;
  /** As written on the tape: `rest`, `stroke x 100 mm`, `closed path`, `left out`. */
  readonly name: string;
}

interface StatedMap {
  readonly declared?: readonly {
    readonly kind: 'rest' | 'stroke' | 'closed-path';
    readonly startS: number;
    readonly endS: number;
    readonly axis?: 'x' | 'y';
    readonly lengthMm?: number;
  }[];
  readonly excluded?: readonly { readonly startS: number; readonly endS: number }[];
}

/** The stretches a line map states, in order of time. */
export function statedSpans(tape: Tape, map: StatedMap): readonly StatedSpan[] {
  const spanOf = (span: { startS: number; endS: number }, name: string): StatedSpan => ({
    startTicks: ticksAtSeconds(tape, span.startS),
    endTicks: ticksAtSeconds(tape, span.endS),
    name,
  });
  const declared = (map.declared ?? []).map((span) => {
    const axis = span.axis === undefined ? '' : ` ${span.axis}`;
    const length = span.lengthMm === undefined ? '' : ` ${span.lengthMm} mm`;
    return spanOf(span, span.kind === 'closed-path' ? 'closed path' : `${span.kind}${axis}${length}`);
  });
  const excluded = (map.excluded ?? []).map((span) => spanOf(span, 'left out'));
  return [...declared, ...excluded].sort((a, b) => a.startTicks - b.startTicks);
}
