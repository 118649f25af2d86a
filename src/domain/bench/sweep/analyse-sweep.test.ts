import { describe, expect, it } from 'vitest';
import type { PathSpec } from '~/domain/bench/types';
import { analyseSweep } from './analyse-sweep';
import type { SweepTest } from './analyse-sweep';
import { readSweep } from './read-sweep';
import type { Sweep } from './types';

const STEP_HZ = 10e3;

/** A made sweep: a floor at −90 dBm with a ripple, and lines at the frequencies given. */
function sweepOf(
  lines: [number, number][],
  options: { stopHz?: number; preamble?: string; unit?: string } = {},
): Sweep {
  const { stopHz = 75e6, preamble = 'RBW: 10 kHz\nDetector: peak\n', unit = 'dBm' } = options;
  const rows: string[] = [];
  const levels = new Map(lines.map(([freqHz, level]) => [Math.round(freqHz / STEP_HZ), level]));
  for (let index = 0; index * STEP_HZ <= stopHz; index += 1) {
    rows.push(`${String(index * STEP_HZ)},${String(levels.get(index) ?? -90 + (index % 3))}`);
  }
  const result = readSweep(
    new TextEncoder().encode(`${preamble}Frequency (Hz),Level (${unit})\n${rows.join('\n')}`),
  );
  if (!result.ok) throw new Error(result.reason);
  return result;
}

const CLEAN: [number, number][] = [
  [0, -3],
  [7.03e6, -5.3],
  [14.06e6, -56.4],
  [21.09e6, -66.9],
];

function analyse(sweep: Sweep, test: Partial<SweepTest> = {}) {
  const result = analyseSweep(sweep, { testFreqHz: 7.03e6, path: null, ...test });
  if (!result.ok) throw new Error(result.reason);
  return result;
}

function refusal(sweep: Sweep, test: Partial<SweepTest> = {}): string {
  const result = analyseSweep(sweep, { testFreqHz: 7.03e6, path: null, ...test });
  if (result.ok) throw new Error('it was analysed');
  return result.reason;
}

describe('analyseSweep', () => {
  it('finds carrier, harmonics and floor, and ignores the spike at 0 Hz', () => {
    const found = analyse(sweepOf(CLEAN));
    expect(found.fundamental).toEqual({ freqHz: 7.03e6, levelDbm: -5.3, unitDbm: -5.3 });
    expect(found.harmonics.map((each) => each.order)).toEqual([2, 3, 4, 5, 6, 7, 8, 9, 10]);
    expect(found.harmonics[0]?.meterDbc).toBeCloseTo(-51.1, 9);
    expect(found.harmonics[1]?.meterDbc).toBeCloseTo(-61.6, 9);
    expect(found.noiseFloorDbm).toBe(-89);
    expect(found.others).toEqual([]);
  });

  it('counts a harmonic that is hidden in the noise as at most what stands there', () => {
    const [second, , fourth] = analyse(sweepOf(CLEAN)).harmonics;
    expect(second?.atMost).toBe(false);
    expect(fourth).toMatchObject({ order: 4, atMost: true, levelDbm: -88 });
  });

  it('corrects each harmonic by the path at its own frequency', () => {
    const path: PathSpec = {
      parts: [
        {
          name: 'Tap',
          loss: [
            [1e6, 40],
            [30e6, 41],
          ],
          uncertaintyDb: 0.2,
          k: 2,
          flatnessDb: null,
          ratingW: null,
          vswr: null,
        },
      ],
    };
    const found = analyse(sweepOf(CLEAN), { path });
    expect(found.harmonics[0]?.unitDbc).toBeCloseTo(-51.1 + Math.log(2) / Math.log(30), 9);
    expect(found.fundamental.unitDbm).toBeCloseTo(-5.3 + 40 + Math.log(7.03) / Math.log(30), 9);
    expect(found.notCovered[0]?.order).toBe(5);
    expect(found.notCovered[0]?.reason).toMatch(/Tap has losses/);
  });

  it('lists other peaks near their limit, not the skirt of the carrier', () => {
    const lines: [number, number][] = [...CLEAN, [7.04e6, -40], [8.93e6, -60], [33e6, -75]];
    const all = analyse(sweepOf(lines)).others.map((each) => each.freqHz);
    expect(all).toEqual([8.93e6, 33e6]);
    const near = analyse(sweepOf(lines), { limitDbcAt: () => -47.8 }).others.map((each) => each.freqHz);
    expect(near).toEqual([8.93e6]);
  });

  it('names the orders that the sweep does not reach', () => {
    const found = analyse(sweepOf(CLEAN, { stopHz: 30e6 }));
    expect(found.notCovered.map((each) => each.order)).toEqual([5, 6, 7, 8, 9, 10]);
  });
});

describe('analyseSweep refuses', () => {
  it.each<[string, () => string, RegExp]>([
    [
      'one that ends below the third harmonic',
      () => refusal(sweepOf(CLEAN, { stopHz: 20e6 })),
      /below the third harmonic/,
    ],
    ['one without a carrier', () => refusal(sweepOf([])), /holds no carrier/],
    [
      'one of another band',
      () => refusal(sweepOf([[14.06e6, -5]])),
      /nearest strong signal is at 14\.06 MHz.*another band/,
    ],
    [
      'one that does not cover the test',
      () => refusal(sweepOf(CLEAN), { testFreqHz: 144e6 }),
      /does not cover/,
    ],
    [
      'one that was overloaded',
      () => refusal(sweepOf(CLEAN, { preamble: 'RBW: 10 kHz\nDetector: peak\nReference Level: -10 dBm\n' })),
      /overloaded: 7\.03 MHz reaches/,
    ],
    [
      'wide points without a peak detector',
      () => refusal(sweepOf(CLEAN, { preamble: 'RBW: 300 Hz\nDetector: Sample\n' })),
      /lines may fall between/,
    ],
    [
      'wide points with the wrong peak detector',
      () => refusal(sweepOf(CLEAN, { preamble: 'RBW: 300 Hz\nDetector: Negative Peak\n' })),
      /lines may fall between/,
    ],
    ['levels in dB', () => refusal(sweepOf(CLEAN, { unit: 'dB' })), /not calibrated/],
    ['levels without a unit', () => refusal(sweepOf(CLEAN, { unit: 'y' })), /unit of the level is not known/],
  ])('%s', (_, reason, expected) => {
    expect(reason()).toMatch(expected);
  });
});
