import { TestBed } from '@angular/core/testing';
import { PaintPace } from './paint-pace';

describe('PaintPace', () => {
  beforeEach(() => vi.useFakeTimers());
  afterEach(() => vi.useRealTimers());
  const make = () => TestBed.runInInjectionContext(() => new PaintPace());

  it('stays fine while frames come in time', () => {
    const pace = make();
    for (let t = 0; t < 1000; t += 16) pace.painted(t);
    expect(pace.isCoarse()).toBe(false);
  });

  it('goes coarse where a movement misses frames, and fine again at rest', () => {
    const pace = make();
    for (let t = 0; t < 200; t += 40) pace.painted(t);
    expect(pace.isCoarse()).toBe(true);
    vi.advanceTimersByTime(500);
    expect(pace.isCoarse()).toBe(false);
  });

  it('does not take a pause for a missed frame', () => {
    const pace = make();
    for (let t = 0; t < 5000; t += 500) pace.painted(t);
    expect(pace.isCoarse()).toBe(false);
  });
});
