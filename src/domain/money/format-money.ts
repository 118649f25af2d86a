import { invariant } from '~/lib/invariant';
import { minorDigitsOf } from './currencies';
import type { Money } from './money';

// Only signs that no second currency in use shares as they are written here; the rest show their code.
const SIGNS: ReadonlyMap<string, string> = new Map([
  ['EUR', '€'],
  ['GBP', '£'],
  ['USD', 'US$'],
]);
const NO_BREAK_SPACE = '\u00a0';
const MINUS = '\u2212';

/** An amount for reading: `€ 437`, `€ 437.50`, `SEK 1,250`. Whole amounts go without their zeros. */
export function formatMoney(amount: Money): string {
  return format(amount, true);
}

/** An amount for a column of figures, always with all its digits: `€ 437.00`. */
export function formatMoneyInFull(amount: Money): string {
  return format(amount, false);
}

function format({ minor, currency }: Money, short: boolean): string {
  const digits = minorDigitsOf(currency);
  invariant(digits !== null && Number.isSafeInteger(minor), `${minor} ${currency} is an amount`);
  const size = String(Math.abs(minor)).padStart(digits + 1, '0');
  const cut = size.length - digits;
  const whole = size.slice(0, cut).replace(/\B(?=(\d{3})+$)/g, ',');
  const rest = size.slice(cut);
  const figure = rest === '' || (short && /^0*$/.test(rest)) ? whole : `${whole}.${rest}`;
  return `${minor < 0 ? MINUS : ''}${SIGNS.get(currency) ?? currency}${NO_BREAK_SPACE}${figure}`;
}
