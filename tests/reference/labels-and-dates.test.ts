import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkTracking, s10CheckDigit } from '~/domain/dispatch/tracking-number';
import { addDays, isoWeekOf, weekCodeOf } from '~/lib/dates';

// UPU S10 check digit, weights 8 6 4 2 3 5 9 7; the first value read second hand, the others computed from the rule.
describe('UPU S10 (second hand and computed)', () => {
  it.each([
    ['47312482', 9],
    ['12345678', 5],
    ['00000008', 0],
    ['00000000', 5],
    ['00000015', 5],
  ])('%s has check digit %i', (serial, digit) => {
    expect(s10CheckDigit(serial)).toBe(digit);
  });

  it('a thousand numbers from RR473124829PL end with RR473134812PL', () => {
    const numberOf = (n: number) => `RR${n}${s10CheckDigit(String(n))}PL`;
    expect(numberOf(47_312_482)).toBe('RR473124829PL');
    expect(numberOf(47_312_482 + 999)).toBe('RR473134812PL');
    expect(checkTracking('RR473134812PL')).toEqual({ kind: 's10', number: 'RR473134812PL' });
  });

  it('tells every single digit that is mistyped, but where the check digit is 5, which two remainders share', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 99_999_999 }),
        fc.nat(7),
        fc.integer({ min: 1, max: 9 }),
        (n, at, by) => {
          const serial = String(n).padStart(8, '0');
          const digit = s10CheckDigit(serial);
          const mistyped = (Number(serial.charAt(at)) + by) % 10;
          const wrong = `${serial.slice(0, at)}${mistyped}${serial.slice(at + 1)}`;
          fc.pre(digit !== 5);
          expect(checkTracking(`RR${wrong}${digit}PL`).kind).toBe('s10_wrong');
        },
      ),
    );
  });
});

// ISO 8601 weeks: 2004, 2009, 2010 and 2020 read second hand, the rest computed.
describe('ISO 8601 weeks (second hand and computed)', () => {
  it.each([
    ['2005-01-01', 2004, 53, 6, '0453'],
    ['2008-12-29', 2009, 1, 1, '0901'],
    ['2010-01-03', 2009, 53, 7, '0953'],
    ['2024-12-30', 2025, 1, 1, '2501'],
    ['2027-01-04', 2027, 1, 1, '2701'],
  ])('%s is in week %i-%i, day %i, code %s', (day, weekYear, week, weekday, code) => {
    expect(isoWeekOf(day)).toEqual({ weekYear, week, weekday });
    expect(weekCodeOf(day)).toBe(code);
  });

  it('years of 53 weeks are 2004, 2009, 2015, 2020, 2026, 2032 and 2037', () => {
    const long = [];
    for (let year = 2004; year <= 2037; year += 1) {
      if (isoWeekOf(`${year}-12-28`).week === 53) long.push(year);
    }
    expect(long).toEqual([2004, 2009, 2015, 2020, 2026, 2032, 2037]);
  });

  it('weeks follow each other without a gap', () => {
    fc.assert(
      fc.property(fc.integer({ min: -20_000, max: 40_000 }), (days) => {
        const day = addDays('2000-01-03', days);
        const a = isoWeekOf(day);
        const b = isoWeekOf(addDays(day, 1));
        expect(b.weekday).toBe((a.weekday % 7) + 1);
        if (a.weekday !== 7) expect([b.weekYear, b.week]).toEqual([a.weekYear, a.week]);
        else expect(b.week === 1 ? b.weekYear - a.weekYear : b.week - a.week).toBe(1);
      }),
    );
  });
});
