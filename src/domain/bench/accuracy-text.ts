import { parseDecimal } from './decimal';
import type { Quantity } from './quantities';
import type { SpecHalfWidth } from './types';

/** As far as an accuracy depends on what it is of. */
export type AccuracyOf = Pick<Quantity, 'label' | 'unit'>;

const FACTORS: Readonly<Record<string, number>> = {
  '': 1,
  n: 1e-9,
  u: 1e-6,
  µ: 1e-6,
  m: 1e-3,
  k: 1e3,
  M: 1e6,
};
const LEVEL_UNITS: ReadonlySet<string> = new Set(['W', 'dBc', 'dBm', 'dB']);
/** More terms than a data sheet adds up. */
const MAX_TERMS = 5;

type Term = { ok: true; term: SpecHalfWidth } | { ok: false; reason: string };
type Terms = { ok: true; terms: SpecHalfWidth[] } | { ok: false; reason: string };

/** What an accuracy of the quantity may be stated in, as an example that is not taken for a value. */
function unitsOf({ unit }: AccuracyOf): string {
  if (unit === 'W') return 'dB, percent or W';
  if (LEVEL_UNITS.has(unit)) return 'dB';
  if (unit === 'Hz') return 'ppm or Hz';
  if (unit === 'K') return 'K';
  return unit === '1' ? 'percent' : `percent, ppm or ${unit}`;
}

/** The unit of a term, where the budget can use it for the quantity. */
function unitTerm(value: number, word: string, of: AccuracyOf): SpecHalfWidth | null {
  const lower = word.toLowerCase();
  const isLevel = LEVEL_UNITS.has(of.unit);
  if (lower === 'db') return isLevel ? { halfWidth: value, unit: 'dB' } : null;
  const isShare = !(isLevel && of.unit !== 'W') && of.unit !== 'K';
  if (lower === '%' || lower === 'percent') {
    return isShare && of.unit !== 'Hz' ? { halfWidth: value, unit: 'percent' } : null;
  }
  if (lower === 'ppm') return isShare ? { halfWidth: value, unit: 'ppm' } : null;
  if ((isLevel && of.unit !== 'W') || of.unit === '1') return null;
  const base = of.unit === 'K' && word === '°C' ? '°C' : of.unit;
  if (!lower.endsWith(base.toLowerCase())) return null;
  const prefix = word.slice(0, word.length - base.length);
  const factor = FACTORS[prefix === 'K' ? 'k' : prefix];
  if (factor === undefined) return null;
  // Rounded where a decimal has no exact double, so that 0.2 mA is 0.0002 A.
  return { halfWidth: Number((value * factor).toPrecision(15)), unit: of.unit === 'Hz' ? 'Hz' : 'unit' };
}

function readTerm(text: string, of: AccuracyOf): Term {
  const clean = text.replace(/^±/, '').trim();
  const match = /^([-+]?[\d.,]*\d[.,]?(?:e[-+]?\d+)?)\s*(.*)$/iu.exec(clean);
  if (match === null) {
    return { ok: false, reason: `“${clean.slice(0, 30)}” does not begin with a number.` };
  }
  const number = parseDecimal(match[1] ?? '');
  if (!number.ok) return number;
  if (number.value < 0) return { ok: false, reason: 'A half-width is not below zero.' };
  const word = (match[2] ?? '').trim().replace('μ', 'µ');
  if (word === '') return { ok: false, reason: `Say the unit of ${match[1] ?? ''}: ${unitsOf(of)}.` };
  const term = unitTerm(number.value, word, of);
  return term === null
    ? {
        ok: false,
        reason: `${word.slice(0, 20)} does not fit ${of.label.toLowerCase()}: use ${unitsOf(of)}.`,
      }
    : { ok: true, term };
}

/**
 * Reads half-widths that apply together as a data sheet writes them: `1 % + 2 mA`, `0.3 dB`, `0.2 ppm + 1 Hz`.
 * Never throws.
 */
export function readAccuracy(text: string, of: AccuracyOf): Terms {
  const pieces = text
    .replaceAll('\u2212', '-')
    .split(/(?<!e)\+|;|\band\b/i)
    .map((piece) => piece.trim())
    .filter((piece) => piece !== '');
  if (pieces.length > MAX_TERMS) return { ok: false, reason: `At most ${MAX_TERMS} terms are added up.` };
  const terms: SpecHalfWidth[] = [];
  for (const piece of pieces) {
    const read = readTerm(piece, of);
    if (!read.ok) return read;
    terms.push(read.term);
  }
  return { ok: true, terms };
}

/** Reads one half-width or step, as {@link readAccuracy}; null where nothing is typed. */
export function readStep(
  text: string,
  of: AccuracyOf,
): { ok: true; step: SpecHalfWidth | null } | { ok: false; reason: string } {
  const read = readAccuracy(text, of);
  if (!read.ok) return read;
  const [step = null, second] = read.terms;
  return second === undefined
    ? { ok: true, step }
    : { ok: false, reason: 'The step of the last digit is one number with its unit.' };
}

const PREFIXES = [
  ['M', 1e6],
  ['k', 1e3],
  ['', 1],
  ['m', 1e-3],
  ['µ', 1e-6],
  ['n', 1e-9],
] as const;

/** A number without the tail that a division leaves. */
function tidy(value: number): string {
  return String(Number(value.toPrecision(12)));
}

function termText({ halfWidth, unit }: SpecHalfWidth, of: AccuracyOf): string {
  if (unit === 'percent') return `${tidy(halfWidth)} %`;
  if (unit === 'dB' || unit === 'ppm') return `${tidy(halfWidth)} ${unit}`;
  if (unit === 'unit' && LEVEL_UNITS.has(of.unit) && of.unit !== 'W') return `${tidy(halfWidth)} dB`;
  const base = unit === 'Hz' ? 'Hz' : of.unit;
  if (base === 'K') return `${tidy(halfWidth)} K`;
  const [prefix, factor] = PREFIXES.find(([, size]) => halfWidth >= size) ?? ['', 1];
  return `${tidy(halfWidth / factor)} ${prefix}${base}`;
}

/** Half-widths as they are typed: `1 % + 2 mA`; empty for none. */
export function accuracyText(terms: readonly SpecHalfWidth[], of: AccuracyOf): string {
  return terms.map((term) => termText(term, of)).join(' + ');
}
