import { describe, expect, it } from 'vitest';
import { wrapWords } from './paint-incident';
import type { TapeModel } from './tape-model';
import { composeModel, LATE_REPLY, viewOf, WHEEL } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';
import type { RecordingContext } from './testing/recording-context';

const model = composeModel(LATE_REPLY);
const wheel = composeModel(WHEEL);

function around(of: TapeModel, ticks: number, more = {}): RecordingContext {
  const start = ticks * of.tape.tickS;
  return paintAll(of, viewOf(of, start - 0.02, start + 0.06, more)).data;
}

describe('a packet flag', () => {
  it('says number and movement with signs', () => {
    const said = around(model, model.packetStarts[0])
      .texts()
      .map((text) => text.text);
    expect(said).toEqual(expect.arrayContaining(['#0', 'Δx', '+9', 'Δy', '\u22124']));
  });

  it('is framed in ink-blue when selected', () => {
    const data = around(model, model.packetStarts[0], { selection: { kind: 'packet', index: 0 } });
    expect(data.of('stroke').some((call) => call.strokeStyle === 'primary')).toBe(true);
    expect(data.rects('primaryContainer')).toHaveLength(1);
  });

  it('has one heavy rung for each step of the wheel', () => {
    const rungs = (packet: number): number => {
      const start = wheel.packetStarts[packet] * wheel.tape.tickS;
      const view = viewOf(wheel, start - 0.005, start + 0.035);
      return paintAll(wheel, view)
        .data.rects('ink')
        .filter(([, , width, height]) => width === 15 && height === 3).length;
    };
    expect(rungs(0)).toBe(3);
    expect(rungs(1)).toBe(2);
  });
});

describe('a nameplate', () => {
  it('says what the device calls itself and what that means', () => {
    const said = around(model, model.tape.resets[1].replyTicks ?? 0).saying();
    expect(said).toContain('M3 | three buttons | 3 or 4 characters');
  });
});

describe('a lost packet', () => {
  it('is a dashed vermilion frame with the reason', () => {
    const data = around(wheel, wheel.incidentStarts[0]);
    expect(data.texts().find((text) => text.text === 'no packet')?.colour).toBe('violation');
    expect(data.of('stroke').some((call) => call.strokeStyle === 'violation' && call.dash.length === 2)).toBe(
      true,
    );
    expect(data.saying()).toContain(wheel.tape.incidents[0].reason.split(' ')[1]);
  });

  it('breaks the reason between words and says when something is left out', () => {
    const style = { face: 'mono', sizePx: 10, weight: 400 } as const;
    expect(wrapWords('one two three four', 54, style, 3)).toEqual(['one two', 'three', 'four']);
    expect(wrapWords('one two three four', 54, style, 2)).toEqual(['one two', 'three…']);
  });
});

describe('the survey', () => {
  it('draws the mean movement of a column from the centre line and a dot at its tip', () => {
    const { data } = paintAll(model, viewOf(model, 0, 12));
    const dots = data.of('arc').filter((call) => call.args[2] === 1.6);
    expect(dots.length).toBeGreaterThan(5);
    expect(dots.length).toBeLessThan(model.tape.packets.count);
  });
});
