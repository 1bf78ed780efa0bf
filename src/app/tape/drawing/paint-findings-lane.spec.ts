import { describe, expect, it } from 'vitest';
import { VERDICT_GLYPHS } from './glyphs';
import { composeModel, LATE_REPLY, viewOf, WHEEL } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';

const model = composeModel(LATE_REPLY);
const reply = (model.tape.resets[1].replyTicks ?? 0) * model.tape.tickS;
const index = model.findings.findIndex((finding) => finding.verdict === 'violation');
const view = viewOf(model, reply - 0.05, reply + 0.03);

describe('the head of a finding', () => {
  it('carries the glyph of its verdict in its colour', () => {
    const paths = paintAll(model, view).data.paths();
    const diamond = VERDICT_GLYPHS.violation[0].path;
    const ring = VERDICT_GLYPHS.pass[0].path;
    expect(paths.some((path) => path.data === diamond && path.colour === 'violation')).toBe(true);
    expect(paths.some((path) => path.data === ring && path.colour === 'pass')).toBe(true);
  });

  it('stands on a plate when selected', () => {
    const { data } = paintAll(model, { ...view, selection: { kind: 'finding', index } });
    const [plate] = data.rects('violationContainer');
    expect(plate[3]).toBe(22);
    expect(data.texts().find((text) => text.text === 'HSK-1')?.colour).toBe('onViolationContainer');
  });
});

describe('stems', () => {
  it('are solid for a violation and dotted for a pass', () => {
    const { data } = paintAll(model, view);
    const dots = data
      .of('stroke')
      .filter((call) => call.strokeStyle === 'pass' && call.dash.join() === '1,3');
    expect(dots.length).toBeGreaterThan(0);
    expect(data.rects('violation').some(([, , width, height]) => width === 1 && height > 60)).toBe(true);
  });
});

describe('the wash of a selected span', () => {
  it('lies under everything else', () => {
    const packet = model.tape.packets.buttons.findIndex((state) => state === 1);
    const start = model.packetStarts[packet] * model.tape.tickS;
    const selection = { kind: 'packet', index: packet } as const;
    const { data } = paintAll(model, viewOf(model, start - 0.01, start + 0.06, { selection }));
    const [firstFill] = data.of('fillRect');
    expect(firstFill.fillStyle).toBe('primaryContainer');
    expect(firstFill.alpha).toBeLessThan(1);
  });

  it('of a lost packet spans its characters, with a bar above the findings', () => {
    const wheel = composeModel(WHEEL);
    const lost = wheel.findings.findIndex((finding) => finding.rule === 'PKT-5');
    const start = wheel.findings[lost].startTicks * wheel.tape.tickS;
    const selection = { kind: 'finding', index: lost } as const;
    const { data } = paintAll(wheel, viewOf(wheel, start - 0.02, start + 0.06, { selection }));
    const width =
      ((wheel.findings[lost].endTicks - wheel.findings[lost].startTicks) * wheel.tape.tickS * 948) / 0.08;
    const wash = data.rects('violationContainer').find(([, , , height]) => height > 100);
    expect(wash?.[2]).toBeCloseTo(width, 3);
    expect(
      data.rects('violation').some(([, , w, height]) => height === 3 && Math.abs(w - width) < 0.01),
    ).toBe(true);
  });
});
