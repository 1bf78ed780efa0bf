import { describe as group, expect, it } from 'vitest';
import { describe, describeTape } from './describe';
import { composeModel, LATE_REPLY, SILENT, viewOf, WHEEL } from './testing/composed-tape';

const model = composeModel(LATE_REPLY);

group('words for the live region', () => {
  it('name the tape and its window', () => {
    expect(describeTape(model, 'LW-0412', viewOf(model, 0.394, 0.475).window)).toBe(
      'Tape of LW-0412, 0.394 to 0.475 s',
    );
  });

  it('say a packet with position, characters, movement and buttons', () => {
    expect(describe(model, { kind: 'packet', index: 0 })).toMatch(
      /^Packet 0, 0\.\d{3} \d{3} s, 4C 09 3C, right 9, up 4$/,
    );
    const pressed = model.held[0].packets[0];
    expect(describe(model, { kind: 'packet', index: pressed })).toContain('no movement, left button down');
  });

  it('say which way the wheel turned', () => {
    const wheel = composeModel(WHEEL);
    const texts = [0, 1].map((index) => describe(wheel, { kind: 'packet', index }));
    expect(texts[0]).toContain('wheel 3 steps towards the user');
    expect(texts[1]).toContain('wheel 2 steps away from the user');
  });

  it('say a finding with its verdict and message', () => {
    const index = model.replies[1].finding;
    expect(describe(model, { kind: 'finding', index })).toMatch(
      /^HSK-1, violation, blocking, 0\.\d{3} \d{3} s: The reply began 1\.62/,
    );
  });

  it('say what a character belongs to', () => {
    const [first] = model.tape.resets[0].identification;
    expect(describe(model, { kind: 'character', index: first })).toContain('4D, of the identification');
    const inPacket = model.tape.packets.firstCharacter[0];
    expect(describe(model, { kind: 'character', index: inPacket })).toContain('of packet 0');
  });

  it('say a reset with pulse, reply and verdict', () => {
    expect(describe(model, { kind: 'reset', index: 1 })).toMatch(
      /pulse 104\.2 ms, reply after 15\.62 ms, identification M3, violation$/,
    );
    expect(describe(composeModel(SILENT), { kind: 'reset', index: 0 })).toContain('no reply');
  });

  it('say nothing of what is not there', () => {
    expect(describe(model, { kind: 'packet', index: 9999 })).toBe('');
    expect(describe(model, { kind: 'finding', index: -1 })).toBe('');
  });
});
