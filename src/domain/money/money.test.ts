import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatMoney, formatMoneyInFull } from './format-money';
import { addMoney, divideHalfEven, money, multiplyMoney, subtractMoney } from './money';
import { lineTotal, orderTotal, taxOf } from './order-total';

const eur = (minor: number) => money(minor, 'EUR');

describe('amounts', () => {
  it.each([
    [1n, 2, 0],
    [3n, 2, 2],
    [5n, 2, 2],
    [7n, 2, 4],
    [-1n, 2, 0],
    [-3n, 2, -2],
    [-5n, 2, -2],
    [10n, 4, 2],
    [11n, 4, 3],
    [9n, 4, 2],
    [0n, 7, 0],
  ])('%s / %s is %s, half to even', (dividend, divisor, expected) => {
    expect(divideHalfEven(dividend, divisor) + 0).toBe(expected);
  });

  it('of two currencies are not added', () => {
    expect(() => addMoney(eur(1), money(1, 'GBP'))).toThrow('EUR and GBP are not added');
  });

  it.each([
    [0.5, 'EUR'],
    [2 ** 53, 'EUR'],
    [1, 'eur'],
    [1, 'ABC'],
  ])('%s %s is refused', (minor, currency) => {
    expect(() => money(minor, currency)).toThrow('Invariant broken');
  });

  it('stay exact where a double would not', () => {
    expect(multiplyMoney(eur(9_007_199_254_740_991), 190_000, 1_000_000).minor).toBe(1_711_367_858_400_788);
  });

  const amount = fc.integer({ min: -1e9, max: 1e9 }).map(eur);
  it('add in any order and come back by subtraction', () => {
    fc.assert(
      fc.property(amount, amount, amount, (a, b, c) => {
        expect(addMoney(a, b)).toEqual(addMoney(b, a));
        expect(addMoney(addMoney(a, b), c)).toEqual(addMoney(a, addMoney(b, c)));
        expect(subtractMoney(addMoney(a, b), b)).toEqual(a);
      }),
    );
  });

  it('are rounded to within half a unit, and the same way below zero', () => {
    fc.assert(
      fc.property(
        fc.bigInt({ min: -(10n ** 12n), max: 10n ** 12n }),
        fc.integer({ min: 1, max: 1e6 }),
        (n, d) => {
          const rounded = divideHalfEven(n, d);
          const twiceError = (BigInt(rounded) * BigInt(d) - n) * 2n;
          const size = twiceError < 0n ? -twiceError : twiceError;
          expect(size <= BigInt(d)).toBe(true);
          if (size === BigInt(d)) expect(Math.abs(rounded % 2)).toBe(0);
          expect(divideHalfEven(-n, d) + rounded).toBe(0);
        },
      ),
    );
  });
});

describe('an order', () => {
  const line = (unitMinor: number, quantity: number, taxPpm: number) => ({
    unitPrice: eur(unitMinor),
    quantity,
    taxPpm,
  });

  it('is taxed line by line', () => {
    expect(lineTotal(line(43_700, 2, 190_000)).minor).toBe(87_400);
    expect(taxOf(line(43_700, 2, 190_000)).minor).toBe(16_606);
    expect(taxOf(line(50, 1, 190_000)).minor).toBe(10);
    expect(taxOf(line(50, 1, 50_000)).minor).toBe(2);
    expect(taxOf(line(1000, 1, 88_750)).minor).toBe(89);
  });

  it('of three small lines is the sum of the rounded taxes, not the rounded sum', () => {
    const lines = [line(50, 1, 50_000), line(50, 1, 50_000), line(50, 1, 50_000)];
    expect(orderTotal(lines, 'EUR')).toEqual({ net: eur(150), tax: eur(6), total: eur(156) });
  });

  it('without lines is nothing, in its currency', () => {
    expect(orderTotal([], 'JPY').total).toEqual(money(0, 'JPY'));
  });

  it('is always the sum of its lines, in any order of lines', () => {
    const lines = fc.array(
      fc
        .record({
          unit: fc.integer({ min: 0, max: 1e7 }),
          quantity: fc.integer({ min: 1, max: 50 }),
          taxPpm: fc.integer({ min: 0, max: 300_000 }),
        })
        .map(({ unit, quantity, taxPpm }) => line(unit, quantity, taxPpm)),
    );
    fc.assert(
      fc.property(lines, (all) => {
        const { net, tax, total } = orderTotal(all, 'EUR');
        let sum = 0;
        for (const one of all) sum += lineTotal(one).minor + taxOf(one).minor;
        expect(total.minor).toBe(sum);
        expect(net.minor + tax.minor).toBe(total.minor);
        expect(orderTotal([...all].reverse(), 'EUR')).toEqual({ net, tax, total });
      }),
    );
  });
});

describe('an amount on the screen', () => {
  const read = (text: string) => text.replace(/\u00a0/g, ' ');

  it.each([
    [43_700, 'EUR', '€ 437', '€ 437.00'],
    [10_050, 'EUR', '€ 100.50', '€ 100.50'],
    [5, 'EUR', '€ 0.05', '€ 0.05'],
    [0, 'EUR', '€ 0', '€ 0.00'],
    [-4800, 'EUR', '−€ 48', '−€ 48.00'],
    [123_456_789, 'GBP', '£ 1,234,567.89', '£ 1,234,567.89'],
    [100_000, 'USD', 'US$ 1,000', 'US$ 1,000.00'],
    [125_000, 'SEK', 'SEK 1,250', 'SEK 1,250.00'],
    [65_000, 'JPY', 'JPY 65,000', 'JPY 65,000'],
    [150_050, 'HUF', 'HUF 1,500.50', 'HUF 1,500.50'],
    [1_234_500, 'KWD', 'KWD 1,234.500', 'KWD 1,234.500'],
    [12_345, 'CLF', 'CLF 1.2345', 'CLF 1.2345'],
  ])('%s %s', (minor, currency, short, full) => {
    expect(read(formatMoney(money(minor, currency)))).toBe(short);
    expect(read(formatMoneyInFull(money(minor, currency)))).toBe(full);
  });
});
