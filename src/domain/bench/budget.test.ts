import { describe, expect, it } from 'vitest';
import { buildBudget } from './budget';
import { knownQuantity } from './quantities';
import type { InstrumentSpec, PathSpec } from './types';

const instrument: InstrumentSpec = {
  grade: 'unchecked',
  checkedAgainst: null,
  quantities: {
    rf_power: {
      accuracy: [{ halfWidth: 5, unit: 'percent' }],
      resolution: { halfWidth: 0.02, unit: 'unit' },
    },
  },
  linearityDb: 0.3,
  flatnessDb: 0.4,
  vswr: null,
  ownDistortionDbc: -70,
  detector: null,
  calibration: {
    expanded: 0.2,
    unit: 'dB',
    k: 2,
    calibratedOn: null,
    laboratory: null,
    certificateNumber: null,
    dueOn: '2027-06-30',
  },
};

const path: PathSpec = {
  direction: 'to_instrument',
  parts: [
    {
      partNumber: null,
      name: 'Tap',
      loss: [
        [1e6, 40],
        [60e6, 40],
      ],
      uncertaintyDb: 0.2,
      k: 2,
      flatnessDb: null,
      ratingW: null,
      vswr: null,
    },
  ],
};

function budget(over: Partial<Parameters<typeof buildBudget>[0]>) {
  return buildBudget({
    quantity: knownQuantity('harmonic_2'),
    value: -60,
    freqHz: 7e6,
    productFreqHz: 14e6,
    instrument,
    path,
    unitVswr: null,
    attenuationHeld: false,
    extra: [],
    ...over,
  });
}

function lineOf(name: string, over: Partial<Parameters<typeof buildBudget>[0]>) {
  const built = budget(over);
  if (!built.ok) throw new Error(built.reason);
  return built.components.find((line) => line.name === name);
}

describe('a ratio', () => {
  it('is moved up to 3.3 dB by a product of the analyser 10 dB under it, U-shaped', () => {
    const line = lineOf("Analyser's own distortion", {});
    expect(line?.value).toBeCloseTo(3.302, 3);
    expect(line?.u).toBeCloseTo(3.302 / Math.SQRT2, 3);
  });

  it('is refused where that product is too near, and without it once shown with more attenuation', () => {
    expect(budget({ value: -65 })).toMatchObject({ ok: false });
    expect(budget({ value: -65, attenuationHeld: true })).toMatchObject({ ok: true });
  });

  it('loses the loss of a path that is the same at both frequencies', () => {
    expect(lineOf('Tap, loss difference', {})).toBeUndefined();
  });

  it('keeps it in full where the table corrects the ratio and no flatness is stated', () => {
    const loss: [number, number][] = [
      [1e6, 40],
      [60e6, 41],
    ];
    const parts = path.parts.map((part) => ({ ...part, loss }));
    expect(lineOf('Tap, loss difference', { path: { ...path, parts } })).toMatchObject({
      value: 0.2,
      divisor: 2,
      u: 0.1,
    });
  });

  it.each(['linearityDb', 'flatnessDb'] as const)('is refused without %s', (key) => {
    expect(budget({ instrument: { ...instrument, [key]: null } })).toMatchObject({ ok: false });
  });
});

describe('a power', () => {
  const power = { quantity: knownQuantity('rf_power'), value: 1, productFreqHz: null };

  it('takes percent and W as dB of the reading, and the calibration by its k', () => {
    expect(lineOf('Instrument specification', power)?.value).toBeCloseTo((10 / Math.LN10) * 0.05, 9);
    expect(lineOf('Resolution', power)?.value).toBeCloseTo((10 / Math.LN10) * 0.01, 9);
    expect(lineOf('Calibration', power)).toMatchObject({ value: 0.2, u: 0.1 });
    expect(lineOf('Tap', power)).toMatchObject({ u: 0.1 });
  });

  it('has a mismatch at every joint whose two sides are known', () => {
    const vswr = (value: number) => ({
      ...path,
      parts: path.parts.map((part) => ({ ...part, vswr: value })),
    });
    const over = { ...power, path: vswr(1.2), unitVswr: 1.5 };
    expect(lineOf('Mismatch, unit to Tap', over)?.value).toBeCloseTo(0.1594, 4);
    expect(lineOf('Mismatch, Tap to instrument', over)).toBeUndefined();
  });
});
