import { describe, expect, it } from 'vitest';
import { judgeRun } from './judge-run';
import type { RunReading, RunSheet } from './judge-run';
import { ruleForDestination } from './limit-rules';
import { knownQuantity } from './quantities';
import type { InstrumentSpec, TestPoint } from './types';

const instrument: InstrumentSpec = {
  grade: 'accredited',
  checkedAgainst: null,
  quantities: {
    rf_power: { accuracy: [{ halfWidth: 0.2, unit: 'dB' }], resolution: null },
    power_after_minute: { accuracy: [{ halfWidth: 0.2, unit: 'dB' }], resolution: null },
    current_key_down: { accuracy: [{ halfWidth: 1, unit: 'percent' }], resolution: null },
    current_no_drive: { accuracy: [{ halfWidth: 1, unit: 'percent' }], resolution: null },
  },
  linearityDb: null,
  flatnessDb: null,
  vswr: null,
  ownDistortionDbc: null,
  detector: null,
  calibration: null,
};

const point = (id: number, key: string, change: Partial<TestPoint> = {}): TestPoint => ({
  id,
  position: id,
  quantity: knownQuantity(key),
  band: '40m',
  freqHz: 7.03e6,
  lower: null,
  upper: null,
  limitRule: 'fixed',
  decision: 'guarded',
  required: true,
  condition: null,
  supplyV: null,
  method: '',
  ...change,
});

const read = (testPointId: number, quantityKey: string, value: number): RunReading => ({
  testPointId,
  quantityKey,
  band: '40m',
  freqHz: 7.03e6,
  enteredText: String(value),
  enteredUnit: '',
  value,
  voided: false,
  instrument,
  path: null,
});

// The computed points stand first in the plan: the order of judging must not depend on it.
const points = [
  point(1, 'efficiency', { lower: 0.3 }),
  point(2, 'junction_temperature', { upper: 423.15 }),
  point(3, 'rf_power', { lower: 2 }),
  point(4, 'current_key_down', { upper: 1 }),
  point(5, 'current_no_drive', { upper: 0.2 }),
];
const readings = [read(3, 'rf_power', 5), read(4, 'current_key_down', 0.7), read(5, 'current_no_drive', 0.1)];

const sheet = (change: Partial<RunSheet> = {}): RunSheet => ({
  points,
  readings,
  concessions: [],
  rule: ruleForDestination('DE', '2027-03-09'),
  context: {
    destinationCountry: 'DE',
    region: 1,
    supplyV: 12,
    ambientC: 25,
    outputStage: { devices: 2, thetaKPerW: 26, duty: 1, hasSink: true },
    testedOn: '2027-03-09',
  },
  ...change,
});

const judged = (id: number, change: Partial<RunSheet> = {}) => {
  const found = judgeRun(sheet(change)).judgements.get(id);
  if (found === undefined) throw new Error('every point is judged');
  return found;
};

describe('a quantity that is computed from others of its band', () => {
  it('is judged with the uncertainty that its inputs carry over', () => {
    const efficiency = judged(1);
    expect(efficiency).toMatchObject({ verdict: 'pass', n: 1, atMeter: null, uUnit: '1' });
    expect(efficiency.value).toBeCloseTo(5 / (12 * 0.7), 12);
    // First order: 0.2 dB is 4.605 % of the power, 1 % of the current, both half-widths of rectangles.
    const relative = Math.hypot(0.2 * 0.230259, 0.01) / Math.sqrt(3);
    expect((efficiency.U ?? 0) / 2 / (efficiency.value ?? 1)).toBeCloseTo(relative, 4);
    expect(efficiency.uComponents.map(({ name }) => name)).toEqual(['Power', 'Current, key down']);
  });

  it('takes the facts of the output stage from the plan and the ambient from the run', () => {
    const heatW = 12 * (0.7 - 0.1) - 5;
    expect(judged(2).value).toBeCloseTo(298.15 + (26 * heatW) / 2, 9);
  });

  it('takes the supply of its own point before that of the run', () => {
    const own = points.map((each) => (each.id === 1 ? { ...each, supplyV: 10 } : each));
    expect(judged(1, { points: own }).value).toBeCloseTo(5 / (10 * 0.7), 12);
  });

  it.each<[string, Partial<RunSheet>, RegExp]>([
    ['a reading', { readings: readings.slice(1) }, /still needed: power\./],
    ['the supply', { context: { ...sheet().context, supplyV: null } }, /still needed: the supply voltage/],
  ])('has no verdict without %s, and says so', (_, change, reason) => {
    expect(judged(1, change)).toMatchObject({ verdict: 'not_run', value: null });
    expect(judged(1, change).stopped).toMatch(reason);
    expect(judgeRun(sheet(change)).result.result).toBe('incomplete');
  });

  it('names all that the plan does not state', () => {
    const context = { ...sheet().context, outputStage: null, ambientC: null };
    expect(judged(2, { context }).stopped).toMatch(
      /the ambient temperature, the duty .*, the thermal resistance .* and the number of output devices/,
    );
  });

  it('fails under its limit and is too close near it', () => {
    const at = (lower: number) =>
      judged(1, { points: points.map((each) => (each.id === 1 ? { ...each, lower } : each)) }).verdict;
    expect([at(0.5), at(0.595), at(0.7)]).toEqual(['pass', 'too_close', 'fail']);
  });
});

describe('a concession', () => {
  const strict = points.map((each) => (each.id === 1 ? { ...each, lower: 0.7 } : each));

  it('lets a works’ own limit go', () => {
    expect(judgeRun(sheet({ points: strict })).result.result).toBe('failed');
    const concessions = [{ testPointId: 1, reason: 'It is a demonstrator.' }];
    expect(judgeRun(sheet({ points: strict, concessions })).result.result).toBe('passed_by_concession');
  });

  it('counts for nothing on a legal limit, whoever wrote it down', () => {
    const legal = point(6, 'harmonic_2', { limitRule: 'spurious' });
    const analyser = { ...instrument, linearityDb: 0.3, flatnessDb: 0.2, ownDistortionDbc: -90 };
    const bad = { ...read(6, 'harmonic_2', -20), instrument: analyser };
    const run = judgeRun(
      sheet({
        points: [...points, legal],
        readings: [...readings, bad],
        concessions: [{ testPointId: 6, reason: 'Nobody may.' }],
      }),
    );
    expect(run.judgements.get(6)?.verdict).toBe('fail');
    expect(run.result.result).toBe('failed');
  });
});
