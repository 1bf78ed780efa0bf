import { measuredText, uncertaintyText } from './measured';

describe('figures of a finding', () => {
  it.each([
    [15.62, 'ms', '15.62'],
    [-0.0013, '%', '0.0'],
    [3, 'characters', '3'],
    [43.69009, '% of a bit', '43.7'],
    [1.333, null, '1.33'],
  ])('writes %s %s as %s', (value, unit, text) => expect(measuredText(value, unit)).toBe(text));
  it('never rounds an uncertainty away', () => {
    expect(uncertaintyText(0.002562)).toBe('0.0026');
    expect(uncertaintyText(2.4)).toBe('2.4');
    expect(uncertaintyText(0.00000042)).not.toBe('0');
  });
});
