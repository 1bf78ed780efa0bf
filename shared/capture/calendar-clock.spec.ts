import { describe, expect, it } from 'vitest';
import { CalendarClock, isClockText, isDateText } from './calendar-clock';

describe('a time of day', () => {
  // Source: ISO 8601 (year first, T, zones); the rest is practice.
  it.each([
    ['1970-01-02T00:00:01Z', '86401'],
    ['1970-01-02 00:00:01.250', '86401.250'],
    ['02.01.1970 00:00:01,5', '86401.5'],
    ['01/02/1970 00:00:01.5', '86401.5'],
    ['13/01/1970 00:00:00', '1036800'],
    ['1970/01/01 01:00:00.000001+01:00', '0.000001'],
    ['1970-01-01T00:00:00-0130', '5400'],
    ['12:30:00.123456789', '45000.123456789'],
    ['12:30:00,25', '45000.25'],
    ['12:30:00:250', '45000.250'],
    ['01:30:00.5 PM', '48600.5'],
    ['12:00:01 AM', '1'],
    ['01:02.5', '62.5'],
    ['100:00:00.5', '360000.5'],
    ['1969-12-31 23:59:55.25', '-4.75'],
  ])('%s is %s seconds', (text, seconds) => {
    expect(new CalendarClock().toSeconds(text)).toBe(seconds);
    expect(isClockText(text)).toBe(true);
  });

  it.each([
    '12:30',
    '12:61:00',
    '12:00:61',
    '13:00:00 pm',
    '2031-02-29 12:00:00',
    '2031-13-01 12:00:00',
    'a:b:c',
    '1:2:3:4:5',
    '',
  ])('%j is none', (text) => {
    expect(new CalendarClock().toSeconds(text)).toBeNull();
    expect(isClockText(text)).toBe(false);
  });

  it('goes on past midnight where there is no date', () => {
    const clock = new CalendarClock();
    const stamps = ['23:59:59.5', '00:00:00.5', '23:59:59.0', '00:00:01'];
    expect(stamps.map((stamp) => clock.toSeconds(stamp))).toEqual([
      '86399.5',
      '86400.5',
      '172799.0',
      '172801',
    ]);
  });

  it('that falls back a little stays behind', () => {
    const clock = new CalendarClock();
    expect(['12:00:01', '12:00:00'].map((stamp) => clock.toSeconds(stamp))).toEqual(['43201', '43200']);
  });
});

describe('a date', () => {
  it.each(['2032-02-29', '29.02.2032', '02/29/2032', '2032/2/9'])('is told: %s', (text) => {
    expect(isDateText(text)).toBe(true);
  });

  it.each(['2031-02-29', '31.04.2031', '1.5', '2031', '12:00:00', '192.168.1.10'])(
    'is not told: %s',
    (text) => {
      expect(isDateText(text)).toBe(false);
    },
  );
});
