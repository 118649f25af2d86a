import { describe, expect, it } from 'vitest';
import { bandOf, bandOfEmission } from '~/domain/bench/bands';
import { limitDbc, referenceBandwidthHz, ruleByKey, ruleForDestination } from '~/domain/bench/limit-rules';
import type { ChosenRule } from '~/domain/bench/limit-rules';
import { judge } from '~/domain/bench/decision';
import type { BandKey, Region } from '~/domain/bench/types';

const today = '2027-03-09';

function chosen(key: string): ChosenRule {
  const rule = key === 'strictest' ? ruleForDestination(null, today) : ruleByKey(key);
  if (rule === null) throw new Error(`There is no rule ${key}.`);
  return rule;
}

function limit(key: string, powerW: number, txFreqHz: number, productFreqHz = 2 * txFreqHz) {
  const result = limitDbc(chosen(key), { powerW, txFreqHz, productFreqHz });
  if (!result.ok) throw new Error(result.reason);
  return result;
}

describe('47 CFR 97.307(d): below 30 MHz, at least 43 dB (text read)', () => {
  it.each([
    [5, -6.01],
    [1, -13.0],
    [10, -3.0],
    [0.5, -16.01],
  ])('%d W: %d dBm', (powerW, dbm) => {
    const result = limit('us_97_307', powerW, 7.03e6);
    expect(result.limitDbc).toBe(-43);
    expect(Math.abs(result.limitDbm - dbm)).toBeLessThanOrEqual(0.005);
  });

  it('is 250.6 µW at 5 W', () => {
    expect(10 ** (limit('us_97_307', 5, 7.03e6).limitDbm / 10) * 1000).toBeCloseTo(250.6, 1);
  });
});

describe('47 CFR 97.307(e): 30 to 225 MHz (text read; the piecewise form read in quotation)', () => {
  it.each([
    [0.05, 10],
    [0.1, 10],
    [0.2, 20],
    [0.25, 25],
    [5, 25],
    [25, 25],
  ])('%d W: %d µW', (powerW, microW) => {
    expect(10 ** (limit('us_97_307', powerW, 50.1e6).limitDbm / 10) * 1000).toBeCloseTo(microW, 6);
  });

  it.each([
    [0.1, 40.0],
    [5, 53.01],
    [25, 60.0],
    [100, 60.0],
  ])('%d W: %d dB below the fundamental', (powerW, db) => {
    expect(-limit('us_97_307', powerW, 50.1e6).limitDbc).toBeCloseTo(db, 2);
  });

  it('is −16.02 dBm at 5 W', () => {
    expect(limit('us_97_307', 5, 50.1e6).limitDbm).toBeCloseTo(-16.02, 2);
  });
});

describe('47 CFR 97.307(d) for transmitters installed by 1 January 2003 (text read)', () => {
  it.each([
    [4.99, 30],
    [5, 40],
    [400, 40],
    // 13 + 10·lg P binds above 500 W (read in quotation).
    [1000, 43],
  ])('%d W: %d dB', (powerW, db) => {
    expect(-limit('us_97_307_before_2003', powerW, 7.03e6).limitDbc).toBeCloseTo(db, 1);
  });

  it('is for reference alone: no unit is judged by it', () => {
    for (const country of ['US', 'DE', null]) {
      const rules = ruleForDestination(country, today).rules.map(({ key }) => key);
      expect(rules).not.toContain('us_97_307_before_2003');
    }
  });
});

describe('reference bandwidths of the Radio Regulations, Appendix 3 (from memory)', () => {
  it.each([
    [100e3, 1e3],
    [150e3, 10e3],
    [29.9e6, 10e3],
    [30e6, 100e3],
    [999e6, 100e3],
    [1e9, 1e6],
  ])('at %d Hz: %d Hz', (freqHz, bandwidthHz) => {
    expect(referenceBandwidthHz(freqHz)).toBe(bandwidthHz);
  });
});

describe('47 CFR 97.307(d), (e): the transmit frequency decides, not the product (reading of the text)', () => {
  const verdict = (txFreqHz: number) =>
    judge({
      value: -44,
      U: 0,
      lower: null,
      upper: limit('us_97_307', 5, txFreqHz).limitDbc,
      decision: 'guarded',
    });

  it('passes a 56.2 MHz product of a 28.1 MHz transmitter at −44 dBc', () => {
    expect(verdict(28.1e6)).toBe('pass');
  });

  it('fails the same ratio from a 50.1 MHz transmitter of 5 W', () => {
    expect(verdict(50.1e6)).toBe('fail');
  });
});

describe('ITU Radio Regulations App. 3 / ITU-R SM.329 category A, amateur below 30 MHz', () => {
  // Numbers read in quotations (list posts by a member of the ITU group that wrote it); the table's wording is from
  // memory. The columns are computed from min(43 + 10·lg P, 50).
  it.each([
    // PEP W, dBm, required dBc, absolute limit dBm, FCC (d) dBm
    [0.5, 26.99, 39.99, -13.0, -16.01],
    [1, 30.0, 43.0, -13.0, -13.0],
    [2, 33.01, 46.01, -13.0, -9.99],
    [3, 34.771, 47.771, -13.0, -8.229],
    [5, 36.99, 49.99, -13.0, -6.01],
    [5.0119, 37.0, 50.0, -13.0, -6.0],
    [10, 40.0, 50.0, -10.0, -3.0],
    [20, 43.01, 50.0, -6.99, 0.01],
  ])('%d W', (powerW, dbm, required, absoluteDbm, fccDbm) => {
    const itu = limit('itu_category_a', powerW, 7.03e6);
    expect(itu.limitDbm - itu.limitDbc).toBeCloseTo(dbm, 3);
    expect(-itu.limitDbc).toBeCloseTo(required, 3);
    expect(itu.limitDbm).toBeCloseTo(absoluteDbm, 3);
    expect(limit('us_97_307', powerW, 7.03e6).limitDbm).toBeCloseTo(fccDbm, 3);
  });

  it.each([
    [0.5, 43, 39.99],
    [1, 43, 43],
    [5, 43, 49.99],
  ])('against the FCC at %d W: %d and %d dB (read in quotation, computed)', (powerW, fcc, itu) => {
    expect(-limit('us_97_307', powerW, 7.03e6).limitDbc).toBeCloseTo(fcc, 2);
    expect(-limit('itu_category_a', powerW, 7.03e6).limitDbc).toBeCloseTo(itu, 2);
    expect(-limit('strictest', powerW, 7.03e6, 14.06e6).limitDbc).toBeCloseTo(Math.max(fcc, itu, 40), 2);
  });
});

