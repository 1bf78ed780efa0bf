import type { Span } from '../time/ticks';
import type { TimeKeeper } from './tick-clock';

/** The stretches between `$dumpoff` and `$dumpon`. */
export class VcdGaps implements TimeKeeper {
  private readonly closed: { startTicks: number; endTicks: number }[] = [];
  private openedAt: number | null = null;

  open(ticks: number): void {
    this.openedAt ??= ticks;
  }

  close(ticks: number): void {
    if (this.openedAt === null) return;
    if (ticks > this.openedAt) this.closed.push({ startTicks: this.openedAt, endTicks: ticks });
    this.openedAt = null;
  }

  toSpans(endTicks: number): readonly Span[] {
    this.close(endTicks);
    return this.closed;
  }

  scaleTimes(scale: (time: number) => number): void {
    for (const gap of this.closed) {
      gap.startTicks = scale(gap.startTicks);
      gap.endTicks = scale(gap.endTicks);
    }
    if (this.openedAt !== null) this.openedAt = scale(this.openedAt);
  }

  forEachTime(visit: (time: number) => void): void {
    for (const gap of this.closed) {
      visit(gap.startTicks);
      visit(gap.endTicks);
    }
    if (this.openedAt !== null) visit(this.openedAt);
  }
}
