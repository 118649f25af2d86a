import { describe, expect, it } from 'vitest';
import { NOTHING_READ } from '~/domain/bench/judge-point';
import { ruleForDestination } from '~/domain/bench/limit-rules';
import { shippedQuantity } from '~/domain/bench/quantities';
import type { InstrumentSpec, TestPoint } from '~/domain/bench/types';
import { writeRunParts } from './write-statement';
import type { JudgedPoint, RunFacts } from './write-statement';

function judged(key: string, change: Partial<TestPoint & JudgedPoint['judgement']> = {}): JudgedPoint {
  const quantity = shippedQuantity(key);
  if (quantity === undefined) throw new Error(`There is no ${key}.`);
  const { id = 1, lower = null, upper = null, method = '', supplyV = null, ...judgement } = change;
  const point: TestPoint = {
    ...{ id, position: 1, quantity, band: '40m', freqHz: 7_030_000, lower, upper, method, supplyV },
    ...{ limitRule: 'fixed', decision: 'simple', required: true, condition: null },
  };
  const read = { value: 3.12, atMeter: 3.12, verdict: 'pass' as const, n: 1, lower, upper };
  return { point, judgement: { ...NOTHING_READ, ...read, ...judgement }, concession: null };
}

function write(points: JudgedPoint[], change: Partial<RunFacts> = {}) {
  return writeRunParts({
    ...{ points, unread: [], spans: [], historyPointIds: new Set<number>(), destinationCountry: 'US' },
    ...{ rule: ruleForDestination('US', '2027-03-09'), instruments: [], paths: [] },
    ...change,
  });
}

const spec: InstrumentSpec = {
  ...{ grade: 'accredited', checkedAgainst: null, quantities: {}, linearityDb: null, flatnessDb: null },
  ...{ vswr: null, ownDistortionDbc: null, detector: null, calibration: null },
};
const calibration = {
  ...{ expanded: 0.2, unit: 'dB' as const, k: 2, calibratedOn: '2027-01-04', dueOn: '2028-01-04' },
  ...{ laboratory: 'Hollin Metrology', certificateNumber: 'HM-7' },
};

describe('a point as it is stated', () => {
  it.each([
    ['rf_power', { lower: 2.4, upper: 3.6 }, '2.40 to 3.60 W'],
    ['frequency_error', { lower: -100, upper: 100 }, '±100 Hz'],
    ['current_key_down', { upper: 0.7 }, '≤ 700 mA'],
    ['rf_power', { lower: 2 }, '≥ 2.00 W'],
    ['rf_power', {}, ''],
  ])('has its limit in words, with a unit said once: %s %j', (key, limits, text) => {
    expect(write([judged(key, limits)]).points[0]?.limitText).toBe(text);
  });

  it('says what it rests on where it was not just read', () => {
    const { points } = write(
      [
        judged('rf_power', { id: 1 }),
        judged('efficiency', { id: 2 }),
        judged('sensitivity', { id: 3, method: '10 dB (S+N)/N in 500 Hz', supplyV: 11 }),
      ],
      { historyPointIds: new Set([3]) },
    );
    expect(points.map(({ origin }) => origin)).toEqual([undefined, 'computed', 'history']);
    expect(points[2]?.condition).toBe('10 dB (S+N)/N in 500 Hz, supply 11.00 V');
    // A member that says nothing is not there at all: it would be part of what is signed.
    expect(Object.keys(points[0] ?? {})).not.toContain('origin');
  });

  it('bears a concession only where its limit is not met', () => {
    const let1 = (verdict: 'pass' | 'fail') => ({
      ...judged('rf_power', { verdict }),
      concession: 'Agreed with the buyer.',
    });
    const { points } = write([let1('fail'), let1('pass')]);
    expect(points.map(({ concession }) => concession)).toEqual(['Agreed with the buyer.', null]);
  });

  it('says of a value in the noise that it is at most that', () => {
    expect(write([judged('harmonic_2', { value: -71, atMeter: -71, atMost: true })]).points[0]?.text).toBe(
      '≤ −71.0 dBc',
    );
  });
});

describe('an instrument as it is stated', () => {
  it.each([
    [{ calibration }, 'by Hollin Metrology, on 4 January 2027, certificate HM-7', '2028-01-04'],
    [{ grade: 'checked' as const, checkedAgainst: 'PM-2, 1 March 2027' }, 'against PM-2, 1 March 2027', null],
    [{ grade: 'unchecked' as const }, '', null],
  ])('has its grade, and who stands for it: %j', (change, gradeNote, calibrationDueOn) => {
    const instruments = [{ number: 'SA-1', name: 'Analyser', spec: { ...spec, ...change } }];
    expect(write([judged('rf_power')], { instruments }).instruments).toMatchObject([
      { name: 'SA-1 Analyser', gradeNote, calibrationDueOn },
    ]);
  });
});
