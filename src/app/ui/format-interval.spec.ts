import { formatInterval } from './format-interval';

describe('formatInterval', () => {
  it.each([
    [20e-6, '20 µs'],
    [1.25e-3, '1.25 ms'],
    [4e-9, '4 ns'],
    [34.2181, '34.22 s'],
    [0, '0 s'],
    [-2e-3, '−2 ms'],
  ])('writes %s s as %s', (seconds, text) => expect(formatInterval(seconds)).toBe(text));
});
