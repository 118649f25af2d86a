/** Ohm, farad, henry or hertz. */
export type ValueUnit = 'ohm' | 'F' | 'H' | 'Hz';

export interface PartValue {
  /** In the unit itself: 4700 for `4k7`, 8.2e-12 for `8p2`. */
  value: number;
  /** Null where neither the text nor the kind of part says it. */
  unit: ValueUnit | null;
  /** What follows the value: a rating, a tolerance, a material (`100` of `56p/100`, `1%`, `16V`). */
  rest: string;
}

const EXPONENTS: Readonly<Record<string, number>> = {
  p: -12,
  n: -9,
  u: -6,
  m: -3,
  k: 3,
  K: 3,
  M: 6,
  G: 9,
};

const UNITS: Readonly<Record<string, ValueUnit>> = {
  ohm: 'ohm',
  ohms: 'ohm',
  r: 'ohm',
  f: 'F',
  h: 'H',
  hz: 'Hz',
};

// 4k7, R47, 4u7F: the letter stands where the point would.
const LETTER_AS_POINT = /^(\d*)([pnumkKMGRrFH])(\d+)\s*(ohms?|[FfHhRr]|[Hh][Zz])?(?![A-Za-z0-9.,:])/;
// 4700, 4.7k, 4,7 kohm, 27 MHz, 49.9R
const PLAIN = /^(\d+)(?:([.,])(\d+))?\s*(?:([pnumkKMG])?(ohms?|[FfHhRr]|[Hh][Zz])?)(?![A-Za-z0-9.,:])/;

/**
 * Reads the value of a resistor, capacitor, inductor or crystal in the spellings of schematics: with the letter as
 * the point (IEC 60062: `4k7`, `R47`, `8p2`) or plain (`4.7k`, `4,7 kohm`, `4700`, `0.1uF 50V`). The prefix of the
 * designator (`R`, `C`, `L`, `X`) gives the unit where the text leaves it out; a bare number is a value only of a resistor.
 */
export function parseValue(
  text: string,
  designatorPrefix = '',
): ({ ok: true } & PartValue) | { ok: false; reason: string } {
  const plain = text
    .trim()
    .replace(/[µμ]/g, 'u')
    .replace(/[ΩΩ]/g, 'ohm')
    .replace(/(\d)\s+(?=[kKMG]?ohm)/g, '$1');
  const home = homeUnit(designatorPrefix);
  return withLetter(plain, text, home) ?? withoutLetter(plain, text, home) ?? notOne(text);
}

function withLetter(plain: string, text: string, home: ValueUnit | null) {
  const match = LETTER_AS_POINT.exec(plain);
  if (!match) return null;
  const [all, whole = '', letter = '', fraction = '', named = ''] = match;
  const own = unitOfLetter(letter);
  // Coils are marked 4R7 for 4.7 µH: widespread, not of the standard.
  const coil = home === 'H' && own === 'ohm';
  const unit = coil ? 'H' : (own ?? UNITS[named.toLowerCase()] ?? home);
  const exponent = coil ? -6 : (EXPONENTS[letter] ?? 0);
  if (unit === 'F' && exponent > 0) return notOne(text);
  return found(`${whole || '0'}.${fraction}`, exponent, unit, plain.slice(all.length));
}

function withoutLetter(plain: string, text: string, home: ValueUnit | null) {
  const match = PLAIN.exec(plain);
  if (!match) return null;
  const [all, whole = '', point = '', fraction = '', prefix = '', named = ''] = match;
  const unit = UNITS[named.toLowerCase()] ?? home;
  if (prefix === '' && named === '') {
    if (point === ',' && fraction.length === 3) {
      return { ok: false as const, reason: `“${text}” can be read as a decimal or as thousands` };
    }
    if (home !== null && home !== 'ohm') {
      return { ok: false as const, reason: `“${text}” has no unit` };
    }
  }
  const exponent = EXPONENTS[prefix] ?? 0;
  if (unit === 'F' && exponent > 0) return notOne(text);
  return found(fraction === '' ? whole : `${whole}.${fraction}`, exponent, unit, plain.slice(all.length));
}

function found(digits: string, exponent: number, unit: ValueUnit | null, rest: string) {
  // Let the reader of numbers do the scaling: 8.2 * 1e-12 is not 8.2e-12.
  const value = Number(`${digits}e${exponent}`);
  return { ok: true as const, value, unit, rest: rest.replace(/^[\s/]+/, '').trim() };
}

function notOne(text: string) {
  return { ok: false as const, reason: `“${text}” is not a value with a unit` };
}

function unitOfLetter(letter: string): ValueUnit | null {
  if (letter === 'R' || letter === 'r') return 'ohm';
  if (letter === 'F') return 'F';
  return letter === 'H' ? 'H' : null;
}

function homeUnit(prefix: string): ValueUnit | null {
  switch (prefix.toUpperCase()) {
    case 'R':
    case 'RV':
    case 'RN':
      return 'ohm';
    case 'C':
      return 'F';
    case 'L':
      return 'H';
    case 'X':
    case 'Y':
      return 'Hz';
    default:
      return null;
  }
}
