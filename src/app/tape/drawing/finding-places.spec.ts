import { describe, expect, it } from 'vitest';
import { edgesOfCharacter } from './edge-places';
import { composeModel, LATE_REPLY } from './testing/composed-tape';

const model = composeModel({ ...LATE_REPLY, jitterPercent: 3 });
const placeOf = (rule: string, verdict = 'pass'): (typeof model.places)[number] => {
  const index = model.findings.findIndex((finding) => finding.rule === rule && finding.verdict === verdict);
  return model.places[index];
};

describe('the place of a finding', () => {
  it('of the latency is the start of the reply, its stem begins at the reply', () => {
    const place = placeOf('HSK-1', 'violation');
    expect(place.ticks).toBe(model.tape.resets[1].replyTicks);
    expect(place.lane).toBe('reply');
  });

  it('of the pulse is RTS going ON', () => {
    expect(placeOf('HSK-7').ticks).toBe(model.tape.resets[0].onTicks);
    expect(placeOf('HSK-7').lane).toBe('rts');
  });

  it('of the distortion is the worst edge of its character', () => {
    const place = placeOf('FRM-8');
    const line = model.lines.data;
    if (line === undefined) throw new Error('the tape has a data line');
    const edges = edgesOfCharacter(model.tape, line, place.character, model.bitTicks, model.bitTicks);
    const worst = Math.max(...edges.map((edge) => Math.abs(edge.displacement)));
    const own = edges.find((edge) => edge.ticks === place.ticks);
    expect(Math.abs(own?.displacement ?? 0)).toBe(worst);
    expect(worst).toBeGreaterThan(1);
  });
});
