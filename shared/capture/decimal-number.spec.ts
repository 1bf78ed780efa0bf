import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DecimalNumber } from './decimal-number';
import { bytesOf } from './spec-texts';

function parse(text: string, comma = false): string | null {
  const number = new DecimalNumber();
  const bytes = bytesOf(text);
  return number.parse(bytes, 0, bytes.length, comma)
    ? `${number.wide ?? number.mantissa}e${-number.scale}`
    : null;
}

describe('a decimal number', () => {
  it.each([
    ['0', '0e0'],
    ['12.50', '1250e-2'],
    ['-0.001', '-1e-3'],
    ['+.5', '5e-1'],
    ['5.', '5e0'],
    ['1e6', '1e6'],
    ['1.25E-3', '125e-5'],
    ['123456789012345', '123456789012345e0'],
    ['1234567890123456789', '1234567890123456789e0'],
    ['1700000000.123456', '1700000000123456e-6'],
    ['1700000000.1234567', '17000000001234567e-7'],
  ])('is taken apart without rounding: %s', (text, parts) => expect(parse(text)).toBe(parts));

  it.each([
    ['0.18000000000000002', '18e-2'],
    ['0.30000000000000004', '3e-1'],
    ['0.9999999999999999', '1e0'],
    ['12345.600000000001', '123456e-1'],
    ['100.00000000000001', '100e0'],
  ])('loses the noise of a printed double: %s', (text, parts) => expect(parse(text)).toBe(parts));

  it.each([
    '',
    '.',
    '-',
    '+',
    'e5',
    '1e',
    '1e5000',
    '0x10',
    '1 2',
    '1.2.3',
    '1,2',
    'NaN',
    'inf',
    '--1',
    '1-',
    '9'.repeat(100),
  ])('is not %j', (text) => expect(parse(text)).toBeNull());

  it('may have a decimal comma', () => {
    expect(parse('1,25', true)).toBe('125e-2');
    expect(parse('1,25E-05', true)).toBe('125e-7');
  });

  it('may have its thousands apart where that is plain', () => {
    expect(parse('1.234.567,5', true)).toBe('12345675e-1');
    expect(parse('1,234.5')).toBe('12345e-1');
    expect(parse('1.23,5', true)).toBeNull();
    expect(parse('1,234')).toBeNull();
  });

  it('is what the language reads, for up to 15 digits', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -999_999_999, max: 999_999_999 }),
        fc.integer({ min: 0, max: 15 }),
        (mantissa, places) => {
          const text = (mantissa / 10 ** places).toFixed(places);
          expect(Number(parse(text) ?? NaN)).toBe(Number(text) + 0);
        },
      ),
    );
  });
});
