import { describe, expect, it } from 'vitest';
import { carrierOf, judgePoint } from './judge-point';
import type { JudgeContext } from './judge-point';
import { ruleForDestination } from './limit-rules';
import { knownQuantity } from './quantities';
import type { InstrumentSpec, PathPart, PathSpec, Reading, TestPoint } from './types';
import { dbmToW } from './units';

const instrument: InstrumentSpec = {
  grade: 'checked',
  checkedAgainst: 'the works reference, 2 January 2027',
  quantities: {
    rf_power: { accuracy: [{ halfWidth: 0.2, unit: 'dB' }], resolution: { halfWidth: 0.01, unit: 'dB' } },
    harmonic: { accuracy: [], resolution: { halfWidth: 0.1, unit: 'dB' } },
    current_key_down: {
      accuracy: [
        { halfWidth: 1, unit: 'percent' },
        { halfWidth: 0.002, unit: 'unit' },
      ],
      resolution: { halfWidth: 0.001, unit: 'unit' },
    },
    frequency_error: {
      accuracy: [{ halfWidth: 0.5, unit: 'ppm' }],
      resolution: { halfWidth: 1, unit: 'Hz' },
    },
  },
  linearityDb: 0.3,
  flatnessDb: 0.4,
  vswr: 1.2,
  ownDistortionDbc: -75,
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

const tap: PathPart = {
  partNumber: null,
  name: 'Dummy load tap',
  loss: [
    [1e6, 40],
    [60e6, 40.6],
  ],
  uncertaintyDb: 0.2,
  k: 2,
  flatnessDb: 0.1,
  ratingW: 25,
  vswr: 1.1,
};
const path: PathSpec = { direction: 'to_instrument', parts: [tap] };
const shortPath: PathSpec = {
  direction: 'to_instrument',
  parts: [
    {
      ...tap,
      loss: [
        [1e6, 40],
        [10e6, 40],
      ],
    },
  ],
};

const context: JudgeContext = {
  destinationCountry: 'DE',
  region: 1,
  supplyV: 13.8,
  ambientC: null,
  outputStage: null,
  testedOn: '2027-03-09',
  instrument,
  path,
  carrier: { powerW: 3, uDb: 0.2 },
  rule: ruleForDestination('DE', '2027-03-09'),
};

const point = (over: Partial<TestPoint>): TestPoint => ({
  id: 1,
  position: 1,
  quantity: knownQuantity('rf_power'),
  band: '40m',
  freqHz: 7.03e6,
  lower: 2.5,
  upper: null,
  limitRule: 'fixed',
  decision: 'guarded',
  required: true,
  condition: null,
  supplyV: null,
  method: '',
  ...over,
});

const reading = (quantityKey: string, value: number, over: Partial<Reading> = {}): Reading => ({
  quantityKey,
  band: '40m',
  freqHz: 7.03e6,
  enteredText: String(value),
  enteredUnit: '',
  value,
  voided: false,
  ...over,
});

const harmonic = point({
  quantity: knownQuantity('harmonic_2'),
  lower: null,
  limitRule: 'spurious',
  decision: 'simple',
});

describe('judgePoint, power', () => {
  it('corrects by the path, decides in dB, and gives the interval in W as it is', () => {
    const judged = judgePoint(point({}), [reading('rf_power', dbmToW(-5.26))], context);
    // 40 dB plus the share of 0.6 dB at 7.03 MHz in log frequency: 40.2858 dB.
    expect(judged.value).toBeCloseTo(dbmToW(-5.26 + 40 + (0.6 * Math.log(7.03)) / Math.log(60)), 9);
    expect(judged).toMatchObject({ verdict: 'pass', uUnit: 'dB', k: 2, n: 1, ruleKey: null, stopped: null });
    const { value, low, high, U } = judged;
    if (value === null || low === null || high === null || U === null) throw new Error('no interval');
    expect(high / value).toBeCloseTo(10 ** (U / 10), 9);
    expect(value / low).toBeCloseTo(10 ** (U / 10), 9);
    expect(high - value).toBeGreaterThan(value - low);
    expect(judged.pConform).toBeGreaterThan(0.99);
    expect(judged.marginText).toMatch(/in hand$/);
  });

  it('is too close just above the limit and fails well under it', () => {
    const atUnit = (powerW: number) =>
      judgePoint(point({}), [reading('rf_power', powerW)], { ...context, path: null });
    expect(atUnit(2.55).verdict).toBe('too_close');
    expect(atUnit(2.45).verdict).toBe('too_close');
    expect(atUnit(2.1).verdict).toBe('fail');
    expect(atUnit(2.1).marginText).toBe('0.400 W under the limit');
    expect(
      judgePoint(point({ decision: 'simple' }), [reading('rf_power', 2.55)], { ...context, path: null })
        .verdict,
    ).toBe('pass');
  });

  it('leaves voided readings out and takes the mean in W of the others, with a type A line', () => {
    const readings = [2.8, 3.0, 3.2].map((value) => reading('rf_power', value));
    const judged = judgePoint(point({}), [...readings, reading('rf_power', 0.1, { voided: true })], {
      ...context,
      path: null,
    });
    expect(judged.n).toBe(3);
    expect(judged.value).toBeCloseTo(3, 12);
    expect(judged.uComponents.find((line) => line.name === 'Repeatability')).toMatchObject({ nu: 2 });
    expect(judged.k).toBeGreaterThan(2);
  });

  it('is not run without a reading', () => {
    expect(judgePoint(point({}), [], context)).toMatchObject({ verdict: 'not_run', n: 0, stopped: null });
    const voided = judgePoint(point({}), [reading('rf_power', 3, { voided: true })], context);
    expect(voided).toMatchObject({ verdict: 'not_run', n: 0 });
  });

  it('hands its power on as the carrier', () => {
    const judged = judgePoint(point({}), [reading('rf_power', 3)], { ...context, path: null });
    expect(carrierOf(judged)).toEqual({ powerW: 3, uDb: (judged.U ?? 0) / (judged.k ?? 1) });
  });
});

describe('judgePoint, ratio under an emission rule', () => {
  it('takes the limit from the measured power and guards it whatever the point says', () => {
    const judged = judgePoint(harmonic, [reading('harmonic_2', -54.7)], context);
    expect(judged.upper).toBeCloseTo(-(43 + 10 * Math.log10(3)), 9);
    expect(judged).toMatchObject({ verdict: 'pass', ruleKey: 'itu_category_a', uUnit: 'dB' });
    expect(judged.guard).toBe(judged.U);
    expect(judged.ruleText).toMatch(/category A.*at least 47\.8 dB/);
    expect(judged.marginText).toMatch(/^6\.\d dB in hand$/);
  });

  it('keeps linearity, flatness and mismatch at both frequencies; calibration and flat loss cancel', () => {
    const names = judgePoint(harmonic, [reading('harmonic_2', -54.7)], context).uComponents.map(
      (line) => line.name,
    );
    expect(names).toEqual(
      expect.arrayContaining([
        'Linearity',
        'Flatness',
        'Dummy load tap, flatness',
        'Mismatch, Dummy load tap to instrument, at the carrier',
        'Mismatch, Dummy load tap to instrument, at the product',
        "Analyser's own distortion",
        'Limit, by the measured power',
      ]),
    );
    expect(names).not.toContain('Calibration');
    expect(names).not.toContain('Instrument specification');
  });

  it('does not move the limit by the power where the attenuation is fixed', () => {
    const us = judgePoint(harmonic, [reading('harmonic_2', -54.7)], {
      ...context,
      rule: ruleForDestination('US', '2027-03-09'),
    });
    expect(us.upper).toBe(-43);
    expect(us.uComponents.map((line) => line.name)).not.toContain('Limit, by the measured power');
  });

  it('corrects the ratio by the path at both frequencies', () => {
    const judged = judgePoint(harmonic, [reading('harmonic_2', -54.7)], context);
    expect(judged.atMeter).toBe(-54.7);
    expect((judged.value ?? 0) - -54.7).toBeCloseTo((0.6 * Math.log(2)) / Math.log(60), 9);
  });

  it.each<[string, Partial<JudgeContext>, RegExp]>([
    ['without the power of the band', { carrier: null }, /measure the power first/],
    ['without a rule', { rule: null }, /No emission rule/],
    ['without an instrument', { instrument: null }, /Choose the instrument/],
    ['with the calibration overdue', { testedOn: '2027-07-01' }, /was due on 2027-06-30/],
    [
      'outside the band of the Region',
      { region: 1, carrier: { powerW: 3, uDb: 0.2 } },
      /outside 40 m in Region 1/,
    ],
    [
      'with an unknown distortion',
      { instrument: { ...instrument, ownDistortionDbc: null } },
      /10 dB more attenuation/,
    ],
    [
      'with a distortion as strong as the reading',
      { instrument: { ...instrument, ownDistortionDbc: -56 } },
      /10 dB more/,
    ],
    ['with a path that ends below the harmonic', { path: shortPath }, /10 MHz only/],
  ])('gives no verdict %s', (name, over, reason) => {
    const tested = name.startsWith('outside') ? { ...harmonic, freqHz: 7.25e6 } : harmonic;
    const judged = judgePoint(tested, [reading('harmonic_2', -54.7)], { ...context, ...over });
    expect(judged.verdict).toBe('not_run');
    expect(judged.stopped).toMatch(reason);
  });

  it('lets the check with more attenuation stand for a stated distortion', () => {
    const shown = { ...context, instrument: { ...instrument, ownDistortionDbc: null } };
    expect(
      judgePoint(harmonic, [reading('harmonic_2', -54.7, { attenuationHeld: true })], shown).verdict,
    ).toBe('pass');
  });

  it('an overdue calibration does not stop a limit of the works itself', () => {
    const judged = judgePoint(point({}), [reading('rf_power', 4)], {
      ...context,
      path: null,
      testedOn: '2027-07-01',
    });
    expect(judged.verdict).toBe('pass');
  });

  it('a works may ask for more than the law, never for less', () => {
    const upper = (value: number) =>
      judgePoint({ ...harmonic, upper: value }, [reading('harmonic_2', -54.7)], context).upper;
    expect(upper(-60)).toBe(-60);
    expect(upper(-30)).toBeCloseTo(-47.77, 2);
  });

  it('judges each spurious product and lets the worst decide', () => {
    const spurious = { ...harmonic, quantity: knownQuantity('spurious') };
    const judged = judgePoint(
      spurious,
      [
        reading('spurious', -60, { freqHz: 11e6 }),
        reading('spurious', -40, { freqHz: 9e6 }),
        reading('spurious', -40, { freqHz: 12e6, voided: true }),
      ],
      context,
    );
    expect(judged).toMatchObject({ verdict: 'fail', atMeter: -40, n: 1 });
  });
});

describe('judgePoint, other quantities', () => {
  it('judges a current by percent and digits', () => {
    const current = point({ quantity: knownQuantity('current_key_down'), lower: null, upper: 0.65 });
    const judged = judgePoint(current, [reading('current_key_down', 0.612)], context);
    expect(judged).toMatchObject({ verdict: 'pass', uUnit: 'A', value: 0.612 });
    const expected = Math.hypot(0.00612 / Math.sqrt(3), 0.002 / Math.sqrt(3), 0.0005 / Math.sqrt(3));
    expect(judged.U).toBeCloseTo(2 * expected, 9);
    expect(judged.marginText).toBe('38.0 mA in hand');
  });

  it('judges a frequency error within both limits, ppm of the test frequency', () => {
    const error = point({ quantity: knownQuantity('frequency_error'), lower: -100, upper: 100 });
    const judged = judgePoint(error, [reading('frequency_error', 38)], context);
    expect(judged).toMatchObject({ verdict: 'pass', uUnit: 'Hz' });
    expect(judged.U).toBeCloseTo(2 * Math.hypot(3.515 / Math.sqrt(3), 0.5 / Math.sqrt(3)), 9);
    expect(judgePoint(error, [reading('frequency_error', -98)], context).verdict).toBe('too_close');
    expect(judgePoint(error, [reading('frequency_error', 140)], context).verdict).toBe('fail');
  });

  it('answers a check by yes and no, without an instrument', () => {
    const check = point({ quantity: knownQuantity('check'), lower: null });
    const of = (value: number) =>
      judgePoint(check, [reading('check', value)], { ...context, instrument: null });
    expect(of(1)).toMatchObject({ verdict: 'pass', marginText: 'yes' });
    expect(of(0)).toMatchObject({ verdict: 'fail', marginText: 'no' });
  });

  it('refuses an instrument without a specification for the quantity', () => {
    const rest = point({ quantity: knownQuantity('current_rest'), lower: null, upper: 0.1 });
    expect(judgePoint(rest, [reading('current_rest', 0.05)], context)).toMatchObject({
      verdict: 'not_run',
      stopped: 'The instrument has no specification for current, at rest.',
    });
  });
});
