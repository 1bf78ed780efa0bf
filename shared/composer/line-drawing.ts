/** A two-level line drawn as instants at which it toggles, in nanoseconds; pulses may be laid over anything already drawn. */
export class LineDrawing {
  private readonly toggles: number[] = [];
  private readonly unknown: { from: number; to: number }[] = [];
  private level: boolean;

  constructor(readonly initial: boolean) {
    this.level = initial;
  }

  get current(): boolean {
    return this.level;
  }

  /** From `at` on; instants come in ascending order. */
  set(at: number, level: boolean): void {
    if (level === this.level) return;
    this.level = level;
    this.toggles.push(Math.round(at));
  }

  /** Inverts the line for a while, whatever else is drawn there. */
  pulse(from: number, to: number): void {
    this.toggles.push(Math.round(from), Math.round(to));
  }

  hide(from: number, to: number): void {
    this.unknown.push({ from: Math.round(from), to: Math.round(to) });
  }

  /** Changes in order of time: [instant, level], level 0, 1 or 2 (unknown); the first is at 0. */
  finish(): readonly (readonly [number, number])[] {
    const marks = new Set<number>([0]);
    const sorted = [...this.toggles].sort((a, b) => a - b);
    for (const toggle of sorted) marks.add(toggle);
    for (const { from, to } of this.unknown) marks.add(from).add(to);
    const changes: [number, number][] = [];
    let level = this.initial;
    let next = 0;
    for (const at of [...marks].sort((a, b) => a - b)) {
      for (; next < sorted.length && sorted[next] <= at; next++) level = !level;
      const isHidden = this.unknown.some(({ from, to }) => at >= from && at < to);
      const shown = isHidden ? 2 : Number(level);
      if (changes.length === 0 || changes[changes.length - 1][1] !== shown) changes.push([at, shown]);
    }
    return changes;
  }
}
