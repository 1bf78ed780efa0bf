import { describe, expect, it } from 'vitest';
import {
  formatFigure,
  formatMs,
  formatPlain,
  formatSeconds,
  formatSigned,
  hexByte,
  shortPosition,
} from './figures';

describe('figures', () => {
  it('have the minus of print and no negative zero', () => {
    expect(formatFigure(-4, 0)).toBe('\u22124');
    expect(formatFigure(-0.004, 2)).toBe('0.00');
  });

  it('carry a sign where one is asked', () => {
    expect([9, -4, 0].map((value) => formatSigned(value))).toEqual(['+9', '\u22124', '0']);
    expect(formatSigned(0.04, 1)).toBe('0.0');
  });

  it('drop zeros that say nothing', () => {
    expect([14, 2.5, 0.85, -3].map((value) => formatPlain(value, 2))).toEqual([
      '14',
      '2.5',
      '0.85',
      '\u22123',
    ]);
  });

  it('come in groups of three behind the point, without characters between', () => {
    expect(formatSeconds(0.41722)).toEqual(['0.417', '220']);
    expect(formatSeconds(5, 0)).toEqual(['5']);
    expect(formatSeconds(12.3456, 4)).toEqual(['12.345', '6']);
  });

  it('show milliseconds with two decimals, three below one', () => {
    expect(formatMs(0.01562)).toBe('15.62 ms');
    expect(formatMs(0.000_4)).toBe('0.400 ms');
  });

  it('name a position on the clock of the file', () => {
    expect(shortPosition({ tickS: 1e-6, originS: 0.4 }, 17_220)).toBe('0.417 s');
  });

  it('write bytes with two digits', () => {
    expect(hexByte(9)).toBe('09');
    expect(hexByte(0x6c)).toBe('6C');
  });
});
