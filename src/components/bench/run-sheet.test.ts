import { describe, expect, it } from 'vitest';
import { judgeRun } from '~/domain/bench/judge-run';
import { ruleForDestination } from '~/domain/bench/limit-rules';
import { knownQuantity } from '~/domain/bench/quantities';
import type { Verdict } from '~/domain/bench/types';
import type { Station, StationReading } from '~/schemas/bench-station';
import { entryOrder, gridOf, judgeStation, neighbour, notesOf, unitHint } from './run-sheet';
import type { Equipment, Point } from './run-sheet';
import { scratchReading } from './scratch';

const point = (id: number, quantityKey: string, change: Partial<Point> = {}): Point => ({
  ...{ id, position: id, quantity: knownQuantity(quantityKey), band: '20m', freqHz: 14_060_000 },
  ...{ lower: null, upper: null, limitRule: 'fixed', decision: 'simple', required: true },
  ...{ condition: null, supplyV: null, method: '' },
  ...change,
});

/** Two bands of power, current and the efficiency between them in the order of testing, and heat of the whole unit. */
const points = [
  point(1, 'rf_power', { lower: 4 }),
  point(2, 'current_key_down', { upper: 1.2 }),
  point(3, 'efficiency', { lower: 0.4 }),
  point(4, 'frequency_error', { lower: -100, upper: 100 }),
  point(5, 'rf_power', { band: '40m', freqHz: 7_030_000, lower: 4 }),
  point(6, 'current_key_down', { band: '40m', freqHz: 7_030_000, upper: 1.2 }),
  point(7, 'efficiency', { band: '40m', freqHz: 7_030_000, lower: 0.4 }),
  point(8, 'frequency_error', { band: '40m', freqHz: 7_030_000, lower: -100, upper: 100 }),
  point(9, 'junction_temperature', { band: null, freqHz: null, upper: 373 }),
];

const accuracy = { accuracy: [{ halfWidth: 1, unit: 'percent' as const }], resolution: null };
const equipment: Equipment = {
  instruments: [
    {
      ...{ revisionId: 7, number: 'PM-2', name: 'Power meter' },
      spec: {
        ...{ grade: 'unchecked', checkedAgainst: null, linearityDb: null, flatnessDb: null, vswr: null },
        ...{ ownDistortionDbc: null, detector: null, calibration: null },
        quantities: { rf_power: accuracy, current_key_down: accuracy },
      },
    },
  ],
  paths: [],
};

const reading = (id: number, of: Point, value: number): StationReading => ({
  ...{ id, testPointId: of.id, readingNo: 1, quantityKey: of.quantity.key, band: of.band, freqHz: of.freqHz },
  ...{ enteredText: String(value), enteredUnit: of.quantity.unit, value, voided: false, voidReason: null },
  ...{
    atMost: false,
    attenuationHeld: false,
    source: 'typed',
    instrumentRevisionId: 7,
    pathRevisionId: null,
  },
  ...{ instrumentNumber: 'PM-2', pathNumber: null, instrument: equipment.instruments[0]?.spec ?? null },
  ...{ path: null, at: '2027-03-09T10:00:00.000Z', version: 1 },
});

function stationWith(readings: StationReading[]): Station {
  return {
    run: {
      ...{ id: 1, runNo: 1, state: 'open', result: null, stoppedEarly: false, testerUserId: 1 },
      ...{ testerName: 'Ines', supplyV: 13.8, ambientC: 21, firmwareVersion: null, alignment: {} },
      ...{ openedText: '', closedText: null, version: 1, isNewest: true },
    },
    unit: { serial: 'H3-0147', line: '', quiet: '', ratedPowerW: 5 },
    plan: { letter: 'A', supplyV: 13.8, loadOhm: 50 },
    limits: { title: '', source: '', note: '', destination: '' },
    ...{ earlier: [], certificateNumber: null, kept: [], sweeps: [] },
    sheet: {
      ...{ points, readings, concessions: [], rule: ruleForDestination('DE', '2027-03-09') },
      context: {
        ...{ destinationCountry: 'DE', region: 1, supplyV: 13.8, ambientC: 21, outputStage: null },
        testedOn: '2027-03-09',
      },
    },
  };
}

