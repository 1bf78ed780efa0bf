import { describe, expect, it } from 'vitest';
import { findNext, parseFind, stepFinding } from './find-on-tape';
import { composeModel, LATE_REPLY, WHEEL } from './testing/composed-tape';

const model = composeModel(LATE_REPLY);

describe('what find understands', () => {
  it('are characters, figures, buttons, rules and times', () => {
    expect(parseFind('4D')).toEqual({ kind: 'characters', values: [0x4d] });
    expect(parseFind('4d 33')).toEqual({ kind: 'characters', values: [0x4d, 0x33] });
    expect(parseFind('dx>100')).toEqual({ kind: 'figure', figure: 'dx', comparison: '>', value: 100 });
    expect(parseFind('Δy ≤ −5')).toEqual({ kind: 'figure', figure: 'dy', comparison: '<=', value: -5 });
    expect(parseFind('wheel=3')).toEqual({ kind: 'figure', figure: 'wheel', comparison: '=', value: 3 });
    expect(parseFind(' Left ')).toEqual({ kind: 'button', button: 'left' });
    expect(parseFind('hsk-1')).toEqual({ kind: 'rule', rule: 'HSK-1' });
    expect(parseFind('0.417 s')).toEqual({ kind: 'time', seconds: 0.417 });
    expect(parseFind('0.417 220 s')).toEqual({ kind: 'time', seconds: 0.41722 });
    expect(parseFind('417 ms')).toEqual({ kind: 'time', seconds: 0.417 });
  });

  it('is nothing else', () => {
    for (const text of ['', 'x', '4', 'dx>', 'HSK', 'hello', '12:40'])
      expect(parseFind(text)).toBeUndefined();
  });
});

describe('findNext', () => {
  const query = (text: string, from: number): ReturnType<typeof findNext> => {
    const parsed = parseFind(text);
    return parsed === undefined ? null : findNext(model, parsed, from);
  };

  it('finds the next identification and goes on from the beginning behind the last', () => {
    const [first, second] = model.tape.resets.map((reset) => reset.identification[0]);
    const begin = query('4D', 0);
    expect(begin?.selection).toEqual({ kind: 'character', index: first });
    expect(query('4D', begin?.ticks ?? 0)?.selection).toEqual({ kind: 'character', index: second });
    expect(query('4D 33', model.tape.endTicks)?.selection).toEqual({ kind: 'character', index: first });
  });

  it('finds packets by their figures', () => {
    const found = query('dx=9', 0);
    expect(found?.selection).toEqual({ kind: 'packet', index: 0 });
    expect(query('dx>126', 0)).toBeNull();
    expect(query('wheel=1', 0)).toBeNull();
  });

  it('finds presses, findings and places', () => {
    expect(query('left', 0)?.selection).toEqual({ kind: 'packet', index: model.held[0].packets[0] });
    expect(query('right', 0)).toBeNull();
    const late = query('HSK-1', model.tape.resets[1].onTicks);
    expect(late?.ticks).toBe(model.tape.resets[1].replyTicks);
    expect(query('0.5 s', 0)?.selection).toBeNull();
    expect(query('900 s', 0)).toBeNull();
  });

  it('finds the wheel', () => {
    const wheel = composeModel(WHEEL);
    const parsed = parseFind('w<0');
    const found = parsed === undefined ? null : findNext(wheel, parsed, 0);
    expect(found?.selection?.kind).toBe('packet');
    expect(wheel.tape.packets.wheel[found?.selection?.index ?? -1]).toBeLessThan(0);
  });
});

describe('stepFinding', () => {
  const isViolation = (index: number): boolean => model.findings[index].verdict === 'violation';

  it('goes both ways and round', () => {
    const violations = [...model.findingOrder].filter(isViolation);
    expect(stepFinding(model, 0, 1, isViolation)).toBe(violations[0]);
    expect(stepFinding(model, 0, -1, isViolation)).toBe(violations.at(-1));
    expect(stepFinding(model, model.tape.endTicks, 1, isViolation)).toBe(violations[0]);
    expect(stepFinding(model, 0, 1, () => false)).toBeNull();
  });
});
