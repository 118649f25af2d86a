import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PathSpec } from '~/domain/bench/types';
import { analyseSweep, whyNoVerdict } from './analyse-sweep';
import type { SweepAnalysis, SweepProduct, SweepTest } from './analyse-sweep';
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
      direction: 'to_instrument',
      parts: [
        {
          partNumber: null,
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

describe('a carrier', () => {
  it('3 kHz off is measured where it is, and said', () => {
    const points = 30_000;
    const rows = Array.from({ length: points }, (_, index) => {
      const freqHz = index * 1e3;
      const order = freqHz / 7.033e6;
      const level = order === 1 ? -5 : order === 2 ? -50 : order === 3 ? -62 : -90;
      return `${String(freqHz)},${String(level)}`;
    });
    const text = `RBW: 1 kHz\nDetector: peak\nFreq (Hz),dBm\n${rows.join('\n')}`;
    const sweep = readSweep(new TextEncoder().encode(text));
    if (!sweep.ok) throw new Error(sweep.reason);
    const found = analyse(sweep);
    expect(found.fundamental.freqHz).toBe(7.033e6);
    expect(found.harmonics[0]).toMatchObject({ freqHz: 14.066e6, meterDbc: -45 });
    expect(found.notes).toEqual(['The carrier lies 3 kHz above the test frequency of 7.03 MHz.']);
  });

  it('that lies on the test frequency needs no words', () => {
    expect(analyse(sweepOf(CLEAN))).toMatchObject({ notes: [], questions: [] });
  });

  it('of two, the nearer to the test frequency is taken, the other asked about and listed', () => {
    const found = analyse(sweepOf([...CLEAN, [7.2e6, -3.1]]));
    expect(found.fundamental.freqHz).toBe(7.03e6);
    expect(found.questions).toHaveLength(1);
    expect(found.questions[0]).toMatchObject({ about: 'carriers' });
    expect(found.questions[0]?.text).toMatch(/7\.03 MHz and 7\.2 MHz, 2\.2 dB apart/);
    expect(found.others[0]?.freqHz).toBe(7.2e6);
  });

  it('whose second is within the skirt is asked about all the same', () => {
    const carriers: [number, number][] = [
      [7.03e6, -5.3],
      [7.05e6, -9],
    ];
    const sweep = sweepOf(carriers, { preamble: 'RBW: 1 kHz\nDetector: peak\n' });
    const near = { ...sweep, understood: { ...sweep.understood, stepHz: 1e3 } };
    expect(analyse(near).questions[0]?.text).toMatch(/Two strong signals/);
  });
});

describe('a flank', () => {
  it('with ripples on it is one line', () => {
    const flank: [number, number][] = [];
    for (let step = 1; step <= 30; step += 1) {
      const level = -5.3 - 2 * step + (step % 2 === 0 ? 3 : 0);
      flank.push([7.03e6 + step * STEP_HZ, level], [7.03e6 - step * STEP_HZ, level]);
    }
    expect(analyse(sweepOf([...CLEAN, ...flank])).others).toEqual([]);
  });
});

describe('a sweep on which no verdict can rest', () => {
  it('can be looked at', () => {
    const uncalibrated = sweepOf(CLEAN, { unit: 'dB' });
    const found = analyse(uncalibrated, { lookOnly: true });
    expect(found.harmonics[0]?.meterDbc).toBeCloseTo(-51.1, 9);
    expect(whyNoVerdict(uncalibrated)).toMatch(/not calibrated/);
  });

  it('is none where the points lie closer than the bandwidth, whatever the detector', () => {
    expect(whyNoVerdict(sweepOf(CLEAN, { preamble: 'RBW: 30 kHz\nDetector: Sample\n' }))).toBeNull();
  });
});

describe('analyseSweep, its law', () => {
  it('moves every level by k and no ratio where the sweep is scaled by k dB', () => {
    const line = fc.tuple(fc.integer({ min: 30, max: 4200 }), fc.integer({ min: -700, max: -200 }));
    fc.assert(
      fc.property(fc.array(line, { maxLength: 12 }), fc.integer({ min: -40, max: 4 }), (extra, k) => {
        const lines = [
          ...extra.map(([at, tenths]): [number, number] => [at * STEP_HZ, tenths / 10]),
          ...CLEAN,
        ];
        const sweep = sweepOf(lines, { stopHz: 42e6 });
        const { freqHz, level } = sweep.points;
        const scaled = { ...sweep, points: { freqHz, level: level.map((each) => each + k) } };
        const [before, after] = [analyse(sweep), analyse(scaled)];
        const moved = (a: SweepProduct | undefined, b: SweepProduct): boolean =>
          a !== undefined &&
          a.freqHz === b.freqHz &&
          Math.abs(a.levelDbm + k - b.levelDbm) < 1e-9 &&
          Math.abs(a.meterDbc - b.meterDbc) < 1e-9 &&
          Math.abs(a.unitDbc - b.unitDbc) < 1e-9;
        const all = (found: SweepAnalysis): SweepProduct[] => [...found.harmonics, ...found.others];
        return (
          Math.abs(before.noiseFloorDbm + k - after.noiseFloorDbm) < 1e-9 &&
          Math.abs(before.fundamental.levelDbm + k - after.fundamental.levelDbm) < 1e-9 &&
          all(before).length === all(after).length &&
          all(after).every((product, index) => moved(all(before)[index], product)) &&
          after.harmonics.every(({ atMost }, index) => before.harmonics[index]?.atMost === atMost)
        );
      }),
      { numRuns: 40 },
    );
  });
});

describe('analyseSweep refuses', () => {
  it.each<[string, () => string, RegExp]>([
    [
      'one that ends at the second harmonic',
      () => refusal(sweepOf(CLEAN, { stopHz: 14.06e6 })),
      /ends at 14\.06 MHz, below the third harmonic\. Sweep up to 70\.3 MHz/,
    ],
    [
      'one that reaches just over its reference, not at a peak of its own',
      () => refusal(sweepOf([...CLEAN, [7.04e6, -5.2]], { preamble: 'Ref Level: -5.2 dBm\n' })),
      /overloaded: 7\.04 MHz reaches its reference level of −5\.20 dBm/,
    ],
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
