import { describe, expect, it } from 'vitest';
import { minorDigitsOf } from '~/domain/money/currencies';

// ISO 4217 minor units; the list is from memory, not read in the standard.
describe('minor units of ISO 4217 (from memory)', () => {
  it.each([
    [0, 'JPY KRW VND CLP ISK UGX XAF XPF PYG RWF'],
    [2, 'EUR USD GBP CHF SEK HUF TWD COP IDR'],
    [3, 'KWD BHD OMR TND JOD LYD IQD'],
    [4, 'CLF UYW'],
  ])('%s digits: %s', (digits, codes) => {
    for (const code of codes.split(' ')) expect([code, minorDigitsOf(code)]).toEqual([code, digits]);
  });

  it('are unknown for a code that is none', () => {
    expect(minorDigitsOf('QQQ')).toBeNull();
  });
});
