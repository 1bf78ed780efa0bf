import { describe, expect, it } from 'vitest';
import { hasFlags, ringCounts, stickPin, stickScale } from './packet-vectors';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';

const model = composeModel(LATE_REPLY);

describe('the ring', () => {
  it('is the smallest that holds every vector in view', () => {
    const start = model.packetStarts[0] * model.tape.tickS;
    const view = viewOf(model, start - 0.01, start + 0.03);
    expect([model.tape.packets.dx[0], model.tape.packets.dy[0]]).toEqual([9, -4]);
    expect(ringCounts(model, view)).toBe(16);
  });

  it('is the smallest of all where nothing moves', () => {
    expect(ringCounts(model, viewOf(model, 0, 0.05))).toBe(4);
  });
});

describe('arrows without a ring', () => {
  it('have one scale on the whole tape in the survey', () => {
    const here = stickScale(model, viewOf(model, 0, 5), 0.05, 116);
    expect(stickScale(model, viewOf(model, 1, 2), 0.05, 116)).toBe(here);
    expect(model.motion.largestUsual * here).toBeLessThan(58);
  });

  it('come with a pin of a round number of counts, its length true', () => {
    const pin = stickPin(1.3);
    expect(pin.counts).toBe(10);
    expect(pin.lengthPx).toBeCloseTo(13, 9);
  });

  it('give way to flags once a packet of three characters is 70 px wide', () => {
    expect(hasFlags(model, 2.6)).toBe(true);
    expect(hasFlags(model, 2.5)).toBe(false);
  });
});
