import type { Dialect } from './cells';

const TAB = 9;
const BLANK = 32;
const NO_BREAK_BLANK = 160;
const QUOTE = 34;
const PLUS = 43;
const MINUS = 45;
const TYPOGRAPHIC_MINUS = 0x2212;
const ZERO = 48;
const SEPARATORS: Record<Dialect['separator'], number> = { tab: TAB, ';': 59, ',': 44, blank: BLANK };

/** Powers of ten that a double holds exactly. */
const EXACT = Array.from({ length: 23 }, (_, power) => Number(`1e${String(power)}`));
/** Digits that a double holds exactly. */
const EXACT_DIGITS = 15;

/** A row of numbers as it was scanned. */
export interface ScannedRow {
  values: Float64Array;
  /** Unit glued to each number; empty where there is none. */
  units: string[];
}

const isDigit = (code: number): boolean => code >= ZERO && code <= 57;
const isUnitLetter = (code: number): boolean =>
  (code >= 97 && code <= 122) || (code >= 65 && code <= 90) || code === 0xb5 || code === 0x3bc || code === 47;

/**
 * A scanner of rows that have exactly `width` numbers, many times faster than cutting each line into cells. It
 * takes what is plainly such a row and leaves everything else, odd or wrong, to the caller: false says no more
 * than that. A number comes out as `Number` would read it.
 *
 * @returns a function of a line's place in the text, which fills the row given
 */
export function rowScanner(
  text: string,
  { separator, decimal }: Dialect,
  width: number,
): (start: number, end: number, row: ScannedRow) => boolean {
  const mark = SEPARATORS[separator];
  const point = decimal === '.' ? 46 : 44;
  const byBlanks = separator === 'blank';
  const tabIsBlank = separator !== 'tab';

  const skipBlanks = (from: number, end: number): number => {
    let at = from;
    while (at < end) {
      const code = text.charCodeAt(at);
      if (code !== BLANK && code !== NO_BREAK_BLANK && !(tabIsBlank && code === TAB)) break;
      at += 1;
    }
    return at;
  };

  return (start, end, row) => {
    let at = skipBlanks(start, end);
    for (let column = 0; column < width; column += 1) {
      const quoted = at < end && text.charCodeAt(at) === QUOTE;
      if (quoted) at = skipBlanks(at + 1, end);
      const numberStart = at;
      let code = at < end ? text.charCodeAt(at) : -1;
      const isNegative = code === MINUS || code === TYPOGRAPHIC_MINUS;
      if (isNegative || code === PLUS) at += 1;

      let mantissa = 0;
      let digits = 0;
      let decimals = 0;
      while (at < end && isDigit((code = text.charCodeAt(at)))) {
        mantissa = mantissa * 10 + (code - ZERO);
        digits += 1;
        at += 1;
      }
      if (at < end && text.charCodeAt(at) === point) {
        at += 1;
        while (at < end && isDigit((code = text.charCodeAt(at)))) {
          mantissa = mantissa * 10 + (code - ZERO);
          decimals += 1;
          at += 1;
        }
      }
      digits += decimals;
      if (digits === 0) return false;

      let exponent = 0;
      if (at < end && (text.charCodeAt(at) | 32) === 101) {
        let next = at + 1;
        const sign = next < end ? text.charCodeAt(next) : -1;
        if (sign === MINUS || sign === PLUS) next += 1;
        if (next < end && isDigit(text.charCodeAt(next))) {
          while (next < end && isDigit((code = text.charCodeAt(next)))) {
            exponent = Math.min(9999, exponent * 10 + (code - ZERO));
            next += 1;
          }
          if (sign === MINUS) exponent = -exponent;
          at = next;
        }
      }
      const power = exponent - decimals;
      let value: number;
      if (digits <= EXACT_DIGITS && power >= -22 && power <= 22) {
        const scale = EXACT[Math.abs(power)] ?? NaN;
        value = power < 0 ? mantissa / scale : mantissa * scale;
        if (isNegative) value = -value;
      } else {
        value = Number(text.slice(numberStart, at).replace('\u2212', '-').replace(',', '.'));
      }
      if (!Number.isFinite(value)) return false;
      row.values[column] = value;

      if (!byBlanks) at = skipBlanks(at, end);
      const unitStart = at;
      while (at < end && isUnitLetter(text.charCodeAt(at))) at += 1;
      row.units[column] = at === unitStart ? '' : text.slice(unitStart, at);
      if (quoted) {
        at = skipBlanks(at, end);
        if (at >= end || text.charCodeAt(at) !== QUOTE) return false;
        at += 1;
      }
      const cellEnd = at;
      at = skipBlanks(at, end);
      if (at < end && !byBlanks && text.charCodeAt(at) === mark) at = skipBlanks(at + 1, end);
      else if (at < end && !(byBlanks && at > cellEnd)) return false;
      else if (at >= end && column < width - 1) return false;
    }
    return at >= end;
  };
}
