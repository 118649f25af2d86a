import { describe, expect, it } from 'vitest';
import { addDays, dayOf, formatDay, formatDayOf, formatTimeOf } from './dates';

describe('days', () => {
  it('are written day, month, year', () => {
    expect(formatDay('2027-03-09')).toBe('9 March 2027');
    expect(formatDay('2024-12-31')).toBe('31 December 2024');
  });

  it.each(['2027-02-29', '2027-13-01', '9 March 2027', ''])('refuse %j', (day) => {
    expect(() => formatDay(day)).toThrow('Invariant broken');
  });

  it('are counted over months, leap days and clock changes', () => {
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29');
    expect(addDays('2027-03-27', 2)).toBe('2027-03-29');
    expect(addDays('2027-01-01', -1)).toBe('2026-12-31');
  });
});

describe('instants', () => {
  const late = new Date('2027-03-09T23:30:00.000Z');

  it('fall on the day of the zone asked for', () => {
    expect(dayOf(late, 'UTC')).toBe('2027-03-09');
    expect(dayOf(late, 'Europe/Berlin')).toBe('2027-03-10');
    expect(dayOf(late, 'America/Denver')).toBe('2027-03-09');
    expect(formatDayOf(late, 'Europe/Berlin')).toBe('10 March 2027');
  });

  it('are shown with the zone named, in summer and winter', () => {
    expect(formatTimeOf(late, 'UTC')).toBe('9 March 2027, 23:30 UTC');
    expect(formatTimeOf(late, 'Europe/Berlin')).toBe('10 March 2027, 00:30 CET');
    expect(formatTimeOf(new Date('2027-07-01T12:00:00Z'), 'Europe/Berlin')).toBe('1 July 2027, 14:00 CEST');
  });
});
