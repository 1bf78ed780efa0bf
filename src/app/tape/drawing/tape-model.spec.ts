import { describe, expect, it } from 'vitest';
import { composeModel, composeTape, LATE_REPLY, LIMITS, SILENT, WHEEL } from './testing/composed-tape';
import { buildTapeModel } from './tape-model';

describe('the model of a tape', () => {
  const model = composeModel(LATE_REPLY);

  it('holds what each reset got for an answer and how it was judged', () => {
    expect(
      model.replies.map((reply) => [
        reply.verdict,
        Math.round((reply.latencyTicks ?? 0) * model.tape.tickS * 1e5) / 100,
      ]),
    ).toEqual([
      ['pass', 13.1],
      ['violation', 15.62],
    ]);
    expect(model.findings[model.replies[1].finding].rule).toBe('HSK-1');
  });

  it('lets the missing reply speak where there is no latency', () => {
    const [reply] = composeModel(SILENT).replies;
    expect(reply.latencyTicks).toBeNull();
    expect(model.findings.length).toBeGreaterThan(0);
    expect(reply.verdict).toBe('violation');
  });

  it('lists findings in order of the places they stand at', () => {
    const ticks = Array.from(model.findingTicks);
    expect(ticks).toEqual([...ticks].sort((a, b) => a - b));
    expect([...model.findingOrder].sort((a, b) => a - b)).toEqual([...model.findings.keys()]);
  });

  it('holds a button from the end of the packet that tells of it to the end of the packet that tells it is up', () => {
    const [left] = model.held;
    const { buttons } = model.tape.packets;
    const pressed = buttons.findIndex((state) => state === 1);
    const released = buttons.findIndex((state, i) => i > pressed && state === 0);
    expect(left.letter).toBe('L');
    expect(Array.from(left.startTicks)).toEqual([model.packetEnds[pressed]]);
    expect(Array.from(left.endTicks)).toEqual([model.packetEnds[released]]);
    expect(Array.from(left.packets)).toEqual([pressed]);
  });

  it('has a line for the fourth button only where there is one', () => {
    expect(model.held.map((button) => button.letter)).toEqual(['L', 'M', 'R']);
    expect(composeModel(WHEEL).held.map((button) => button.letter)).toEqual(['L', 'M', 'R', '4']);
  });

  it('finds the stroke and counts line use inside it only', () => {
    expect(model.runs).toHaveLength(1);
    const { used, span } = model.motion;
    const { firstPacket, lastPacket } = model.runs[0];
    expect(span[firstPacket]).toBe(0);
    expect(span[model.tape.packets.count]).toBe(span[lastPacket]);
    expect(used[lastPacket] / span[lastPacket]).toBeCloseTo(model.runs[0].lineUse, 3);
  });

  it('takes the limits of edges from findings where the page does not say them', () => {
    const { tape, findings } = composeTape(LATE_REPLY);
    const own = buildTapeModel(tape, findings, { replyLimitS: 0.014, lineUseLimit: null });
    expect(own.limits.distortionLimit).toBe(findings.find((finding) => finding.rule === 'FRM-8')?.limit);
    expect(buildTapeModel(tape, [], LIMITS).limits.grossDistortionLimit).toBeNull();
  });

  it('holds incidents where their characters are', () => {
    const wheel = composeModel(WHEEL);
    expect(wheel.tape.incidents.length).toBeGreaterThan(0);
    const [incident] = wheel.tape.incidents;
    expect(wheel.incidentStarts[0]).toBe(wheel.tape.characters.startTicks[incident.firstCharacter]);
    expect(wheel.incidentEnds[0]).toBeGreaterThan(wheel.incidentStarts[0]);
  });
});
