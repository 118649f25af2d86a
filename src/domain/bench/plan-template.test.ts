import { describe, expect, it } from 'vitest';
import { BAND_KEYS, bandOf } from './bands';
import { templatePoints, testFreqHz } from './plan-template';
import type { RigFigures } from './plan-template';

const rig: RigFigures = {
  bands: ['40m', '20m'],
  bandsVary: false,
  ratedPowerW: 5,
  measure: ['harmonic_2', 'check'],
  keyDownA: 0.9,
  restA: null,
  frequencyErrorHz: 100,
};

describe('a test frequency', () => {
  it.each(BAND_KEYS)('of %s lies inside the band in every Region', (band) => {
    for (const region of [1, 2, 3] as const) expect(bandOf(testFreqHz(band), region)).toBe(band);
  });
});

describe('a first test plan', () => {
  it('has the points of each band, then what is tested once', () => {
    expect(
      templatePoints(rig).map(
        ({ band, quantityKey, lower, upper, limitRule }) =>
          `${band ?? 'once'} ${quantityKey} ${lower ?? ''}..${upper ?? ''} ${limitRule}`,
      ),
    ).toEqual([
      '40m rf_power 3.97..6.29 fixed',
      '40m harmonic_2 .. spurious',
      '40m current_key_down ..0.9 fixed',
      '40m frequency_error -100..100 fixed',
      '20m rf_power 3.97..6.29 fixed',
      '20m harmonic_2 .. spurious',
      '20m current_key_down ..0.9 fixed',
      '20m frequency_error -100..100 fixed',
      'once check 1.. fixed',
    ]);
  });

  it('decides what a rule limits with a guard band, and its own limits without', () => {
    for (const { limitRule, decision } of templatePoints(rig)) {
      expect(decision).toBe(limitRule === 'spurious' ? 'guarded' : 'simple');
    }
  });

  it('asks for a band only of the rigs that have it, where not every one does', () => {
    const conditions = templatePoints({ ...rig, bandsVary: true }).map(({ condition }) => condition);
    expect(new Set(conditions)).toEqual(new Set(['band.40m', 'band.20m', null]));
  });

  it('leaves out what has no figure', () => {
    const keys = templatePoints({ ...rig, measure: [], keyDownA: null, frequencyErrorHz: null });
    expect(new Set(keys.map(({ quantityKey }) => quantityKey))).toEqual(new Set(['rf_power']));
  });
});