describe('Category A general, above 30 MHz: 43 + 10·lg P (handheld harmonics report, VK6FLAB, VK6PAW, VK6WR 2023)', () => {
  it.each([
    [4.69, 49.71],
    [4.73, 49.75],
    [5.44, 50.36],
  ])('%d W: %d dB', (powerW, db) => {
    expect(-limit('itu_category_a', powerW, 145e6).limitDbc).toBeCloseTo(db, 2);
  });

  it('ends at 70 dB (from memory)', () => {
    expect(limit('itu_category_a', 5000, 145e6).limitDbc).toBe(-70);
  });
});

describe('Austria, AFV § 17: by the frequency of the product (text read; f/35 inferred from continuity)', () => {
  it.each([
    [36, 41.58],
    [42, 50.22],
    [45, 54.09],
    [49.98, 59.98],
    [50, 60.0],
    [34.9, 40],
    [2, 40],
    [999, 60],
  ])('product at %d MHz: %d dB', (productMHz, db) => {
    expect(-limit('at_afv_17', 5, 18.1e6, productMHz * 1e6).limitDbc).toBeCloseTo(db, 2);
  });

  it('takes the less strict of 60 dB and −36 dBm below 1.7 MHz, and −30 dBm above 1 GHz', () => {
    expect(limit('at_afv_17', 5, 7.03e6, 1e6).limitDbc).toBeCloseTo(-60, 6);
    expect(limit('at_afv_17', 0.1, 7.03e6, 1e6).limitDbm).toBeCloseTo(-36, 6);
    expect(limit('at_afv_17', 5, 7.03e6, 1.2e9).limitDbm).toBeCloseTo(-30, 6);
  });

  it('says nothing without the frequency of the product or below 150 kHz', () => {
    expect(limitDbc(chosen('at_afv_17'), { powerW: 5, txFreqHz: 7e6, productFreqHz: null }).ok).toBe(false);
    expect(limitDbc(chosen('at_afv_17'), { powerW: 5, txFreqHz: 7e6, productFreqHz: 100e3 }).ok).toBe(false);
  });
});

describe('rule by destination', () => {
  it.each([
    ['US', 'us_97_307'],
    ['pr', 'us_97_307'],
    ['AT', 'at_afv_17'],
    ['DE', 'itu_category_a'],
    [null, 'strictest'],
  ])('%s: %s', (country, rule) => {
    expect(ruleForDestination(country, today).key).toBe(rule);
  });
});

describe('band edges', () => {
  // 47 CFR 97.301(b), its columns by Region (text read), but for the rows marked.
  it.each<[BandKey, Region, number, number]>([
    ['160m', 1, 1810, 1850],
    ['160m', 2, 1800, 2000],
    ['160m', 3, 1800, 2000],
    ['80m', 1, 3500, 3800],
    ['80m', 2, 3500, 4000],
    ['80m', 3, 3500, 3900],
    ['60m', 1, 5351.5, 5366.5], // WRC-15, from memory
    ['40m', 1, 7000, 7200], // from memory
    ['40m', 2, 7000, 7300],
    ['40m', 3, 7000, 7200], // from memory
    ['30m', 1, 10100, 10150],
    ['20m', 2, 14000, 14350],
    ['17m', 3, 18068, 18168],
    ['15m', 1, 21000, 21450],
    ['12m', 2, 24890, 24990], // read in quotation
    ['10m', 2, 28000, 29700], // read in quotation
    ['6m', 1, 50000, 52000], // WRC-19, from memory
    ['6m', 2, 50000, 54000],
    ['6m', 3, 50000, 54000],
  ])('%s in Region %i: %d to %d kHz', (band, region, lowKHz, highKHz) => {
    expect(bandOf(lowKHz * 1e3, region)).toBe(band);
    expect(bandOf(highKHz * 1e3, region)).toBe(band);
    expect(bandOf(lowKHz * 1e3 - 1, region)).toBeNull();
    expect(bandOf(highKHz * 1e3 + 1, region)).toBeNull();
  });

  it('holds 14 350.0 kHz and not 14 350.001 kHz', () => {
    expect(bandOf(14_350_000, 1)).toBe('20m');
    expect(bandOf(14_350_001, 1)).toBeNull();
  });

  it('puts a 2.8 kHz upper sideband at a dial of 14.348 MHz outside (NCVEC question E1A01)', () => {
    expect(bandOfEmission(14_348_000, 14_350_800, 2)).toBeNull();
    expect(bandOfEmission(14_347_000, 14_349_800, 2)).toBe('20m');
  });

  it.each<Region>([1, 2, 3])(
    'holds the mixing product of 11.059 and 4.032 MHz in 40 m, Region %i (common practice)',
    (region) => {
      expect(bandOf(11_059_000 - 4_032_000, region)).toBe('40m');
      expect(bandOf(11_059_000 + 4_032_000, region)).toBeNull();
    },
  );
});
