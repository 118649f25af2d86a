import { describe, expect, it } from 'vitest';
import { bandsOf, parseExpression, planForBand, reachOf } from './frequency-plan';
import type { FrequencyPlan } from './frequency-plan';
import { checkPlan, previewPlan } from './plan-preview';

/** A premixed rig: XO by band less a VFO makes the carrier; a second rig of it multiplies. */
const plan: FrequencyPlan = {
  oscillators: [
    { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 4.0e6, highHz: 4.1e6 }] },
    {
      symbol: 'XO',
      name: 'Crystal oscillator',
      ranges: [
        { band: '40m', lowHz: 11.06e6, highHz: 11.06e6 },
        { band: '20m', lowHz: 5.05e6, highHz: 5.05e6 },
      ],
    },
  ],
  stages: [{ symbol: 'LO', name: 'Local oscillator', band: '20m', expression: '2 × XO' }],
  carriers: [
    { band: '40m', expression: 'XO − VFO' },
    { band: '20m', expression: 'LO + VFO' },
  ],
  spacings: [],
};

describe('an expression', () => {
  it.each([
    ['VFO', [[1, 'VFO']]],
    [
      'VFO + 2 × BFO',
      [
        [1, 'VFO'],
        [2, 'BFO'],
      ],
    ],
    [
      '-VFO − 3*XO1 + BFO × 2',
      [
        [-1, 'VFO'],
        [-3, 'XO1'],
        [2, 'BFO'],
      ],
    ],
  ])('%s', (text, terms) => {
    expect(parseExpression(text)).toEqual({
      ok: true,
      terms: terms.map(([factor, symbol]) => ({ factor, symbol })),
    });
  });

  it.each([
    ['', /empty/],
    ['VFO BFO', /cannot be read at “BFO”/],
    ['VFO +', /cannot be read at/],
    ['7 MHz', /cannot be read/],
    ['0 × VFO', /zero times/],
  ])('%j is refused', (text, reason) => {
    const parsed = parseExpression(text);
    expect(parsed.ok ? '' : parsed.reason).toMatch(reason);
  });
});

describe('a plan', () => {
  it('predicts the carrier from its oscillators, by the difference or through a multiplier', () => {
    const previews = previewPlan(plan);
    expect(bandsOf(plan)).toEqual(['40m', '20m']);
    expect(previews.map(({ band, carrier, problem }) => ({ band, carrier, problem }))).toEqual([
      { band: '40m', carrier: { lowHz: 6.96e6, highHz: 7.06e6 }, problem: null },
      { band: '20m', carrier: { lowHz: 14.1e6, highHz: 14.2e6 }, problem: null },
    ]);
  });

  it('says where its oscillators put the carrier outside the band', () => {
    const wrong = { ...plan, carriers: [{ band: '40m' as const, expression: 'XO + VFO' }] };
    expect(previewPlan(wrong)[0]?.problem).toMatch(/from 15\.06 MHz to 15\.16 MHz, outside 40 m/);
  });

  it('says what it lacks on a band', () => {
    const resolved = planForBand({ ...plan, carriers: [{ band: null, expression: 'XO − VFO' }] }, '30m');
    expect(resolved.ok ? '' : resolved.reason).toMatch(/names XO, of which the plan says nothing on 30 m/);
  });

  it('warns of a low-order product that runs through the band, and of no high one', () => {
    // 3 × VFO − XO runs from 0.94 to 1.24 MHz; 2 × XO − 4 × VFO crosses the band where 5 × VFO = XO + carrier.
    const close: FrequencyPlan = {
      ...plan,
      oscillators: [
        { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 2.3e6, highHz: 2.4e6 }] },
        { symbol: 'XO', name: 'XO', ranges: [{ band: null, lowHz: 4.7e6, highHz: 4.7e6 }] },
      ],
      stages: [],
      carriers: [{ band: '40m', expression: 'XO + VFO' }],
    };
    const [preview] = previewPlan(close);
    const third = preview?.inBand.find(({ name }) => name === '3 × VFO');
    expect(third).toBeUndefined();
    const harmonic = preview?.inBand.find(({ name }) => name === '3rd harmonic of the VFO');
    expect(harmonic).toMatchObject({ order: 3 });
    expect(harmonic?.lowHz).toBeCloseTo(7e6, 0);
    expect(harmonic?.highHz).toBeCloseTo(7.2e6, 0);
    expect(preview?.inBand.every(({ order }) => order <= 5)).toBe(true);
  });

  it('reaches as far as its ranges say, whichever way round the difference is', () => {
    const resolved = planForBand(plan, '40m');
    if (!resolved.ok) throw new Error(resolved.reason);
    expect(reachOf([1, -1], resolved.plan)).toEqual({ lowHz: 6.96e6, highHz: 7.06e6 });
  });

  it('has its faults named with their fields', () => {
    const faulty: FrequencyPlan = {
      oscillators: [
        { symbol: '4VFO', name: 'VFO', ranges: [{ band: null, lowHz: 5e6, highHz: 4e6 }] },
        { symbol: 'XO', name: 'XO', ranges: [{ band: null, lowHz: 5e6, highHz: 5e6 }] },
        { symbol: 'XO', name: 'XO', ranges: [] },
      ],
      stages: [{ symbol: 'XO', name: 'LO', band: null, expression: 'XO +' }],
      carriers: [{ band: null, expression: 'VFO + XO' }],
      spacings: [{ kind: 'clock', name: 'clock', spacingHz: 0 }],
    };
    expect(checkPlan(faulty).map(({ field }) => field)).toEqual([
      'oscillators.0.symbol',
      'oscillators.0.ranges.0.lowHz',
      'oscillators.2.symbol',
      'stages.0.symbol',
      'stages.0.expression',
      'carriers.0.expression',
      'spacings.0.spacingHz',
    ]);
    expect(checkPlan(plan)).toEqual([]);
  });
});
