import { describe, expect, it } from 'vitest';
import { changeInWords, comparePoints } from './compare-points';
import type { ComparedPoint } from './compare-points';
import { shippedQuantity, unknownQuantity } from './quantities';

const quantity = (key: string) => shippedQuantity(key) ?? unknownQuantity(key);

function point(key: string, value: number | null, change: Partial<ComparedPoint> = {}): ComparedPoint {
  return {
    ...{ quantity: quantity(key), band: '20m', freqHz: 14_060_000, verdict: 'pass', value, n: 1 },
    ...{ lower: null, upper: null },
    ...change,
  };
}

describe('two runs beside each other', () => {
  it('pairs points by quantity, band and frequency, in the order of the later run', () => {
    const pairs = comparePoints(
      [point('harmonic_2', -38), point('rf_power', 2.5), point('current_rest', 0.06)],
      [point('rf_power', 2.6), point('harmonic_2', -51), point('harmonic_3', -60)],
    );
    expect(pairs.map((pair) => [pair.quantity.key, pair.before?.value, pair.after?.value])).toEqual([
      ['rf_power', 2.5, 2.6],
      ['harmonic_2', -38, -51],
      ['harmonic_3', undefined, -60],
      ['current_rest', 0.06, undefined],
    ]);
  });

  it('takes another band or another test frequency for another point', () => {
    const pairs = comparePoints(
      [point('rf_power', 2.5)],
      [point('rf_power', 2.6, { band: '40m' }), point('rf_power', 2.6, { freqHz: 14_200_000 })],
    );
    expect(pairs).toHaveLength(3);
    expect(pairs.every(({ change }) => change === null)).toBe(true);
  });

  it('says no change where one of them was not read', () => {
    const [pair] = comparePoints([point('rf_power', null)], [point('rf_power', 2)]);
    expect(pair?.change).toBeNull();
  });
});

describe('a change in words', () => {
  it.each([
    ['rf_power', 2, 4, '+3.01 dB'],
    ['rf_power', 2.6, 2.6, 'no change'],
    ['rf_power', 0, 2, '+2.00 W'],
    ['harmonic_2', -38.1, -51.1, '−13.0 dB'],
    ['harmonic_2', -51, -51.01, 'no change'],
    ['current_key_down', 0.612, 0.65, '+38.0 mA'],
    ['frequency_error', 38, -12, '−50 Hz'],
    ['case_temperature', 330, 321.5, '−8.5 K'],
    ['efficiency', 0.4, 0.42, '+2.0 %'],
    ['check', 0, 1, 'now yes'],
    ['check', 1, 1, 'no change'],
  ])('of %s from %d to %d is %s', (key, from, to, words) => {
    expect(changeInWords(quantity(key), from, to)).toBe(words);
  });
});
