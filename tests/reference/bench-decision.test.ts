import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { describe, expect, it } from 'vitest';
import { guardBand, judge, probabilityOfConformance } from '~/domain/bench/decision';

const onUpper = (value: number, upper: number, U: number, decision: 'guarded' | 'simple') =>
  judge({ value, U, lower: null, upper, decision });

describe('ILAC-G8:09/2019, 4.1 and 4.2 (text read)', () => {
  it('has w = 0 for simple acceptance (4.2.1) and w = U for a guard band (4.2.2)', () => {
    expect(guardBand(0.8, 'simple')).toBe(0);
    expect(guardBand(0.8, 'guarded')).toBe(0.8);
  });

  // 4.2.3: pass <= TL − w < conditional pass <= TL < conditional fail <= TL + w < fail. The two conditional zones are
  // one here: too close to call. Limit −43 dBc, U 0.8 dB (computed).
  it.each([
    [-43.9, 'pass'],
    [-43.8, 'pass'], // exactly on the acceptance limit
    [-43.6, 'too_close'],
    [-43.0, 'too_close'], // exactly on the tolerance limit
    [-42.9, 'too_close'],
    [-42.2, 'too_close'], // exactly on TL + w
    [-42.1, 'fail'],
  ])('guarded, %d dBc: %s', (value, verdict) => {
    expect(onUpper(value, -43, 0.8, 'guarded')).toBe(verdict);
  });

  it.each([
    [-43.1, 'pass'],
    [-43.0, 'pass'], // exactly on the limit
    [-42.9, 'fail'],
  ])('simple, %d dBc: %s', (value, verdict) => {
    expect(onUpper(value, -43, 0.8, 'simple')).toBe(verdict);
  });

  it('is the same the other way round for a minimum', () => {
    const onLower = (value: number) => judge({ value, U: 0.3, lower: 2.5, upper: null, decision: 'guarded' });
    expect([2.9, 2.8, 2.7, 2.2, 2.1].map(onLower)).toEqual([
      'pass',
      'pass',
      'too_close',
      'too_close',
      'fail',
    ]);
  });
});

describe('probability of false acceptance at the acceptance limit (50 % and 2.5 % read in quotation, computed)', () => {
  it.each([
    [0, 50],
    [1, 2.275],
    [1.5, 0.135],
  ])('w = %d U: %d %%', (share, percent) => {
    const U = 0.8;
    const conforming = probabilityOfConformance(-43 - share * U, U / 2, null, -43);
    expect(100 * (1 - conforming)).toBeCloseTo(percent, 3);
  });
});

describe('JCGM 106 conformance probability', () => {
  it('a Zener at −5.47 V, limit −5.4 V, u 0.05 V: 0.919 (example from memory, computed)', () => {
    expect(probabilityOfConformance(-5.47, 0.05, null, -5.4)).toBeCloseTo(0.919, 3);
  });

  it.each([
    [0.84, 0.8],
    [1.28, 0.9],
    [1.64, 0.95],
    [2.33, 0.99],
    [3.09, 0.999],
  ])('z = %d: %d (table 1, from memory, computed)', (z, probability) => {
    expect(probabilityOfConformance(0, 1, null, z)).toBeCloseTo(probability, probability > 0.995 ? 3 : 2);
  });

  it('takes both sides together', () => {
    expect(probabilityOfConformance(0, 1, -1, 2)).toBeCloseTo(normalCdf(2, 0, 1) - normalCdf(-1, 0, 1), 12);
  });
});
