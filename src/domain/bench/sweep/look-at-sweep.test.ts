import { describe, expect, it } from 'vitest';
import type { RunSheet } from '~/domain/bench/judge-run';
import { shippedQuantity } from '~/domain/bench/quantities';
import { SHIPPED_RULES } from '~/domain/bench/shipped-rules';
import { ruleForDestination } from '~/domain/bench/limit-rules';
import type { BandKey, TestPoint } from '~/domain/bench/types';
import { lookAtSweep } from './look-at-sweep';
import type { RunForSweep } from './look-at-sweep';

const frequencies: [BandKey, number][] = [
  ['40m', 7.03e6],
  ['20m', 14.06e6],
];

function pointsOf(keys: readonly string[]): TestPoint[] {
  return frequencies.flatMap(([band, freqHz], row) =>
    keys.map((key, column) => {
      const quantity = shippedQuantity(key);
      if (quantity === undefined) throw new Error(`There is no ${key}.`);
      return {
        ...{ id: 10 * (row + 1) + column, position: 10 * (row + 1) + column, quantity, band, freqHz },
        ...{ lower: null, upper: null, required: true, condition: null, supplyV: null, method: '' },
        ...{ limitRule: 'spurious' as const, decision: 'guarded' as const },
      };
    }),
  );
}

function runOf(keys: readonly string[]): RunForSweep {
  const sheet: RunSheet = {
    points: pointsOf(keys),
    readings: [],
    concessions: [],
    rule: ruleForDestination('US', '2027-03-09', SHIPPED_RULES),
    context: {
      ...{ destinationCountry: 'US', region: 2, supplyV: 13.8, ambientC: 20 },
      ...{ outputStage: null, testedOn: '2027-03-09' },
    },
  };
  return { sheet, ratedPowerW: 5, frequencyPlan: null, path: null };
}

/** Lines over a floor of −95 dBm, points 10 kHz apart. */
function sweepOf(lines: [number, number][], preamble = 'RBW: 10 kHz\nDetector: peak\n'): Uint8Array {
  const levels = new Map(lines.map(([freqHz, level]) => [Math.round(freqHz / 10e3), level]));
  const rows = Array.from(
    { length: 8001 },
    (_, index) => `${String(index * 10e3)},${String(levels.get(index) ?? -95 + (index % 3))}`,
  );
  return new TextEncoder().encode(`${preamble}Frequency (Hz),Level (dBm)\n${rows.join('\n')}`);
}

const CLEAN: [number, number][] = [
  [14.06e6, -5],
  [28.12e6, -60],
  [42.18e6, -66],
];
const all = ['harmonic_2', 'harmonic_3', 'spurious'];

function look(lines: [number, number][], keys: readonly string[] = all, band: BandKey | null = null) {
  const result = lookAtSweep(sweepOf(lines), {}, band, runOf(keys));
  if (!result.ok) throw new Error(result.reason);
  return result;
}

describe('a look at a sweep', () => {
  it('tells the band by the carrier and says what each point would get', () => {
    const { band, readings, refusal } = look(CLEAN);
    expect({ band, refusal }).toEqual({ band: '20m', refusal: null });
    expect(readings.map(({ testPointId, meterDbc, atMost }) => ({ testPointId, meterDbc, atMost }))).toEqual([
      { testPointId: 20, meterDbc: -55, atMost: false },
      { testPointId: 21, meterDbc: -61, atMost: false },
      { testPointId: 22, meterDbc: -88, atMost: true },
    ]);
  });

  it('says that a sweep fits no band, and shows it all the same', () => {
    const { band, refusal, trace, readings } = look([[3.56e6, -5]]);
    expect(band).toBeNull();
    expect(refusal).toMatch(/fits no band.*at 3\.56 MHz.*40 m at 7\.03 MHz, 20 m at 14\.06 MHz/);
    expect(trace.length).toBeGreaterThan(100);
    expect(readings).toEqual([]);
  });

  it('holds a sweep against the band that a person names', () => {
    expect(look(CLEAN, all, '40m').refusal).toMatch(/another band/);
  });

  it('goes by the rated power until the power is measured, and says so', () => {
    const { analysis, notes } = look(CLEAN);
    // 47 CFR 97.307(d): 43 dB at 5 W.
    expect(analysis?.harmonics[0]?.limitDbc).toBeCloseTo(-43, 6);
    expect(notes.join(' ')).toMatch(/not measured yet/);
  });

  it('writes down each product within 20 dB of its limit, and none below', () => {
    const { readings } = look([...CLEAN, [18.97e6, -60], [33.4e6, -67.9], [37e6, -68.1]]);
    const products = readings.filter(({ testPointId }) => testPointId === 22);
    expect(products.map(({ freqHz, name }) => ({ freqHz, name }))).toEqual([
      { freqHz: 18.97e6, name: 'unexplained' },
      { freqHz: 33.4e6, name: 'unexplained' },
    ]);
  });

  it('writes a harmonic near its limit that has no point down as a product', () => {
    const { readings } = look([...CLEAN, [56.24e6, -52], [70.3e6, -80]]);
    const products = readings.filter(({ testPointId }) => testPointId === 22);
    expect(products).toMatchObject([{ name: '4th harmonic', freqHz: 56.24e6, meterDbc: -47 }]);
  });

  it('says what the plan has no point for', () => {
    const { readings, notes } = look([...CLEAN, [18.97e6, -50]], ['harmonic_2']);
    expect(readings).toHaveLength(1);
    expect(notes.join(' ')).toMatch(/no point for other products.*unexplained at 18\.97 MHz/);
  });

  it('says how many of a forest of products it lists', () => {
    const forest = Array.from({ length: 60 }, (_, index): [number, number] => [45e6 + index * 200e3, -50]);
    const { analysis, notes } = look([...CLEAN, ...forest]);
    expect(analysis?.others).toHaveLength(40);
    expect(notes.join(' ')).toMatch(/59 products stand out; the strongest 40 are listed/);
  });
});
