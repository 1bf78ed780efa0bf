import { describe, expect, it } from 'vitest';
import type { TimeKeeper } from './tick-clock';
import { TickClock } from './tick-clock';

class Times implements TimeKeeper {
  constructor(public times: number[] = []) {}

  scaleTimes(scale: (time: number) => number): void {
    this.times = this.times.map(scale);
  }

  forEachTime(visit: (time: number) => void): void {
    this.times.forEach(visit);
  }
}

describe('the clock of a dump', () => {
  it('counts ticks from the first stamp', () => {
    const clock = new TickClock(() => []);
    expect([clock.advance(500), clock.ticks()]).toEqual([true, 0]);
    expect([clock.advance(750), clock.ticks()]).toEqual([true, 250]);
    expect([clock.advance(749), clock.ticks()]).toEqual([false, 250]);
    expect([clock.advance(750), clock.ticks()]).toEqual([true, 250]);
  });

  it('makes the tick coarser beyond 2^53 and finer again where a time needs it', () => {
    const kept = new Times();
    const clock = new TickClock(() => [kept]);
    const second = 10n ** 15n;
    const keep = (stamp: bigint): void => {
      expect(clock.advance(stamp)).toBe(true);
      const ticks = clock.ticks();
      kept.times.push(ticks);
    };
    clock.advance(0);
    keep(5n * second);
    keep(3600n * second);
    expect([clock.divisor, kept.times]).toEqual([5n * second, [1, 720]]);
    keep(3600n * second + 1_000_000n);
    expect([clock.divisor, kept.times]).toEqual([1_000_000n, [5e9, 36e11, 36e11 + 1]]);
  });

  it('does not mind stamps whose times are not kept', () => {
    const kept = new Times([1000]);
    const clock = new TickClock(() => [kept]);
    clock.advance(0n);
    for (let i = 1n; i < 100n; i++) clock.advance(9_007_199_254_740_993n * i);
    clock.advance(2_000_000_000_000_000_000n);
    expect(clock.ticks()).toBe(2_000_000_000_000_000);
    expect([clock.divisor, kept.times]).toEqual([1000n, [1]]);
  });

  it('refuses what no tick is exact for, and keeps the latest exact one', () => {
    const kept = new Times([1]);
    const clock = new TickClock(() => [kept]);
    clock.advance(0);
    clock.advance(7);
    clock.advance(10n ** 20n + 1n);
    expect(() => clock.ticks()).toThrow(
      expect.objectContaining({ name: 'CaptureError', code: 'time-range' }),
    );
    expect(clock.ticks()).toBe(7);
    expect(kept.times).toEqual([1]);
  });

  it('rounds the end of the record up', () => {
    const kept = new Times([4, 8]);
    const clock = new TickClock(() => [kept]);
    clock.advance(0);
    clock.advance(36_028_797_018_963_969n);
    expect(clock.endTicks()).toBe(Number.MAX_SAFE_INTEGER);
  });
});
