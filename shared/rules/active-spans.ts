import type { Decoded } from '../decode/decoded';
import type { Span } from '../time/ticks';

/** A stretch in which the device is at work. */
export interface ActiveSpan extends Span {
  /** `start`: from RTS ON to the end of the reply; `motion`: packets that follow one another. */
  readonly kind: 'start' | 'motion';
}

/** Packets closer together than this are one stretch of work, seconds (house). */
const JOINED_WITHIN_S = 0.1;

/** Where the device starts or reports, in order of their begin within each kind. Source: rules.md 9, LVL-7, and 10, PWR-2. */
export function activeSpans(decoded: Decoded, ticksPerSecond: number): ActiveSpan[] {
  const starts = decoded.resets.map((reset): ActiveSpan => {
    const endTicks = reset.identificationEndTicks ?? reset.windowEndTicks;
    return { kind: 'start', startTicks: reset.onTicks, endTicks };
  });
  return [...starts, ...motionSpans(decoded, JOINED_WITHIN_S * ticksPerSecond)];
}

function motionSpans({ packets, characters }: Decoded, pause: number): ActiveSpan[] {
  const spans: ActiveSpan[] = [];
  let from = -1;
  let to = -1;
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    const start = characters.startTicks[first];
    if (from >= 0 && start - to > pause) {
      spans.push({ kind: 'motion', startTicks: from, endTicks: to });
      from = -1;
    }
    if (from < 0) from = start;
    to = characters.endTicks[first + packets.characterCount[p] - 1];
  }
  if (from >= 0) spans.push({ kind: 'motion', startTicks: from, endTicks: to });
  return spans;
}
