import { describe, expect, it } from 'vitest';
import { edgeLimit, edgeScale, layOutEdges, samplePercent } from './edge-stems';
import { layOutLanes } from './lanes';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';

const biased = composeModel({ ...LATE_REPLY, biasPercent: 20, rateErrorPercent: 2 });
const reply = (biased.tape.resets[1].replyTicks ?? 0) * biased.tape.tickS;
const view = viewOf(biased, reply - 0.002, reply + 0.022);

describe('edges against their due places', () => {
  it('are late to mark where spaces are stretched, each judged with one sample of doubt', () => {
    const toMark = layOutEdges(biased, view).filter((edge) => edge.level === 1);
    const doubt = samplePercent(biased);
    expect(doubt).toBeCloseTo(0.12, 2);
    expect(toMark.length).toBeGreaterThan(2);
    for (const edge of toMark) {
      expect(edge.displacement).toBeGreaterThan(1);
      const isDecided = Math.abs(edge.displacement - 5) > doubt;
      expect(edge.verdict).toBe(!isDecided ? 'inconclusive' : edge.displacement > 5 ? 'violation' : 'pass');
    }
    expect(toMark.some((edge) => edge.verdict === 'violation')).toBe(true);
  });

  it('are judged by the limit of gross distortion at the nominal rate', () => {
    const nominal = { ...view, edgeReference: 'nominal' } as const;
    expect(edgeLimit(biased, view)).toBe(5);
    expect(edgeLimit(biased, nominal)).toBe(biased.limits.grossDistortionLimit);
    const [measured] = layOutEdges(biased, view);
    const [other] = layOutEdges(biased, nominal);
    expect(other.dueTicks).not.toBe(measured.dueTicks);
  });

  it('have room for the limit in their lane', () => {
    const lane = layOutLanes(biased, view).find((item) => item.id === 'edges');
    if (lane === undefined) throw new Error('there is an Edges lane');
    const { zeroY, pxPerPercent, range } = edgeScale(biased, view, lane);
    expect(range).toBe(8);
    expect(zeroY - range * pxPerPercent).toBeGreaterThan(lane.topPx);
  });
});

describe('the Edges lane', () => {
  it('writes values in the colour of their verdict and says which rate it goes by', () => {
    const { paper, data } = paintAll(biased, view);
    const values = data.texts().filter((text) => /^\+\d+\.\d$/.test(text.text));
    expect(values.length).toBeGreaterThan(1);
    expect(values.some((text) => text.colour === 'violation')).toBe(true);
    expect(paper.saying()).toContain('measured rate');
    expect(paintAll(biased, { ...view, edgeReference: 'nominal' }).paper.saying()).toContain('nominal rate');
  });
});
