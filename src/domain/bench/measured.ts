import { readAccuracy, readStep } from './accuracy-text';
import type { AccuracyOf } from './accuracy-text';
import { compareQuantities } from './quantities';
import type { QuantityBook } from './quantities';
import type { QuantitySpec } from './types';

/** Accuracy and step of the last digit, as typed. */
export interface MeasureText {
  accuracy: string;
  resolution: string;
}

interface Measured extends AccuracyOf {
  key: string;
}

/** Covers every harmonic and other product, in an instrument's specification. */
const ANY_PRODUCT: Measured = { key: 'harmonic', label: 'Harmonics and other products', unit: 'dBc' };

/** What an instrument's specification can state an accuracy of, in the order of testing. */
export function measuredQuantities(book: QuantityBook): Measured[] {
  const read = [...book.values()]
    .filter(({ formula, format, unit }) => formula === null && format !== 'yes_no' && unit !== 'dBc')
    .sort(compareQuantities);
  const at = read.findIndex(({ key }) => key === 'rf_power') + 1;
  return [...read.slice(0, at), ANY_PRODUCT, ...read.slice(at)].map(({ key, label, unit }) => ({
    ...{ key, label, unit },
  }));
}

/** Reads what was typed of each quantity; what is wrong by field. A quantity of which nothing was typed is left out. */
export function readMeasures(
  texts: Readonly<Record<string, MeasureText>>,
  book: QuantityBook,
): { quantities: Record<string, QuantitySpec>; problems: Record<string, string> } {
  const known = new Map(measuredQuantities(book).map((each) => [each.key, each]));
  const quantities: Record<string, QuantitySpec> = {};
  const problems: Record<string, string> = {};
  for (const [key, text] of Object.entries(texts)) {
    if (text.accuracy.trim() === '' && text.resolution.trim() === '') continue;
    const of = known.get(key);
    if (of === undefined) {
      problems[`accuracy.${key}`] = `There is no quantity ${key} that an instrument reads.`;
      continue;
    }
    const accuracy = readAccuracy(text.accuracy, of);
    const resolution = readStep(text.resolution, of);
    if (!accuracy.ok) problems[`accuracy.${key}`] = accuracy.reason;
    if (!resolution.ok) problems[`resolution.${key}`] = resolution.reason;
    if (accuracy.ok && resolution.ok) {
      quantities[key] = { accuracy: accuracy.terms, resolution: resolution.step };
    }
  }
  return { quantities, problems };
}
