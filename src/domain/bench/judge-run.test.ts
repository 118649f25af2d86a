import { describe, expect, it } from 'vitest';
import { judgeRun, pointLabel } from './judge-run';
import type { RunReading, RunSheet } from './judge-run';
import { ruleForDestination } from './limit-rules';
import { knownQuantity } from './quantities';
import { resolvePoints } from './resolve-points';
import type { InstrumentSpec, TestPoint } from './types';

const instrument: InstrumentSpec = {
  grade: 'accredited',
  checkedAgainst: null,
  quantities: {
    rf_power: { accuracy: [{ halfWidth: 0.2, unit: 'dB' }], resolution: null },
    harmonic: { accuracy: [], resolution: null },
  },
  linearityDb: 0.3,
  flatnessDb: 0.2,
  vswr: null,
  ownDistortionDbc: -90,
  detector: null,
  calibration: null,
};

const point = (id: number, quantityKey: string, change: Partial<TestPoint> = {}): TestPoint => ({
  id,
  position: id,
  quantity: knownQuantity(quantityKey),
  band: '20m',
  freqHz: 14_060_000,
  lower: null,
  upper: null,
  limitRule: 'spurious',
  decision: 'guarded',
  required: true,
  condition: null,
  supplyV: null,
  method: '',
  ...change,
});

const reading = (testPointId: number, quantityKey: string, value: number): RunReading => ({
  testPointId,
  quantityKey,
  band: '20m',
  freqHz: 14_060_000,
  enteredText: String(value),
  enteredUnit: '',
  value,
  voided: false,
  instrument,
  path: null,
});

// The harmonic stands before the power in the plan: the order of judging must not depend on it.
const points = [point(1, 'harmonic_2'), point(2, 'rf_power', { lower: 0.1, limitRule: 'fixed' })];
const sheet = (readings: RunReading[], change: Partial<RunSheet> = {}): RunSheet => ({
  points,
  readings,
  concessions: [],
  rule: ruleForDestination('DE', '2027-03-09'),
  context: {
    destinationCountry: 'DE',
    region: 1,
    supplyV: 13.8,
    ambientC: null,
    outputStage: null,
    testedOn: '2027-03-09',
  },
  ...change,
});

describe('judging a run', () => {
  it('reaches no verdict from readings of two instruments, and one again when those of one are voided', () => {
    const other = { ...reading(2, 'rf_power', 3), instrument: { ...instrument, vswr: 1.2 } };
    const mixed = judgeRun(sheet([reading(2, 'rf_power', 3), other]));
    expect(mixed.judgements.get(2)).toMatchObject({ verdict: 'not_run', n: 2 });
    expect(mixed.judgements.get(2)?.stopped).toContain('different instruments');
    const voided = judgeRun(sheet([reading(2, 'rf_power', 3), { ...other, voided: true }]));
    expect(voided.judgements.get(2)).toMatchObject({ verdict: 'pass', n: 1 });
  });

  // ITU-R SM.329 category A: 43 + 10·lg(P), at most 50 dB.
  it.each([
    [1, -43],
    [2.61, -47.166],
    [5, -49.99],
    [10, -50],
  ])('lets the limit of a harmonic follow the measured %d W', (powerW, limit) => {
    const { judgements } = judgeRun(sheet([reading(1, 'harmonic_2', -60), reading(2, 'rf_power', powerW)]));
    expect(judgements.get(1)?.upper).toBeCloseTo(limit, 2);
  });

  it('turns the verdict of a harmonic with the power, though its own reading stays', () => {
    const verdictAt = (powerW: number) =>
      judgeRun(sheet([reading(1, 'harmonic_2', -45), reading(2, 'rf_power', powerW)])).judgements.get(1)
        ?.verdict;
    expect([verdictAt(0.5), verdictAt(5)]).toEqual(['pass', 'fail']);
  });

  it('has no verdict on a harmonic without a power, and says so', () => {
    const { judgements, result } = judgeRun(sheet([reading(1, 'harmonic_2', -60)]));
    expect(judgements.get(1)).toMatchObject({ verdict: 'not_run' });
    expect(result).toMatchObject({ result: 'incomplete', canClose: false });
    expect(result.why.join(' ')).toContain('measure the power first');
  });

  it('does not let a voided power set a limit', () => {
    const voided = { ...reading(2, 'rf_power', 1), voided: true };
    const { judgements } = judgeRun(sheet([reading(1, 'harmonic_2', -60), voided]));
    expect(judgements.get(1)?.verdict).toBe('not_run');
  });

  it('names a point as a person does', () => {
    expect(pointLabel(point(1, 'harmonic_2'))).toBe('20 m, 2nd harmonic');
    expect(pointLabel({ band: null, quantity: knownQuantity('current_rest') })).toBe('Current, at rest');
  });
});

describe('resolving the points of a plan', () => {
  const plan = [
    { position: 3, condition: 'band.20m and not filter.wide' },
    { position: 1, condition: null },
    { position: 2, condition: 'band.30m' },
  ];

  it('keeps those whose condition holds, in order', () => {
    const resolved = resolvePoints(plan, new Set(['band.20m']));
    expect(resolved.ok && resolved.points.map(({ position }) => position)).toEqual([1, 3]);
  });

  it('refuses a plan with a condition that cannot be read', () => {
    const resolved = resolvePoints([{ position: 4, condition: 'band.20m and and' }], new Set());
    expect(resolved).toMatchObject({ ok: false });
    expect(!resolved.ok && resolved.reason).toContain('test point 4');
  });
});
