import { minorDigitsOf } from './currencies';
import type { Money } from './money';

/**
 * Reads an amount as people type it, `437`, `437.50` or `437,50`, in a currency of ISO 4217. More digits after
 * the point than the currency has are refused, never rounded.
 */
export function parseMoney(
  text: string,
  currency: string,
): { ok: true; money: Money } | { ok: false; reason: string } {
  const digits = minorDigitsOf(currency);
  if (digits === null) return { ok: false, reason: `${currency} is not a currency that we know.` };
  const match = /^(\d{1,11})(?:[.,](\d+))?$/.exec(text.replace(/\s/g, ''));
  const [, whole = '', rest = ''] = match ?? [];
  if (match === null || rest.length > digits) {
    const example = digits === 0 ? '437' : `437.${'50'.padEnd(digits, '0').slice(0, digits)}`;
    return { ok: false, reason: `Enter an amount in ${currency}, such as ${example}.` };
  }
  return { ok: true, money: { minor: Number(whole + rest.padEnd(digits, '0')), currency } };
}

/** An amount as it stands in a field to be typed over: `437.50`. */
export function typedMoney({ minor, currency }: Money): string {
  const digits = minorDigitsOf(currency) ?? 0;
  const size = String(minor).padStart(digits + 1, '0');
  return digits === 0 ? size : `${size.slice(0, -digits)}.${size.slice(-digits)}`;
}
