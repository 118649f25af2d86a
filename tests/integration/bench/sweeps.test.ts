import { beforeEach, describe, expect, it } from 'vitest';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { judgeRun } from '~/domain/bench/judge-run';
import { POST as looksDoor } from '~/pages/api/runs/[id]/sweep-looks';
import { POST as sweepsDoor } from '~/pages/api/runs/[id]/sweeps';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { files, ledgerEntries, models, readings, sweeps } from '~/server/db/schema';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { readStation } from '~/server/queries/bench/read-station';
import { openRun } from '~/server/services/bench/open-run';
import { readSweepIntoRun } from '~/server/services/bench/read-sweep-into-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { reviseFrequencyPlan } from '~/server/services/bench/revise-frequency-plan';
import { sweepLookSchema } from '~/schemas/bench-sweeps';
import { buildPlan, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { callDoor, problemIn } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let runId: number;

const peakDetector = { rbwHz: 30e3, detector: 'positive peak' };

/**
 * A spectrum of a 14.06 MHz carrier at −6 dBm with its harmonics this far down, points 25 kHz apart.
 * @param others frequency and dB below the carrier
 */
function buildSweep(
  harmonicsDb: number[],
  {
    highestHz = 80e6,
    others = [],
    carrierHz = 14.06e6,
  }: { highestHz?: number; others?: [number, number][]; carrierHz?: number } = {},
): Uint8Array {
  const rows: string[] = ['Frequency (Hz),Level (dBm)'];
  const products = new Map(others.map(([freqHz, down]) => [Math.round(freqHz / 25e3), down]));
  for (let freqHz = 100e3; freqHz <= highestHz; freqHz += 25e3) {
    const order = Math.round(freqHz / carrierHz);
    const isPeak = order >= 1 && Math.abs(freqHz - order * carrierHz) <= 12.5e3;
    const down = order === 1 ? 0 : (harmonicsDb[order - 2] ?? 90);
    const noise = -95 + ((freqHz / 25e3) % 7) / 7;
    const product = products.get(Math.round(freqHz / 25e3));
    const line = isPeak ? -6 - down : product === undefined ? noise : -6 - product;
    rows.push(`${freqHz},${Math.max(noise, line)}`);
  }
  return new TextEncoder().encode(rows.join('\n'));
}

function load(bytes: Uint8Array, change: Partial<Parameters<typeof readSweepIntoRun>[0]> = {}) {
  const { instrumentRevisionId, pathRevisionId } = bench;
  return readSweepIntoRun(
    {
      ...{ runId, bytes, instrumentRevisionId, pathRevisionId, hints: peakDetector },
      ...{ band: '20m', name: 'holm3-0147-20m.csv', ...change },
    },
    bench.ctx,
  );
}

const storedReadings = () => database.db.select().from(readings).orderBy(readings.id);
const spurious = async () => (await storedReadings()).filter(({ quantityKey }) => quantityKey === 'spurious');

async function expectNothingStored(): Promise<void> {
  expect(await database.db.$count(sweeps)).toBe(0);
  expect(await database.db.$count(readings)).toBe(0);
  expect(await database.db.$count(files)).toBe(0);
}

beforeEach(async () => {
  const on = { band: '20m', freqHz: 14_060_000, lowerLimit: null, upperLimit: null, condition: null };
  bench = await seedBench(database.db, [
    ...buildPlan([{ band: '20m', freqHz: 14_060_000 }]),
    { ...on, quantityKey: 'spurious', limitRule: 'spurious', decision: 'guarded', required: true },
  ]);
  ({ runId } = await openRun({ serial: bench.serial }, bench.ctx));
});

describe('a sweep', () => {
  it('fills the harmonics of its band at the meter, and says that nothing else is stronger than the noise', async () => {
    const { readings: count, band } = await load(buildSweep([51.1, 61.6]));
    expect({ count, band }).toEqual({ count: 3, band: '20m' });
    const of = (key: string, rows: Awaited<ReturnType<typeof storedReadings>>) =>
      rows.find(({ quantityKey }) => quantityKey === key);
    const rows = await storedReadings();
    expect(of('harmonic_2', rows)).toMatchObject({ source: 'sweep', enteredUnit: 'dBc', atMost: false });
    expect(of('harmonic_2', rows)?.value).toBeCloseTo(-51.1, 6);
    expect(of('harmonic_3', rows)?.value).toBeCloseTo(-61.6, 6);
    expect(of('spurious', rows)).toMatchObject({ atMost: true });
    expect(of('spurious', rows)?.value).toBeLessThan(-88);
  });

  it('finds its band by its carrier', async () => {
    expect((await load(buildSweep([51.1, 61.6]), { band: null })).band).toBe('20m');
    const [row] = await database.db.select().from(sweeps);
    expect(row?.band).toBe('20m');
  });

  it('is shown with its trace, and its file is kept', async () => {
    await load(buildSweep([51.1, 61.6]));
    const station = await readStation(database.db, runId);
    expect(station?.sweeps[0]).toMatchObject({ fileName: 'holm3-0147-20m.csv', band: '20m' });
    expect(Math.max(...(station?.sweeps[0]?.trace ?? []).map(([, dbc]) => dbc))).toBe(0);
    expect(station?.sweeps[0]?.trace.length).toBeLessThanOrEqual(800);
  });

  it('hidden in the noise counts with the noise, as at most', async () => {
    await load(buildSweep([51.1, 99]));
    const station = await readStation(database.db, runId);
    const third = station?.sheet.readings.find(({ quantityKey }) => quantityKey === 'harmonic_3');
    expect(third?.atMost).toBe(true);
  });
});

describe('other products of a sweep', () => {
  const others: [number, number][] = [
    [18.975e6, 52],
    [33.2e6, 60],
  ];

  it('are a reading each, at their own frequency', async () => {
    await load(buildSweep([51.1, 61.6], { others }));
    const rows = await spurious();
    expect(rows.map(({ freqHz, atMost, readingNo }) => ({ freqHz, atMost, readingNo }))).toEqual([
      { freqHz: 18.975e6, atMost: false, readingNo: 1 },
      { freqHz: 33.2e6, atMost: false, readingNo: 2 },
    ]);
    expect(rows.map(({ value }) => value)).toEqual([expect.closeTo(-52, 6), expect.closeTo(-60, 6)]);
  });

  it('count a harmonic near its limit that the plan has no point for', async () => {
    await load(buildSweep([51.1, 61.6, 49.5]));
    const rows = await spurious();
    expect(rows).toHaveLength(1);
    expect(rows[0]).toMatchObject({ freqHz: expect.closeTo(4 * 14.06e6, -5) as number, atMost: false });
  });

  it('that fail make the point fail, however good the others are', async () => {
    const { instrumentRevisionId, pathRevisionId } = bench;
    await recordReading(
      {
        ...{ runId, testPointId: bench.pointId('rf_power'), text: '-3.2 dBm', again: false },
        ...{ confirmed: true, attenuationHeld: false, instrumentRevisionId, pathRevisionId },
      },
      bench.ctx,
    );
    const others: [number, number][] = [
      [18.975e6, 20],
      [33.2e6, 60],
    ];
    await load(buildSweep([51.1, 61.6], { others }));
    const { judgements } = judgeRun(await readRunSheet(database.db, runId));
    expect(judgements.get(bench.pointId('spurious'))).toMatchObject({ verdict: 'fail' });
    expect(judgements.get(bench.pointId('harmonic_2'))?.verdict).not.toBe('fail');
  });

  it('are corrected by the next sweep, and one that is gone counts with what stands there now', async () => {
    await load(buildSweep([51.1, 61.6], { others }));
    await load(
      buildSweep([51.1, 61.6], {
        others: [
          [18.975e6, 55],
          [40e6, 58],
        ],
      }),
    );
    const rows = await spurious();
    expect(rows.map(({ freqHz, atMost, version }) => ({ freqHz, atMost, version }))).toEqual([
      { freqHz: 18.975e6, atMost: false, version: 2 },
      { freqHz: 33.2e6, atMost: true, version: 2 },
      { freqHz: 40e6, atMost: false, version: 1 },
    ]);
    expect(rows[0]?.value).toBeCloseTo(-55, 6);
    expect(rows[1]?.value).toBeLessThan(-88);
  });

  it('are named by the frequency plan of the model, and keep their names', async () => {
    const [model] = await database.db.select().from(models);
    const plan: FrequencyPlan = {
      oscillators: [
        {
          symbol: 'LO',
          name: 'Local oscillator',
          ranges: [{ band: '20m', lowHz: 18.9152e6, highHz: 19.2652e6 }],
        },
        { symbol: 'BFO', name: 'BFO', ranges: [{ band: null, lowHz: 4.9152e6, highHz: 4.9152e6 }] },
      ],
      stages: [],
      carriers: [{ band: '20m', expression: 'LO − BFO' }],
      spacings: [],
    };
    await reviseFrequencyPlan({ model: model?.slug ?? '', plan }, bench.ctx);
    await load(buildSweep([51.1, 61.6], { others }));
    const station = await readStation(database.db, runId);
    expect(station?.sweeps[0]?.analysis.others.map(({ name }) => name)).toEqual([
      'local oscillator leak',
      expect.stringMatching(/LO|BFO|unexplained/),
    ]);
    const [entry] = (await database.db.select().from(ledgerEntries)).filter(
      ({ action }) => action === 'sweep.read',
    );
    expect(JSON.stringify(entry?.details)).toContain('local oscillator leak');
  });
});

describe('a sweep that stores nothing', () => {
  const anyText: unknown = expect.any(String);
  it.each([
    ['is none', new TextEncoder().encode('Dear works,\nthe rig is fine.\n'), {}, 'file'],
    ['does not reach the third harmonic', buildSweep([51.1, 61.6], { highestHz: 30e6 }), {}, 'file'],
    ['fits no band', buildSweep([51.1], { carrierHz: 7.03e6 }), { band: null }, 'band'],
    ['belongs to another band', buildSweep([51.1], { carrierHz: 7.03e6 }), {}, 'file'],
    ['has an open question', buildSweep([51.1, 61.6]), { hints: {} }, 'hints'],
    ['has one that only a value answers', buildSweep([51.1, 61.6]), { hints: {}, understood: true }, 'hints'],
    [
      'comes from a sample detector with wide points',
      buildSweep([51.1, 61.6]),
      { hints: { rbwHz: 3e3, detector: 'sample' } },
      'file',
    ],
  ] as const)('%s', async (_name, bytes, change, field) => {
    await expect(load(bytes, change)).rejects.toMatchObject({
      code: 'refused',
      fields: { [field]: anyText },
    });
    await expectNothingStored();
  });

  it('comes from a software receiver', async () => {
    const rows = Array.from(
      { length: 40 },
      (_, block) =>
        `2027-03-09, 10:00:00, ${block * 2e6}, ${(block + 1) * 2e6}, 500000, 10, -70, -71, ${block === 7 ? '-10, -71' : '-72, -71'}`,
    );
    const bytes = new TextEncoder().encode(rows.join('\n'));
    await expect(load(bytes, { understood: true })).rejects.toMatchObject({
      fields: { file: expect.stringMatching(/not calibrated: no verdict can rest on it/) as string },
    });
    await expectNothingStored();
  });
});

describe('looking at a sweep first', () => {
  let tester: SignedIn;
  beforeEach(async () => {
    const found = await letIn(await seedPerson(database.db, { name: 'Rhona Bell', roles: ['tester'] }));
    if (found === null) throw new Error('The tester is shut out.');
    tester = found;
  });

  function formOf(bytes: Uint8Array, fields: Record<string, string> = {}): FormData {
    const form = new FormData();
    form.set('file', new File([Uint8Array.from(bytes)], 'sweep.csv'));
    form.set('pathRevisionId', String(bench.pathRevisionId));
    for (const [name, value] of Object.entries(fields)) form.set(name, value);
    return form;
  }
  const look = (body: FormData) =>
    callDoor(looksDoor, { body, params: { id: String(runId) }, person: tester });

  it('says what was understood, what it asks and what it would write down, and keeps nothing', async () => {
    const { response } = await look(formOf(buildSweep([51.1, 61.6])));
    expect(response.status).toBe(200);
    const seen = sweepLookSchema.parse(await response.json());
    expect(seen).toMatchObject({
      band: '20m',
      refusal: null,
      understood: { columns: ['Frequency (Hz)', 'Level (dBm)'] },
    });
    expect(seen.questions.map(({ about }) => about)).toEqual(['bandwidth', 'detector']);
    expect(seen.readings.map(({ label }) => label)).toEqual([
      '20 m, 2nd harmonic',
      '20 m, 3rd harmonic',
      '20 m, spurious',
    ]);
    expect(seen.trace.length).toBeGreaterThan(100);
    await expectNothingStored();
  });

  it('shows an uncalibrated sweep with the reason why it cannot be accepted', async () => {
    const bytes = new TextDecoder().decode(buildSweep([51.1, 61.6])).replace('dBm', 'dB');
    const { response } = await look(
      formOf(new TextEncoder().encode(bytes), { rbwKhz: '30', detector: 'peak' }),
    );
    const seen = sweepLookSchema.parse(await response.json());
    expect(seen.refusal).toMatch(/not calibrated/);
    expect(seen.analysis?.harmonics[0]?.meterDbc).toBeCloseTo(-51.1, 6);
    expect(seen.readings).toEqual([]);
  });

  it('gives a sentence for a file that is no sweep', async () => {
    const { response } = await look(formOf(new TextEncoder().encode('nothing')));
    expect(response.status).toBe(422);
    expect(await problemIn(response)).toMatchObject({
      fields: { file: expect.stringMatching(/no rows/) as string },
    });
  });

  it('takes corrections in the units of the bench', async () => {
    const { response } = await look(
      formOf(buildSweep([51.1, 61.6]), {
        rbwKhz: '0,3',
        detector: 'positive peak',
        levelColumn: '1',
        band: '20m',
      }),
    );
    const seen = sweepLookSchema.parse(await response.json());
    expect(seen.understood).toMatchObject({ rbwHz: 300, detector: 'positive peak' });
    expect(seen.questions).toEqual([]);
  });

  it('then accepts it by the same form', async () => {
    const holder = await letIn(bench.tester);
    const { response } = await callDoor(sweepsDoor, {
      body: formOf(buildSweep([51.1, 61.6]), {
        ...{ rbwKhz: '30', detector: 'positive peak', understood: 'yes', band: '' },
        instrumentRevisionId: String(bench.instrumentRevisionId),
      }),
      params: { id: String(runId) },
      person: holder,
    });
    expect(response.status).toBe(200);
    expect(await response.json()).toMatchObject({ band: '20m', readings: 3 });
  });

  it('of a run that another tester has is refused to be accepted', async () => {
    const { response } = await callDoor(sweepsDoor, {
      body: formOf(buildSweep([51.1, 61.6]), { rbwKhz: '30', detector: 'peak' }),
      params: { id: String(runId) },
      person: tester,
    });
    expect(response.status).toBe(409);
    await expectNothingStored();
  });
});
