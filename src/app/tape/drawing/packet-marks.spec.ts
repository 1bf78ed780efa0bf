import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import type { LaneLayout } from './lanes';
import { layOutPackets } from './packet-marks';
import type { LaneMark } from './packet-marks';
import type { TapeModel } from './tape-model';
import { composeModel, LATE_REPLY, viewOf, WHEEL } from './testing/composed-tape';
import type { TapeView } from './view';
import { timeScaleOf } from './view';

const model = composeModel(LATE_REPLY);

function marksOf(of: TapeModel, view: TapeView): { marks: LaneMark[]; lane: LaneLayout } {
  const lane = layOutLanes(of, view).find((item) => item.id === 'packets');
  if (lane === undefined) throw new Error('there is a Packets lane');
  return { marks: layOutPackets(of, view, lane), lane };
}

const first = model.packetStarts[0] * model.tape.tickS;

describe('flags', () => {
  it('stand at the start of their packet, 136 wide and at most 58 tall, 19 below the lane', () => {
    const view = viewOf(model, first - 0.02, first + 0.06);
    const { marks, lane } = marksOf(model, view);
    const mark = marks.find((item) => item.kind === 'packet' && item.index === 0);
    expect(mark).toMatchObject({ form: 'flag', rect: { y: lane.topPx + 19, width: 136, height: 58 } });
    expect(mark?.rect.x).toBe(timeScaleOf(view).xOf(model.packetStarts[0]));
  });

  it('are 158 wide with a wheel', () => {
    const wheel = composeModel(WHEEL);
    const start = wheel.packetStarts[0] * wheel.tape.tickS;
    const { marks } = marksOf(wheel, viewOf(wheel, start - 0.02, start + 0.06));
    expect(marks.find((item) => item.kind === 'packet')?.rect.width).toBe(158);
  });

  it('stay at the left edge while 160 px of a packet that began before show', () => {
    const { marks } = marksOf(model, viewOf(model, first + 0.004, first + 0.03));
    expect(marks[0].rect.x).toBe(106);
    const gone = marksOf(model, viewOf(model, first + 0.02, first + 0.1)).marks[0];
    expect(gone.rect.x).toBeLessThan(96);
  });

  it('never overlap, at any scale', () => {
    for (const length of [0.03, 0.08, 0.15, 0.25, 0.4, 0.6, 2]) {
      for (const from of [0.2, 0.45, 0.7]) {
        const { marks } = marksOf(model, viewOf(model, from, from + length));
        const flags = marks.filter((mark) => mark.kind !== 'packet' || mark.form !== 'arrow');
        flags.slice(1).forEach((mark, i) => {
          expect(mark.rect.x).toBeGreaterThanOrEqual(flags[i].rect.x + flags[i].rect.width);
        });
      }
    }
  });

  it('become arrows where packets are narrow', () => {
    const { marks } = marksOf(model, viewOf(model, 0.8, 2.5));
    const packets = marks.filter((mark) => mark.kind === 'packet');
    expect(packets.length).toBeGreaterThan(10);
    expect(packets.every((mark) => mark.form === 'arrow')).toBe(true);
  });
});

describe('nameplates', () => {
  const reply = (model.tape.resets[1].replyTicks ?? 0) * model.tape.tickS;

  it('have the double frame where the identification is 70 px wide', () => {
    const { marks } = marksOf(model, viewOf(model, reply - 0.02, reply + 0.06));
    const plate = marks.find((mark) => mark.kind === 'plate');
    expect(plate).toMatchObject({ index: 1, isSmall: false });
    expect(plate?.rect.width).toBeGreaterThan(100);
  });

  it('are small in the survey and at least 30 px apart', () => {
    const { marks } = marksOf(model, viewOf(model, 0, 12));
    expect(marks.map((mark) => mark.kind)).not.toContain('packet');
    expect(marks[0].rect).toMatchObject({ width: 24, height: 16 });
    marks.slice(1).forEach((mark, i) => expect(mark.rect.x - marks[i].rect.x).toBeGreaterThanOrEqual(30));
  });
});

describe('lost packets', () => {
  it('have a frame with room for the reason', () => {
    const wheel = composeModel(WHEEL);
    const start = wheel.incidentStarts[0] * wheel.tape.tickS;
    const { marks } = marksOf(wheel, viewOf(wheel, start - 0.02, start + 0.06));
    expect(marks.find((mark) => mark.kind === 'incident')).toMatchObject({ index: 0, hasFrame: true });
  });
});
