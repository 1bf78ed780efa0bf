import { describe, expect, it } from 'vitest';
import { statedSpans } from './stated-spans';
import { composeModel, LATE_REPLY } from './testing/composed-tape';

describe('stated spans', () => {
  const { tape } = composeModel(LATE_REPLY);

  it('are named by what the hand did, in order of time', () => {
    const spans = statedSpans(tape, {
      declared: [
        { kind: 'stroke', axis: 'x', lengthMm: 100, startS: 0.5, endS: 0.7 },
        { kind: 'rest', startS: 0.1, endS: 0.2 },
        { kind: 'closed-path', startS: 0.8, endS: 0.9 },
      ],
      excluded: [{ startS: 0.3, endS: 0.4 }],
    });
    expect(spans.map(({ name }) => name)).toEqual(['rest', 'left out', 'stroke x 100 mm', 'closed path']);
    expect(spans[0].startTicks * tape.tickS + tape.originS).toBeCloseTo(0.1, 9);
  });

  it('are none where the map states none', () => expect(statedSpans(tape, {})).toEqual([]));
});
