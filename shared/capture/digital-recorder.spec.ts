import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { HIGH, LOW, UNKNOWN } from './capture';
import { DigitalRecorder } from './digital-recorder';

describe('the recorder of a digital channel', () => {
  it('starts unknown, and takes changes at tick 0 for the level it starts with', () => {
    const recorder = new DigitalRecorder('a', { busySpacing: 0 }, false);
    recorder.change(0, LOW);
    recorder.change(0, HIGH);
    recorder.change(5, LOW);
    expect(recorder.finish()).toMatchObject({
      initialLevel: HIGH,
      ticks: Float64Array.of(5),
      levels: Uint8Array.of(LOW),
    });
    expect(new DigitalRecorder('b', { busySpacing: 0 }, false).finish()).toMatchObject({
      initialLevel: UNKNOWN,
      edgeCount: 0,
    });
  });

  it('keeps what a list of the last level of each instant says', () => {
    const changes = fc.array(fc.tuple(fc.integer({ min: 0, max: 3 }), fc.constantFrom(LOW, HIGH, UNKNOWN)), {
      maxLength: 60,
    });
    fc.assert(
      fc.property(changes, (list) => {
        const recorder = new DigitalRecorder('a', { busySpacing: 0 }, false);
        const lastOf = new Map<number, number>([[0, UNKNOWN]]);
        let time = 0;
        for (const [step, level] of list) {
          time += step;
          recorder.change(time, level);
          lastOf.set(time, level);
        }
        const levels = [...lastOf];
        const edges = levels.filter(([, level], i) => i > 0 && level !== levels[i - 1][1]);
        const channel = recorder.finish();
        expect(channel.initialLevel).toBe(levels[0][1]);
        expect(Array.from(channel.ticks, (tick, i) => [tick, channel.levels[i]])).toEqual(edges);
        expect(channel.edgeCount).toBe(edges.length);
      }),
    );
  });

  it('counts changes it no longer keeps', () => {
    const recorder = new DigitalRecorder('clock', { busySpacing: 10 }, false);
    for (let i = 0; i < 300_000; i++) recorder.change(i, i & 1);
    expect(recorder.isTooBusy).toBe(true);
    recorder.countBusyChanges(3, 300_002, 0);
    recorder.change(300_003, 1);
    recorder.change(300_003, 0);
    expect(recorder.finish()).toMatchObject({ edgeCount: 300_002, isTooBusy: true });
  });
});
