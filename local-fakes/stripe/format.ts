/** A sum as people read it, with its ISO 4217 code: `EUR 437.00`. */
export function formatMinor(amountMinor: number, currency: string): string {
  const code = currency.toUpperCase();
  const format = new Intl.NumberFormat('en', { style: 'currency', currency: code, currencyDisplay: 'code' });
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2;
  return format.format(amountMinor / 10 ** digits);
}

export function formatTime(ms: number): string {
  return `${new Date(ms).toISOString().slice(0, 19).replace('T', ' ')} UTC`;
}
