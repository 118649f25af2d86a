import { expect, it } from 'vitest';
import { planForBand } from '~/domain/bench/frequency-plan';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { productNamer } from '~/domain/bench/name-products';
import { previewPlan } from '~/domain/bench/plan-preview';
import { resonanceHz, resonatingCapacitanceF } from '~/domain/bench/resonance';

// Source: f = 1/(2π√(LC)), computed in double precision; each value to half a unit of its last digit.
it.each([
  { inductanceH: 5e-6, capacitanceF: 100e-12, mhz: 7.117625, digits: 6 },
  { inductanceH: 1e-6, capacitanceF: 100e-12, mhz: 15.9155, digits: 4 },
])(
  '$inductanceH H and $capacitanceF F resonate at $mhz MHz',
  ({ inductanceH, capacitanceF, mhz, digits }) => {
    expect(Math.abs(resonanceHz(inductanceH, capacitanceF) / 1e6 - mhz)).toBeLessThanOrEqual(
      0.5 * 10 ** -digits,
    );
  },
);

it('7.030 MHz with 5 µH takes 102.51 pF', () => {
  expect(Math.abs(resonatingCapacitanceF(5e-6, 7.03e6) * 1e12 - 102.51)).toBeLessThanOrEqual(0.005);
});

// Common practice: about 5 µH with 100 pF resonates near 7 MHz.
it('5 µH with 100 pF resonates near 7 MHz, within 2 %', () => {
  expect(Math.abs(resonanceHz(5e-6, 100e-12) / 7e6 - 1)).toBeLessThan(0.02);
});

// Common practice: a mixer's output is the sum or the difference of its inputs; 11.059 MHz with 4.032 MHz gives
// 7.027 MHz, inside 40 m.
it('a plan mixes 11.059 MHz with 4.032 MHz to 7.027 MHz, inside 40 m, and to its image', () => {
  const fixed = (symbol: string, freqHz: number) => ({
    symbol,
    name: symbol,
    ranges: [{ band: null, lowHz: freqHz, highHz: freqHz }],
  });
  const plan: FrequencyPlan = {
    oscillators: [fixed('XO', 11.059e6), fixed('VFO', 4.032e6)],
    stages: [],
    carriers: [{ band: '40m', expression: 'XO − VFO' }],
    spacings: [],
  };
  const [preview] = previewPlan(plan);
  expect(preview).toMatchObject({ band: '40m', problem: null });
  expect(preview?.carrier?.lowHz).toBeCloseTo(7.027e6, 3);
  expect(preview?.carrier?.highHz).toBeCloseTo(7.027e6, 3);

  const resolved = planForBand(plan, '40m');
  if (!resolved.ok) throw new Error(resolved.reason);
  const name = productNamer({ plan: resolved.plan, carrierHz: 7.027e6, toleranceHz: 1e3 });
  expect(name(11.059e6 + 4.032e6)).toMatchObject({ kind: 'image', name: 'image', order: 2 });
});