describe('the grid of a run with computed points', () => {
  const grid = gridOf(points);

  it('shows them in their column', () => {
    expect(grid.columns.map(({ key }) => key)).toContain('efficiency');
    expect(grid.rows.flatMap(({ cells }) => cells).filter((cell) => cell !== undefined)).toHaveLength(9);
  });

  it.each([
    ['band', [1, 2, 4, 5, 6, 8]],
    ['quantity', [1, 5, 2, 6, 4, 8]],
  ] as const)('passes over them with Enter, by %s', (by, ids) => {
    expect(entryOrder(grid, by)).toEqual(ids);
  });

  it('passes over them with the arrows, and stays where nothing else follows', () => {
    expect(neighbour(grid, 2, { rows: 0, columns: 1 })).toBe(4);
    expect(neighbour(grid, 4, { rows: 0, columns: -1 })).toBe(2);
    // Beneath the last band there is only what is computed for the whole unit.
    expect(neighbour(grid, 5, { rows: 1, columns: 0 })).toBe(5);
  });

  it('says nothing of what may be typed into them', () => {
    expect(unitHint(knownQuantity('efficiency'))).toBe('');
    expect(unitHint(knownQuantity('current_key_down'))).toBe('mA or A');
  });

  it('gives them a value once what they follow from is read', () => {
    const [power, current] = points;
    if (power === undefined || current === undefined) throw new Error('There are no points.');
    const { judgements } = judgeStation(stationWith([reading(1, power, 5), reading(2, current, 0.8)]));
    // P / (V·I) = 5 / (13.8 · 0.8)
    expect(judgements.get(3)?.value).toBeCloseTo(0.4529, 4);
    expect(judgements.get(7)).toMatchObject({ value: null, n: 0 });
  });
});

describe('a scratch reading', () => {
  const [power, current] = points;
  if (power === undefined || current === undefined) throw new Error('There are no points.');
  const entry = { ...{ columnUnit: 'W', instrumentRevisionId: 7, pathRevisionId: null }, confirmed: false };

  it('is judged as the reading alone would be', () => {
    const before = stationWith([reading(1, power, 3)]);
    const scratch = scratchReading(before, equipment, power, { ...entry, text: '5' });
    const alone = judgeRun(stationWith([reading(1, power, 5)]).sheet).judgements.get(power.id);
    expect(scratch).toMatchObject({ ok: true, text: '5', judgement: { verdict: 'pass', value: 5, n: 1 } });
    expect(scratch.ok && scratch.judgement).toEqual(alone);
  });

  it('never enters the sheet of the station', () => {
    const station = stationWith([reading(1, power, 3), reading(2, current, 0.8)]);
    const before = structuredClone(station);
    const judged = judgeStation(station);
    scratchReading(station, equipment, power, { ...entry, text: '5' });
    scratchReading(station, equipment, current, { ...entry, text: '900 mA', columnUnit: 'A' });
    expect(station).toEqual(before);
    expect(judgeStation(station)).toEqual(judged);
    expect(judged.judgements.get(power.id)?.value).toBe(3);
  });

  it('is judged anew on a closed run, whose own verdict stays', () => {
    const kept = {
      ...{
        testPointId: power.id,
        verdict: 'fail' as const,
        value: 3,
        U: 0.1,
        k: 2,
        n: 1,
        lower: 4,
        upper: null,
      },
      ...{ ruleKey: null, ruleText: 'Test plan', pConform: 0, concession: null },
    };
    const station = { ...stationWith([reading(1, power, 3)]), kept: [kept] };
    const scratch = scratchReading(station, equipment, power, { ...entry, text: '5' });
    expect(scratch).toMatchObject({ ok: true, judgement: { verdict: 'pass' } });
    expect(judgeStation(station).judgements.get(power.id)?.verdict).toBe('fail');
  });

  it('is asked about where it is far above what the rig is rated for, and taken once confirmed', () => {
    const station = stationWith([]);
    const asked = scratchReading(station, equipment, power, { ...entry, text: '60 W' });
    expect(asked).toMatchObject({ ok: false, ask: true });
    const taken = scratchReading(station, equipment, power, { ...entry, text: '60 W', confirmed: true });
    expect(taken).toMatchObject({ ok: true, judgement: { value: 60 } });
  });

  it('says why it cannot be read', () => {
    const read = scratchReading(stationWith([]), equipment, power, { ...entry, text: 'about five' });
    expect(read).toMatchObject({ ok: false, ask: false });
  });
});

describe('a concession', () => {
  const power = point(1, 'rf_power', { lower: 2 });
  const station = stationWith([reading(1, power, 0.5)]);
  const conceded: Station = {
    ...station,
    sheet: { ...station.sheet, concessions: [{ testPointId: power.id, reason: 'A demonstrator.' }] },
  };
  const notes = (of: Station, verdict: Verdict) => {
    const { judgements } = judgeStation(of);
    const judgement = judgements.get(power.id);
    if (judgement === undefined) throw new Error('every point is judged');
    return notesOf(power, { ...judgement, verdict }, of, judgements);
  };

  it('is said in the cell that it lets go, and in no other', () => {
    expect(notes(conceded, 'fail')).toContain('let go by concession');
    expect(notes(conceded, 'pass')).not.toContain('let go by concession');
    expect(notes(station, 'fail')).not.toContain('let go by concession');
  });
});
