import { describe, expect, it } from 'vitest';
import { formatWithU } from '~/domain/bench/format';
import { mismatchLimitsDb } from '~/domain/bench/mismatch';
import {
  combine,
  combinedU,
  component,
  coverageFactor,
  dbIntervalToW,
  divisorOf,
  effectiveNu,
} from '~/domain/bench/uncertainty';

describe('JCGM 100 H.1, end gauge (full transcription read; unrounded values computed)', () => {
  const lines = [
    component('standard', 25, 'normal', { k: 1, nu: 18 }),
    component('difference', 9.7, 'normal', { k: 1, nu: 25.6 }),
    component('expansion difference', 2.9, 'normal', { k: 1, nu: 50 }),
    // Printed as 16.7: length 50 000 623 nm, 11.5e-6 per °C, 0.029 °C.
    component('temperature difference', 50_000_623 * 11.5e-6 * 0.029, 'normal', { k: 1, nu: 2 }),
  ];

  it('has uc 31.71 nm, ν_eff 16.66, k99 2.92 and U99 93 nm', () => {
    expect(combinedU(lines)).toBeCloseTo(31.71, 2);
    expect(effectiveNu(lines)).toBeCloseTo(16.66, 1);
    const k99 = coverageFactor(effectiveNu(lines), 0.99);
    expect(k99).toBeCloseTo(2.92, 2);
    expect(k99 * combinedU(lines)).toBeCloseTo(92.6, 1);
    expect(Math.round(Number(k99.toFixed(2)) * Math.round(combinedU(lines)))).toBe(93);
  });
});

describe('Welch–Satterthwaite (JCGM 100 G.4, read in quotation)', () => {
  it('four equal lines with ν 10 give uc 2 and ν_eff 40', () => {
    const lines = Array.from({ length: 4 }, () => component('each', 1, 'normal', { k: 1, nu: 10 }));
    expect(combinedU(lines)).toBeCloseTo(2, 12);
    expect(effectiveNu(lines)).toBeCloseTo(40, 3);
  });
});

describe('Student t (JCGM 100 table G.2; computed, 2.92 read in quotation, layout from memory)', () => {
  const coverages = [0.6827, 0.9, 0.95, 0.9545, 0.99, 0.9973];
  it.each([
    [1, [1.84, 6.31, 12.71, 13.97, 63.66, 235.8]],
    [2, [1.32, 2.92, 4.3, 4.53, 9.92, 19.21]],
    [5, [1.11, 2.02, 2.57, 2.65, 4.03, 5.51]],
    [10, [1.05, 1.81, 2.23, 2.28, 3.17, 3.96]],
    [16, [1.03, 1.75, 2.12, 2.17, 2.92, 3.54]],
    [20, [1.03, 1.72, 2.09, 2.13, 2.85, 3.42]],
    [50, [1.01, 1.68, 2.01, 2.05, 2.68, 3.16]],
  ])('ν %i', (nu, row) => {
    for (const [index, expected] of row.entries()) {
      const tolerance = expected > 100 ? 0.05 : 0.005;
      const k = coverageFactor(nu, coverages[index] ?? 0);
      expect(Math.abs(k - expected)).toBeLessThanOrEqual(tolerance + 1e-9);
    }
  });

  it('takes k = 2 from ν_eff 100 on', () => {
    expect(coverageFactor(100)).toBe(2);
    expect(coverageFactor(null)).toBe(2);
    expect(coverageFactor(99.9)).toBeGreaterThan(2);
  });
});

describe('dB as power (computed)', () => {
  it.each([
    [0.1, 2.329, -2.276],
    [0.5, 12.202, -10.875],
    [1, 25.893, -20.567],
  ])('%d dB is +%d / %d %%', (db, plus, minus) => {
    const { lowW, highW } = dbIntervalToW(1, db);
    expect(100 * (highW - 1)).toBeCloseTo(plus, 3);
    expect(100 * (lowW - 1)).toBeCloseTo(minus, 3);
  });
});

describe('divisors (JCGM 100 4.3, from memory)', () => {
  it.each([
    ['normal', 2],
    ['rectangular', 1.7321],
    ['triangular', 2.4495],
    ['u-shaped', 1.4142],
  ] as const)('%s: %d', (distribution, divisor) => {
    expect(divisorOf(distribution)).toBeCloseTo(divisor, 4);
  });
});

describe('a budget of a power in dB (computed)', () => {
  const lines = [
    component('calibration', 0.15, 'normal', { k: 2 }),
    component('mismatch', mismatchLimitsDb(1.5, 1.2).plusDb, 'u-shaped'),
    component('linearity', 0.1, 'rectangular'),
    component('display', 0.05, 'rectangular'),
    component('repeatability', 0.04, 'normal', { k: 1 }),
  ];

  it('has uc 0.1537 dB, U 0.3075 dB and 4.658 to 5.367 W around 5 W', () => {
    const expected = [0.075, 0.1107, 0.0577, 0.0289, 0.04];
    for (const [index, u] of expected.entries()) expect(lines[index]?.u).toBeCloseTo(u, 4);
    const sum = combine(lines);
    expect(sum.uc).toBeCloseTo(0.1537, 4);
    expect(Math.abs(sum.U - 0.3075)).toBeLessThanOrEqual(0.00005);
    const { lowW, highW } = dbIntervalToW(5, sum.U);
    expect(lowW).toBeCloseTo(4.658, 3);
    expect(highW).toBeCloseTo(5.367, 3);
  });
});

describe('digits (JCGM 100 7.2.6, from memory)', () => {
  it('writes 12.345 dBm with U 0.3075 as 12.35 ± 0.31', () => {
    expect(formatWithU(12.345, 0.3075)).toBe('12.35 ± 0.31');
  });
});
