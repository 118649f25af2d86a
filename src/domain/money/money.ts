import { invariant } from '~/lib/invariant';
import { minorDigitsOf } from './currencies';

/** An amount in whole minor units of an ISO 4217 currency (`{ minor: 43700, currency: 'EUR' }` is 437 euro). */
export interface Money {
  minor: number;
  currency: string;
}

/** An amount; throws where it is not whole or the currency is unknown. */
export function money(minor: number, currency: string): Money {
  invariant(Number.isSafeInteger(minor), `an amount is a whole number of minor units, not ${minor}`);
  invariant(minorDigitsOf(currency) !== null, `${currency} is a currency of ISO 4217`);
  return { minor: minor === 0 ? 0 : minor, currency };
}

/** The sum of two amounts of one currency. */
export function addMoney(a: Money, b: Money): Money {
  invariant(a.currency === b.currency, `${a.currency} and ${b.currency} are not added`);
  return money(a.minor + b.minor, a.currency);
}

/** The first amount less the second, of one currency. */
export function subtractMoney(a: Money, b: Money): Money {
  return addMoney(a, money(-b.minor, b.currency));
}

/** An amount times the fraction `numerator / denominator` of whole numbers, rounded half to even, exactly. */
export function multiplyMoney(a: Money, numerator: number, denominator = 1): Money {
  invariant(Number.isSafeInteger(numerator), `${numerator} is a whole number`);
  return money(divideHalfEven(BigInt(a.minor) * BigInt(numerator), denominator), a.currency);
}

/** `dividend / divisor` to the nearest whole number; a half goes to the even one. */
export function divideHalfEven(dividend: bigint, divisor: number): number {
  invariant(Number.isSafeInteger(divisor) && divisor > 0, `${divisor} is a whole number above zero`);
  const by = BigInt(divisor);
  const negative = dividend < 0n;
  const size = negative ? -dividend : dividend;
  const whole = size / by;
  const twice = (size % by) * 2n;
  const up = twice > by || (twice === by && whole % 2n === 1n);
  const rounded = whole + (up ? 1n : 0n);
  return Number(negative ? -rounded : rounded);
}
