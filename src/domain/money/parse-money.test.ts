import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseMoney, typedMoney } from './parse-money';

describe('an amount as typed', () => {
  it.each([
    ['437', 'EUR', 43700],
    ['437.5', 'EUR', 43750],
    ['437,50', 'EUR', 43750],
    ['1 250.00', 'SEK', 125000],
    ['437', 'JPY', 437],
    ['1.234', 'KWD', 1234],
    ['0.05', 'GBP', 5],
  ])('%s %s', (text, currency, minor) => {
    expect(parseMoney(text, currency)).toEqual({ ok: true, money: { minor, currency } });
  });

  it.each([
    ['', 'EUR'],
    ['-5', 'EUR'],
    ['4.375', 'EUR'],
    ['437.5', 'JPY'],
    ['1,250.00', 'EUR'],
    ['12e3', 'EUR'],
    ['437', 'XYZ'],
  ])('%s %s is refused', (text, currency) => {
    expect(parseMoney(text, currency).ok).toBe(false);
  });

  it('comes back as it was written into a field', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 10_000_000 }),
        fc.constantFrom('EUR', 'JPY', 'KWD'),
        (minor, currency) => {
          expect(parseMoney(typedMoney({ minor, currency }), currency)).toEqual({
            ok: true,
            money: { minor, currency },
          });
        },
      ),
    );
  });
});
