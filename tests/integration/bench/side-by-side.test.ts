import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { GET as alikeDoor } from '~/pages/api/runs/[id]/alike';
import { letIn } from '~/server/auth/sessions';
import {
  historyReadings,
  historySheets,
  runPoints,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
} from '~/server/db/schema';
import { listAlike, MOST_ALIKE } from '~/server/queries/bench/list-alike';
import { readRunComparison } from '~/server/queries/bench/read-run-comparison';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { closeRework } from '~/server/services/production/close-rework';
import { seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { callDoor } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let minute: number;

beforeEach(async () => {
  bench = await seedBench(database.db);
  minute = 0;
});

/** The clock goes on by a minute with each call, as on a bench. */
function ctx() {
  minute += 1;
  return { ...bench.ctx, now: new Date(bench.ctx.now.getTime() + minute * 60_000) };
}

const good = {
  rf_power: '-6.03 dBm',
  harmonic_2: '51.1 dBc',
  harmonic_3: '61.6 dBc',
  current_key_down: '612 mA',
  frequency_error: '38 Hz',
};

async function open(entries: Partial<typeof good>): Promise<number> {
  const { runId } = await openRun({ serial: bench.serial }, ctx());
  for (const [key, text] of Object.entries(entries)) {
    await recordReading(
      {
        ...{ runId, text, again: false, confirmed: false, attenuationHeld: false },
        testPointId: bench.pointId(key),
        instrumentRevisionId: bench.instrumentRevisionId,
        pathRevisionId: bench.pathRevisionId,
      },
      ctx(),
    );
  }
  return runId;
}

/** Fails at the second harmonic, is mended, and passes. */
async function failMendPass(): Promise<void> {
  await closeRun({ runId: await open({ ...good, harmonic_2: '38.1 dBc' }) }, ctx());
  await closeRework(
    { serial: bench.serial, remedy: 'L7 rewound', minutes: 20, foundCause: 'Low-pass coil' },
    ctx(),
  );
  await closeRun({ runId: await open(good) }, ctx());
}

describe('runs side by side', () => {
  it('are the newest and the one before it, with what lay between', async () => {
    await failMendPass();
    const comparison = await readRunComparison(database.db, 'h3-0147', {});
    expect(comparison).toMatchObject({ serial: 'H3-0147', modelName: 'Holm 3' });
    const compared = comparison?.compared;
    expect([compared?.before.runNo, compared?.after.runNo]).toEqual([1, 2]);
    expect(compared?.reworks).toMatchObject([
      { foundCause: 'Low-pass coil', remedy: 'L7 rewound', minutes: 20 },
    ]);
    const second = compared?.pairs.find(({ quantity }) => quantity.key === 'harmonic_2');
    expect(second).toMatchObject({
      before: { verdict: 'fail' },
      after: { verdict: 'pass' },
      change: '−13.0 dB',
    });
  });

  it('take an open run as it stands, and what was not read as not read', async () => {
    await failMendPass();
    await open({ rf_power: '-5.03 dBm' });
    const comparison = await readRunComparison(database.db, bench.serial, {});
    expect(comparison?.compared?.after).toMatchObject({ runNo: 3, state: 'open' });
    const pairs = comparison?.compared?.pairs ?? [];
    expect(pairs.map(({ quantity, change }) => [quantity.key, change])).toEqual([
      ['rf_power', '+1.00 dB'],
      ['harmonic_2', null],
      ['harmonic_3', null],
      ['current_key_down', null],
      ['frequency_error', null],
    ]);
    expect(comparison?.compared?.reworks).toEqual([]);
  });

  it('may be named in either order', async () => {
    await failMendPass();
    await open({});
    const comparison = await readRunComparison(database.db, bench.serial, { a: 3, b: 1 });
    expect([comparison?.compared?.before.runNo, comparison?.compared?.after.runNo]).toEqual([1, 3]);
    expect(comparison?.compared?.reworks).toHaveLength(1);
  });

  it('are none where there is one run, no such run or no such unit', async () => {
    await open({});
    expect((await readRunComparison(database.db, bench.serial, {}))?.compared).toBeNull();
    expect((await readRunComparison(database.db, bench.serial, { a: 1, b: 2 }))?.compared).toBeNull();
    expect(await readRunComparison(database.db, 'H3-9999', {})).toBeNull();
    await closeRun({ runId: await reread() }, ctx());
    await closeRework({ serial: bench.serial, remedy: 'x' }, ctx());
    await open({});
    expect(await readRunComparison(database.db, bench.serial, { a: 1, b: 7 })).toBeNull();
  });

  async function reread(): Promise<number> {
    const [run] = await database.db.select().from(testRuns);
    if (run === undefined) throw new Error('There is no run.');
    await recordReading(
      {
        ...{ runId: run.id, text: '1 W', again: false, confirmed: true, attenuationHeld: false },
        testPointId: bench.pointId('rf_power'),
        instrumentRevisionId: bench.instrumentRevisionId,
        pathRevisionId: null,
      },
      ctx(),
    );
    return run.id;
  }
});

/** Closed runs of other units with a value at each point of a plan, without the readings behind them. */
async function seedClosedRuns(
  count: number,
  { modelId = bench.modelId, keys, plan }: { modelId?: number; keys?: string[]; plan?: number } = {},
) {
  const { db } = database;
  const [own] = await db.select().from(units).where(eq(units.serial, bench.serial));
  if (own === undefined) throw new Error('The unit is gone.');
  const testPlanRevisionId = plan ?? own.testPlanRevisionId;
  const points = await db
    .select()
    .from(testPoints)
    .where(eq(testPoints.testPlanRevisionId, testPlanRevisionId));
  const unitsBefore = await db.$count(units);
  for (let made = 0; made < count; made += 1) {
    const number = String(unitsBefore + made).padStart(4, '0');
    const [{ insertId: unitId }] = await db.insert(units).values({
      ...{ serial: `T-${number}`, modelId, options: [], stage: 'gone', testPlanRevisionId, alignment: {} },
      ...{ pageCode: `P${number}`, createdAt: bench.ctx.now },
    });
    const [{ insertId: id }] = await db.insert(testRuns).values({
      ...{ unitId, runNo: 1, testPlanRevisionId, testerUserId: bench.tester, alignment: {} },
      ...{ state: 'open', computationVersion: '1', openedAt: ctx().now },
    });
    await db.insert(runPoints).values(
      points
        .filter(({ quantityKey }) => keys === undefined || keys.includes(quantityKey))
        .map((point) => ({
          ...{ testRunId: id, testPointId: point.id, verdict: 'pass' as const, value: unitsBefore + made },
          ...{ readingCount: 1, ruleText: '' },
        })),
    );
    await db
      .update(testRuns)
      .set({ state: 'closed', result: 'passed', closedAt: ctx().now })
      .where(eq(testRuns.id, id));
  }
}

function valuesOf(points: Awaited<ReturnType<typeof listAlike>>, key = 'rf_power'): number[] {
  return points?.find(({ quantityKey }) => quantityKey === key)?.values.map(({ value }) => value) ?? [];
}

describe('the last 40 like it', () => {
  it('are of the same model, quantity and band in closed runs, the newest first, without its own', async () => {
    await seedClosedRuns(3);
    const runId = await open({ rf_power: good.rf_power });
    const points = await listAlike(database.db, runId);
    expect(valuesOf(points)).toEqual([3, 2, 1]);
    expect(points?.[0]?.values[0]).toMatchObject({ serial: 'T-0003', runNo: 1, verdict: 'pass' });
    expect(points?.map(({ quantityKey }) => quantityKey)).toEqual(Object.keys(good));
  });

  it('are no more than 40 each, and found behind runs that lack the point', async () => {
    await seedClosedRuns(45);
    await seedClosedRuns(60, { keys: ['harmonic_2'] });
    const points = await listAlike(database.db, await open({}));
    expect(valuesOf(points)).toHaveLength(MOST_ALIKE);
    expect(valuesOf(points)[0]).toBe(45);
    expect(valuesOf(points, 'harmonic_2')[0]).toBe(105);
  }, 60_000);

  it('count another revision of the plan, and neither another model nor another band', async () => {
    const { db } = database;
    const [plan] = await db.select().from(testPlanRevisions);
    if (plan === undefined) throw new Error('There is no plan.');
    const planWith = async (letter: string, band: string) => {
      const [{ insertId }] = await db.insert(testPlanRevisions).values({
        ...{ modelId: plan.modelId, letter, state: 'draft', supplyV: 13.8, loadOhm: 50 },
        createdAt: plan.createdAt,
      });
      await db.insert(testPoints).values({
        ...{ testPlanRevisionId: insertId, position: 1, quantityKey: 'rf_power', band },
        ...{ freqHz: 14e6, limitRule: 'fixed', decision: 'simple', required: true },
      });
      return insertId;
    };
    await seedClosedRuns(1, { plan: await planWith('D', '20m') });
    await seedClosedRuns(1, { plan: await planWith('E', '40m') });
    const points = await listAlike(db, await open({}));
    expect(valuesOf(points)).toEqual([1]);
  });

  it('are followed by what old sheets of the model say, marked, and not in their place', async () => {
    await seedClosedRuns(MOST_ALIKE + 1);
    const [{ insertId: historySheetId }] = await database.db.insert(historySheets).values({
      ...{ modelId: bench.modelId, serial: 'H3-0002', testedOn: '2019-03-10', createdAt: bench.ctx.now },
    });
    await database.db.insert(historyReadings).values([
      { historySheetId, quantityKey: 'rf_power', band: '20m', enteredText: '5', enteredUnit: 'W', value: 5 },
      { historySheetId, quantityKey: 'rf_power', band: '40m', enteredText: '6', enteredUnit: 'W', value: 6 },
    ]);
    const points = await listAlike(database.db, await open({}));
    const power = points?.find(({ quantityKey }) => quantityKey === 'rf_power')?.values ?? [];
    expect(power.filter(({ isHistory }) => !isHistory)).toHaveLength(MOST_ALIKE);
    expect(power.slice(MOST_ALIKE)).toEqual([
      {
        ...{ value: 5, serial: 'H3-0002', runNo: null, verdict: null },
        ...{ closedAt: '2019-03-10', isHistory: true },
      },
    ]);
  });

  it('are shown to who works at the bench', async () => {
    await seedClosedRuns(1);
    const runId = await open({});
    const ask = (person: Awaited<ReturnType<typeof letIn>>) =>
      callDoor(alikeDoor, { method: 'GET', params: { id: String(runId) }, person });
    const { response } = await ask(await letIn(bench.tester));
    expect(await response.json()).toMatchObject({
      points: [{ quantityKey: 'rf_power', band: '20m' }, {}, {}, {}, {}],
    });
    expect((await ask(null)).response.status).toBe(401);
    const none = await callDoor(alikeDoor, {
      ...{ method: 'GET', params: { id: '999' }, person: await letIn(bench.tester) },
    });
    expect(none.response.status).toBe(404);
  });
});
