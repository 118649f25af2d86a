import { invariant } from './invariant';

/** A unit's serial number: `H3`, 147 as `H3-0147`. Past 9999 it grows by a digit. */
export function formatSerial(prefix: string, n: number): string {
  return `${prefix}-${padded(n, 4)}`;
}

/** A certificate's number: 2027, 412 as `TC-2027-00412`. */
export function formatCertificateNumber(year: number, n: number): string {
  return `TC-${padded(year, 4)}-${padded(n, 5)}`;
}

/**
 * What was scanned or typed, as it stands on labels: capitals, no spaces, plain hyphens. After the first hyphen
 * a group made of digits and their look-alikes (O for 0, I and L for 1) is read as digits; what stands before it
 * is a prefix with letters of its own and stays. A number without a hyphen that begins with a digit is read the same way.
 */
export function normaliseScan(text: string): string {
  const [prefix = '', ...groups] = text
    .normalize('NFKC')
    .replace(/\s+/gu, '')
    .replace(/[\u2010-\u2015\u2212_]/gu, '-')
    .toUpperCase()
    .split('-');
  if (groups.length === 0) return /^\d/.test(prefix) ? asDigits(prefix) : prefix;
  return [prefix, ...groups.map(asDigits)].join('-');
}

function asDigits(group: string): string {
  return /^[\dOIL]+$/.test(group) ? group.replace(/O/g, '0').replace(/[IL]/g, '1') : group;
}

function padded(n: number, width: number): string {
  invariant(Number.isSafeInteger(n) && n > 0, `a number of a series is a whole number above zero, not ${n}`);
  return String(n).padStart(width, '0');
}
