import { describe, expect, it } from 'vitest';
import { beamTexts, formatSpan, readOut, readOutText } from './read-out';
import { composeModel, LATE_REPLY } from './testing/composed-tape';
import { ticksAtSeconds } from './time-scale';

const model = composeModel(LATE_REPLY);
const at = (seconds: number): number => ticksAtSeconds(model.tape, seconds);

describe('what the dividers measure', () => {
  it('is the span in seconds, bits and hertz, whichever comes first', () => {
    const forward = readOut(model, { a: at(0.4462), b: at(0.4716) });
    expect(forward.spanS).toBeCloseTo(0.0254, 9);
    expect(forward.bits).toBeCloseTo(30.48, 6);
    expect(forward.hertz).toBeCloseTo(39.37, 2);
    expect(readOut(model, { a: at(0.4716), b: at(0.4462) }).spanS).toBe(forward.spanS);
  });

  it('is nothing with one divider, and no rate over no time', () => {
    expect(readOut(model, { a: at(0.4), b: null })).toMatchObject({ aS: 0.4, bS: null, spanS: null });
    expect(readOut(model, { a: at(0.4), b: at(0.4) }).hertz).toBeNull();
  });

  it('counts the packets that begin between the two', () => {
    const { packetStarts } = model;
    expect(readOut(model, { a: packetStarts[2], b: packetStarts[7] }).packets).toBe(5);
  });
});

describe('the texts on the beam', () => {
  it('are span, bits and hertz, finer below ten bits, the span alone from a second on', () => {
    expect(beamTexts(readOut(model, { a: at(0.4462), b: at(0.4716) }))).toEqual([
      '25.40 ms',
      '30.5 bits',
      '39.4 Hz',
    ]);
    expect(beamTexts(readOut(model, { a: at(0.1), b: at(0.102555) }))).toEqual(['2.555 ms', '3.066 bits']);
    expect(beamTexts(readOut(model, { a: at(0.1), b: at(1.1) }))).toEqual(['1.000 s']);
  });

  it('use the unit that reads best', () => {
    expect([2.6, 0.0254, 0.000_012_5, 0].map((seconds) => formatSpan(seconds))).toEqual([
      '2.600 s',
      '25.400 ms',
      '12.5 µs',
      '0.000 ms',
    ]);
  });

  it('are joined for the clipboard', () => {
    expect(readOutText(readOut(model, { a: at(0.1), b: at(0.102) }))).toBe(
      'A 0.100000 s, B 0.102000 s, span 2.000 ms, 2.40 bits, 500.0 Hz, 0 packets',
    );
  });
});
