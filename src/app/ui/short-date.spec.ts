import { shortDate } from './short-date';

const now = new Date(2025, 9, 23, 12, 0);
const at = (...parts: [number, number, number, number, number]) =>
  shortDate(new Date(...parts).toISOString(), now);

describe('shortDate', () => {
  it('gives the time of today', () => expect(at(2025, 9, 23, 9, 5)).toBe('09:05'));
  it('calls the day before Yesterday', () => expect(at(2025, 9, 22, 23, 59)).toBe('Yesterday'));
  it('leaves out the year of now', () => expect(at(2025, 9, 14, 8, 0)).toBe('14 Oct'));
  it('names another year', () => expect(at(2024, 9, 14, 8, 0)).toBe('14 Oct 2024'));
});
