import { describe, expect, it } from 'vitest';
import { benchRecord, quantile } from './bench-record';

const near = (value: number): unknown => expect.closeTo(value, 10);

describe('quantile', () => {
  it.each([
    [[], 0.5, null],
    [[3], 0.9, 3],
    [[4, 1, 3, 2], 0.5, 2.5],
    [[1, 2, 3, 4, 5], 0.1, 1.4],
    [[1, 2, 3, 4, 5], 0.9, 4.6],
    [[-54, -51, -60], 1, -51],
  ])('of %j at %s', (values, p, expected) => {
    const found = quantile(values, p);
    if (expected === null) expect(found).toBeNull();
    else expect(found).toBeCloseTo(expected, 12);
  });
});

describe('benchRecord', () => {
  it('keeps bands apart and takes the worst harmonic of all', () => {
    const point = (unitId: number, band: string, quantityKey: string, value: number) => ({
      unitId,
      band,
      quantityKey,
      value,
    });
    expect(
      benchRecord([
        point(1, '40m', 'rf_power', 3),
        point(1, '40m', 'harmonic_2', -54),
        point(1, '40m', 'harmonic_3', -51),
        point(1, '30m', 'rf_power', 2.8),
        point(2, '40m', 'rf_power', 3.2),
        point(2, '40m', 'current_key_down', 0.61),
      ]),
    ).toEqual([
      {
        band: '40m',
        medianPowerW: 3.1,
        powerFromW: near(3.02),
        powerToW: near(3.18),
        worstHarmonicDbc: -51,
        medianCurrentA: 0.61,
      },
      {
        band: '30m',
        medianPowerW: 2.8,
        powerFromW: 2.8,
        powerToW: 2.8,
        worstHarmonicDbc: null,
        medianCurrentA: null,
      },
    ]);
  });
});
