import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { invariant } from '~/lib/invariant';
import {
  checkQuestion,
  checkState,
  checkValue,
  closingProblem,
  deviationOf,
  deviationText,
  isGood,
  mayBeChecked,
  runsInDoubt,
} from './daily-check';
import type { CheckedReference, Reference } from './daily-check';
import { QUANTITIES, shippedQuantity } from './quantities';
import type { PathSpec } from './types';
import { dbmToW } from './units';

function reference(key: string, change: Partial<Reference> = {}): Reference {
  const quantity = shippedQuantity(key);
  invariant(quantity !== undefined, `${key} ships`);
  return { quantity, freqHz: 14e6, nominal: 5, tolerance: 0.2, ...change };
}

const tap: PathSpec = {
  direction: 'to_instrument',
  parts: [
    {
      partNumber: 'L-1',
      name: 'Tap',
      loss: [
        [1e6, 40],
        [28e6, 40],
        [100e6, 41],
      ],
      ...{ uncertaintyDb: 0.1, k: 2, flatnessDb: null, ratingW: 50, vswr: null },
    },
  ],
};

describe('the value of a check at the unit', () => {
  it('is what the meter shows and the loss of the path', () => {
    const found = checkValue(reference('rf_power'), dbmToW(-3), tap);
    expect(found.ok && found.value).toBeCloseTo(dbmToW(37), 9);
  });

  it('of a harmonic is corrected at both frequencies', () => {
    const found = checkValue(reference('harmonic_7'), -50, tap);
    const between = Math.log(98 / 28) / Math.log(100 / 28);
    expect(found.ok && found.value).toBeCloseTo(-50 + between, 9);
  });

  it('of a current is not corrected, with or without a path', () => {
    expect(checkValue(reference('current_key_down'), 0.6, tap)).toEqual({ ok: true, value: 0.6 });
    expect(checkValue(reference('current_key_down'), 0.6, null)).toEqual({ ok: true, value: 0.6 });
  });

  it.each([
    ['no frequency', reference('rf_power', { freqHz: null }), tap, /frequency/],
    ['a frequency beyond its table', reference('rf_power', { freqHz: 200e6 }), tap, /only, not at 200 MHz/],
    ['the wrong way round', reference('rf_power'), { ...tap, direction: 'from_generator' }, /generator/],
  ] as const)('is refused for a path with %s', (_, of, path, sentence) => {
    const found = checkValue(of, 1e-3, path);
    expect(found.ok ? 'none' : found.reason).toMatch(sentence);
  });
});

describe('how far a check is off', () => {
  it('is in dB for a power, and its band is the same both ways', () => {
    const of = reference('rf_power');
    expect(deviationOf(of, 5)).toBe(0);
    expect(deviationOf(of, 10)).toBeCloseTo(3.0103, 4);
    expect(deviationText(of, deviationOf(of, 2.5))).toBe('−3.01 dB');
    expect(deviationText(of, -0.001)).toBe('0.00 dB');
  });

  it.each([
    ['frequency_error', 100, 103, '+3 Hz'],
    ['current_key_down', 0.6, 0.59, '−10.0 mA'],
    ['sensitivity', -120, -119.5, '+0.50 dB'],
    ['case_temperature', 300, 302, '+2.0 K'],
    ['supply_voltage', 13.8, 13.8, '0.000 mV'],
  ])('is in the unit of %s', (key, nominal, value, text) => {
    const of = reference(key, { nominal });
    expect(deviationText(of, deviationOf(of, value))).toBe(text);
  });

  it('is good at the edge of the band and bad beyond it', () => {
    const of = reference('rf_power');
    expect([0.2, -0.2, 0].map((deviation) => isGood(of, deviation))).toEqual([true, true, true]);
    expect([0.2001, -0.21, NaN].map((deviation) => isGood(of, deviation))).toEqual([false, false, false]);
  });

  it('is asked about where it is rather a slip of the hand', () => {
    const of = reference('rf_power');
    expect(checkQuestion(of, 2)).toBeNull();
    expect(checkQuestion(of, -6.02)).toMatch(/off by −6\.02 dB, more than ten times its band/);
  });

  it('grows with the distance from the nominal value', () => {
    const of = reference('rf_power');
    const ratio = fc.double({ min: 1, max: 100, noNaN: true });
    fc.assert(
      fc.property(ratio, ratio, (a, b) => {
        const [near, far] = a < b ? [a, b] : [b, a];
        return deviationOf(of, 5 * near) <= deviationOf(of, 5 * far);
      }),
    );
  });
});

it('a reference is kept for what an instrument reads', () => {
  const kept = QUANTITIES.filter(mayBeChecked).map(({ key }) => key);
  expect(kept).toContain('rf_power');
  for (const key of ['check', 'efficiency', 'spurious']) expect(kept).not.toContain(key);
});

describe('what the checks say on a day', () => {
  const at = (number: string, newest: Partial<CheckedReference['newest']> | null): CheckedReference => ({
    ...{ number, name: `Reference ${number}` },
    newest:
      newest === null
        ? null
        : { id: 1, day: '2027-03-09', isGood: true, explained: false, deviation: '+0.1 dB', ...newest },
  });
  const numbers = (references: CheckedReference[]) => references.map(({ number }) => number);

  it('names what is missing today and what is bad without a reason', () => {
    const state = checkState(
      [
        at('R-1', {}),
        at('R-2', { day: '2027-03-08' }),
        at('R-3', null),
        at('R-4', { isGood: false }),
        at('R-5', { isGood: false, explained: true }),
        at('R-6', { isGood: false, day: '2027-03-01' }),
      ],
      '2027-03-09',
    );
    expect(numbers(state.missingToday)).toEqual(['R-2', 'R-3', 'R-6']);
    expect(numbers(state.bad)).toEqual(['R-4', 'R-6']);
    expect(closingProblem(state)).toMatch(/R-4 \(Reference R-4, off by \+0\.1 dB\) and R-6/);
  });

  it('asks nothing of a works without references, and a missing check stops nothing', () => {
    expect(checkState([], '2027-03-09')).toEqual({ missingToday: [], bad: [] });
    expect(closingProblem(checkState([at('R-3', null)], '2027-03-09'))).toBeNull();
  });
});

describe('which runs a bad check casts doubt on', () => {
  const day = (date: number) => new Date(Date.UTC(2027, 2, date, 12));
  const runs = [1, 2, 3, 4].map((date) => ({ id: date, closedAt: day(date) }));
  const ids = (found: { id: number }[]) => found.map(({ id }) => id);

  it.each([
    [
      'since the last good check',
      { lastGoodAt: day(2), keptSince: day(1), flagged: new Set<number>() },
      [3, 4],
    ],
    [
      'since it is kept, where none was good',
      { lastGoodAt: null, keptSince: day(1), flagged: new Set<number>() },
      [2, 3, 4],
    ],
    [
      'but for those that are flagged already',
      { lastGoodAt: day(2), keptSince: day(1), flagged: new Set([4]) },
      [3],
    ],
  ])('is every one closed %s', (_, since, expected) => {
    expect(ids(runsInDoubt(runs, since))).toEqual(expected);
  });
});
