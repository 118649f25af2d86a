import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { planForBand } from './frequency-plan';
import type { BandPlan, FrequencyPlan } from './frequency-plan';
import { carrierOffPlan, productNamer } from './name-products';
import { ordinal, productsOf } from './plan-products';

/** A superhet: a premixed local oscillator less an intermediate frequency makes the carrier. */
const superhet: FrequencyPlan = {
  oscillators: [
    { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 3.0e6, highHz: 3.1e6 }] },
    { symbol: 'XO', name: 'Crystal oscillator', ranges: [{ band: null, lowHz: 8.93e6, highHz: 8.93e6 }] },
    { symbol: 'BFO', name: 'BFO', ranges: [{ band: null, lowHz: 4.915e6, highHz: 4.915e6 }] },
  ],
  stages: [{ symbol: 'LO', name: 'Local oscillator', band: null, expression: 'XO + VFO' }],
  carriers: [{ band: '40m', expression: 'LO − BFO' }],
  spacings: [
    { kind: 'clock', name: 'Display clock', spacingHz: 1e6 },
    { kind: 'supply', name: 'Converter', spacingHz: 52e3 },
  ],
};

function on40m(plan: FrequencyPlan): BandPlan {
  const resolved = planForBand(plan, '40m');
  if (!resolved.ok) throw new Error(resolved.reason);
  return resolved.plan;
}

const carrierHz = 7.03e6;
const vfoHz = carrierHz + 4.915e6 - 8.93e6;
const named = (freqHz: number, toleranceHz = 3e3) =>
  productNamer({ plan: on40m(superhet), carrierHz, toleranceHz })(freqHz);

describe('a peak is called', () => {
  it.each<[string, number]>([
    ['VFO leak', vfoHz],
    ['BFO leak', 4.915e6],
    ['crystal oscillator leak', 8.93e6],
    ['local oscillator leak', carrierHz + 4.915e6],
    ['2nd harmonic of the BFO', 9.83e6],
    ['3rd harmonic of the local oscillator', 3 * (carrierHz + 4.915e6)],
    ['image', carrierHz + 2 * 4.915e6],
    ['image of the local oscillator', 8.93e6 - vfoHz],
    ['LO − 2 × BFO', carrierHz - 4.915e6],
    ['2 × LO − BFO', 2 * carrierHz + 4.915e6],
    ['11th harmonic', 11 * carrierHz],
  ])('%s', (name, freqHz) => {
    expect(named(freqHz).name).toBe(name);
  });

  it('by what tunes as the carrier does, not by the whole range', () => {
    // 40 kHz off: well within the range of the VFO, but not where the VFO runs while the carrier is on 7.03 MHz.
    expect(named(vfoHz + 40e3).name).not.toBe('VFO leak');
  });

  it('a clock or a supply by its spacing', () => {
    expect(named(3e6 + 200, 500)).toMatchObject({ kind: 'clock', name: '3rd harmonic of the display clock' });
    expect(named(carrierHz + 104e3, 500)).toMatchObject({
      kind: 'supply',
      name: 'converter, 2 × 52 kHz above the carrier',
      order: 3,
    });
  });

  it('supply ripple without any plan, where the bandwidth tells it', () => {
    const alone = (toleranceHz: number) => productNamer({ plan: null, carrierHz, toleranceHz });
    expect(alone(10)(carrierHz - 120)).toMatchObject({
      kind: 'supply',
      name: 'supply ripple, 120 Hz below the carrier',
    });
    expect(alone(10)(2 * carrierHz + 100).name).toBe('supply ripple, 100 Hz above the 2nd harmonic');
    expect(alone(1e3)(carrierHz - 120).kind).toBe('unexplained');
  });

  it('unexplained, where nothing fits', () => {
    const few = on40m({
      ...superhet,
      spacings: [],
      stages: [],
      oscillators: superhet.oscillators.slice(0, 2),
      carriers: [{ band: null, expression: 'XO' }],
    });
    expect(productNamer({ plan: few, carrierHz: 8.93e6, toleranceHz: 10 })(1.234567e6)).toEqual({
      kind: 'unexplained',
      name: 'unexplained',
      order: null,
      predictedHz: null,
    });
  });

  it('the lowest order of all that fit, laws of it', () => {
    const plan = on40m({ ...superhet, spacings: [] });
    const products = productsOf(plan);
    const name = productNamer({ plan, carrierHz, toleranceHz: 1e3 });
    fc.assert(
      fc.property(fc.integer({ min: 100, max: 80_000 }), (kHz) => {
        const found = name(kHz * 1e3);
        const lower = products.filter(({ order }) => order < (found.order ?? 10));
        const frequencyOf = (mix: readonly number[]) =>
          Math.abs((mix[0] ?? 0) * vfoHz + (mix[1] ?? 0) * 8.93e6 + (mix[2] ?? 0) * 4.915e6);
        return lower.every(({ mix }) => Math.abs(frequencyOf(mix) - kHz * 1e3) > 1e3 - 1e-6);
      }),
    );
  });
});

describe('products of a plan', () => {
  it('are each there once, none of them the carrier, up to the ninth order', () => {
    const products = productsOf(on40m(superhet));
    const keys = products.map(({ mix }) => mix.join());
    expect(new Set(keys).size).toBe(keys.length);
    expect(keys).not.toContain('1,1,-1');
    expect(keys).not.toContain('2,2,-2');
    expect(Math.max(...products.map(({ order }) => order))).toBe(9);
    expect(products.map(({ order }) => order)).toEqual([...products.map(({ order }) => order)].sort());
  });

  it('stay few enough to be looked through where a plan has many oscillators', () => {
    const oscillators = Array.from({ length: 8 }, (_, index) => ({
      symbol: `X${String(index)}`,
      name: 'XO',
      ranges: [{ band: null, lowHz: 1e6 + index, highHz: 1e6 + index }],
    }));
    const plan = on40m({
      ...superhet,
      oscillators,
      stages: [],
      carriers: [{ band: null, expression: 'X0' }],
    });
    expect(productsOf(plan).length).toBeLessThan(60_000);
  });
});

it('says where the carrier lies off the plan', () => {
  const plan = on40m(superhet);
  expect(carrierOffPlan(plan, 7.03e6, 1e3)).toBeNull();
  expect(carrierOffPlan(plan, 7.2e6, 1e3)).toMatch(/from 7\.015 MHz to 7\.115 MHz, not at 7\.2 MHz/);
});

it.each([
  [1, '1st'],
  [2, '2nd'],
  [3, '3rd'],
  [4, '4th'],
  [11, '11th'],
  [12, '12th'],
  [21, '21st'],
])('%d is %s', (count, text) => {
  expect(ordinal(count)).toBe(text);
});
