import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { accuracyText, readAccuracy, readStep } from './accuracy-text';
import type { AccuracyOf } from './accuracy-text';
import type { SpecHalfWidth } from './types';

const power: AccuracyOf = { label: 'Power', unit: 'W' };
const ratio: AccuracyOf = { label: 'Harmonics', unit: 'dBc' };
const current: AccuracyOf = { label: 'Current, at rest', unit: 'A' };
const frequency: AccuracyOf = { label: 'Frequency error', unit: 'Hz' };
const heat: AccuracyOf = { label: 'Case temperature', unit: 'K' };

const width = (halfWidth: number, unit: SpecHalfWidth['unit']): SpecHalfWidth => ({ halfWidth, unit });

describe('an accuracy as a data sheet writes it', () => {
  it.each([
    ['0.3 dB', power, [width(0.3, 'dB')]],
    ['± 5 % + 20 mW', power, [width(5, 'percent'), width(0.02, 'unit')]],
    ['0,5 % + 0.2 mA', current, [width(0.5, 'percent'), width(0.0002, 'unit')]],
    ['1% and 2 µA', current, [width(1, 'percent'), width(2e-6, 'unit')]],
    ['0.2ppm; 1 Hz', frequency, [width(0.2, 'ppm'), width(1, 'Hz')]],
    ['0.01 kHz', frequency, [width(10, 'Hz')]],
    ['2 °C', heat, [width(2, 'unit')]],
    ['1e-1 dB', ratio, [width(0.1, 'dB')]],
    ['', ratio, []],
    ['  ', power, []],
  ])('reads %j', (text, of, terms) => {
    expect(readAccuracy(text, of)).toEqual({ ok: true, terms });
  });

  it.each([
    ['0.3', power, /^Say the unit of 0\.3: dB, percent or W/],
    ['dB', power, /does not begin with a number/],
    ['-1 dB', power, /not below zero/],
    ['1 dB', current, /^dB does not fit current, at rest: use percent, ppm or A/],
    ['1 %', ratio, /^% does not fit harmonics: use dB/],
    ['1 %', frequency, /use ppm or Hz/],
    ['1 %', heat, /use K/],
    ['2 mV', current, /^mV does not fit/],
    ['1,234 mA', current, /Does “1,234” mean/],
    ['1 % + 1 % + 1 % + 1 % + 1 % + 1 %', current, /At most 5 terms/],
  ])('refuses %j', (text, of, sentence) => {
    const read = readAccuracy(text, of);
    expect(read.ok ? 'none' : read.reason).toMatch(sentence);
  });

  it('takes one step, and no sum of them', () => {
    expect(readStep('1 mA', current)).toEqual({ ok: true, step: width(0.001, 'unit') });
    expect(readStep('', current)).toEqual({ ok: true, step: null });
    expect(readStep('1 mA + 2 mA', current)).toMatchObject({ ok: false });
  });

  it('comes back the same from its own text', () => {
    const size = fc.integer({ min: 1, max: 999_999 }).map((whole) => Number((whole / 1e4).toPrecision(6)));
    const cases = fc.oneof(
      fc.tuple(fc.constant(power), fc.constantFrom('dB', 'percent', 'ppm', 'unit')),
      fc.tuple(fc.constant(ratio), fc.constantFrom('dB')),
      fc.tuple(fc.constant(current), fc.constantFrom('percent', 'ppm', 'unit')),
      fc.tuple(fc.constant(frequency), fc.constantFrom('ppm', 'Hz')),
    );
    fc.assert(
      fc.property(cases, fc.array(size, { minLength: 1, maxLength: 4 }), ([of, unit], sizes) => {
        const terms = sizes.map((halfWidth): SpecHalfWidth => ({ halfWidth, unit }));
        expect(readAccuracy(accuracyText(terms, of), of)).toEqual({ ok: true, terms });
      }),
    );
  });

  it('never throws', () => {
    fc.assert(
      fc.property(fc.string(), fc.constantFrom(power, ratio, current, frequency, heat), (text, of) => {
        expect(typeof readAccuracy(text, of).ok).toBe('boolean');
      }),
    );
  });
});
