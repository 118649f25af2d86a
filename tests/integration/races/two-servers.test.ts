import { eq, sql } from 'drizzle-orm';
import mysql, { type Connection, type RowDataPacket } from 'mysql2/promise';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { paths } from '~/lib/paths';
import {
  batches,
  ledgerEntries,
  lots,
  orders,
  payments,
  picks,
  placeHolds,
  providerEvents,
  storeEntries,
  testPlanRevisions,
  testPoints,
  testRuns,
  runPoints,
  units,
  userRoles,
} from '~/server/db/schema';
import { actingPerson, type CallContext } from '~/server/write';
import { at, seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import { seedFloor, seedUnit } from '../../factories/floor';
import { buildOrder } from '../../factories/orders';
import { seedBuilder } from '../../factories/stores';
import { testDatabase } from '../../setup/database';
import { buildPaidEvent, cookieOf, deliverEvent, post, twoServers } from './two-servers';

const database = testDatabase();
const servers = twoServers();

/** One of both, in turn. */
const inTurn = (n: number) => servers.both[n % 2 === 0 ? 0 : 1];
const countBy = (statuses: number[]) => (status: number) => statuses.filter((each) => each === status).length;

beforeEach(() => seedWorks(database.db));

async function seedTwoBuilders(): Promise<{ ctx: CallContext; cookies: [string, string] }> {
  const ctx = await seedBuilder(database.db, { now: new Date() });
  const other = await seedBuilder(database.db, { name: 'Ines Aldous', email: 'ines@thistledown.example' });
  return { ctx, cookies: [await cookieOf(actingPerson(ctx)), await cookieOf(actingPerson(other))] };
}

async function sumOfEntries(lotNumber: string): Promise<number> {
  const [row] = await database.db
    .select({ sum: sql<string>`sum(${storeEntries.quantity})` })
    .from(storeEntries)
    .innerJoin(lots, eq(lots.id, storeEntries.lotId))
    .where(eq(lots.number, lotNumber));
  return Number(row?.sum);
}

describe('the last places of a batch', () => {
  it('go to three of twelve buyers who ask two servers at once', async () => {
    const model = await seedModel(database.db);
    await seedBatch(database.db, model, { places: 8, placesTaken: 5 });
    const answers = await Promise.all(
      Array.from({ length: 12 }, (_, n) =>
        post(inTurn(n), paths.api.orders(), {
          ...buildOrder({ email: `buyer${n}@buyer.test` }),
          callSign: '',
          phone: '',
        }),
      ),
    );
    const count = countBy(answers.map(({ status }) => status));
    expect(count(200)).toBe(3);
    expect(count(409)).toBe(9);
    const [batch] = await database.db.select().from(batches);
    expect(batch).toMatchObject({ places: 8, placesTaken: 5, placesHeld: 3 });
    expect(await database.db.$count(placeHolds)).toBe(3);
    const numbers = await database.db.select({ number: orders.number }).from(orders);
    expect(new Set(numbers.map(({ number }) => number)).size).toBe(3);
  });
});

describe('an event of the payment provider', () => {
  it('that comes five times at once to two servers makes one unit a rig', async () => {
    const model = await seedModel(database.db);
    await seedBatch(database.db, model);
    const placed = await post(inTurn(0), paths.api.orders(), { ...buildOrder({ quantity: 2 }), phone: '' });
    expect(placed.status).toBe(200);
    const [order] = await database.db.select().from(orders);
    const event = await buildPaidEvent(database.db, order?.number ?? 0, 'evt_five_times');
    const answers = await Promise.all(Array.from({ length: 5 }, (_, n) => deliverEvent(inTurn(n), event)));
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200, 200, 200]);
    const serials = await database.db.select({ serial: units.serial }).from(units);
    expect(serials.map(({ serial }) => serial).sort()).toEqual(['H3-0001', 'H3-0002']);
    expect(await database.db.$count(payments)).toBe(1);
    expect(await database.db.$count(providerEvents)).toBe(1);
    const [batch] = await database.db.select().from(batches);
    expect(batch).toMatchObject({ placesTaken: 2, placesHeld: 0 });
    const [paid] = await database.db.select().from(orders);
    expect(paid?.state).toBe('paid');
  });
});

describe('an Idempotency-Key', () => {
  it('used on two servers at once takes one place and gives both the same answer', async () => {
    const model = await seedModel(database.db);
    await seedBatch(database.db, model);
    const body = { ...buildOrder(), phone: '' };
    const [one, other] = await Promise.all(
      servers.both.map((server) => post(server, paths.api.orders(), body, { key: 'the-same-click' })),
    );
    expect(one?.status).toBe(200);
    expect(other?.status).toBe(200);
    const [order] = await database.db.select().from(orders);
    expect(one?.body).toMatchObject({ number: order?.number });
    expect(other?.body).toMatchObject({ number: order?.number });
    expect(await database.db.$count(orders)).toBe(1);
    const [batch] = await database.db.select().from(batches);
    expect(batch).toMatchObject({ placesHeld: 1 });
  });

  it('used again for something else is refused by the other server', async () => {
    const model = await seedModel(database.db);
    await seedBatch(database.db, model);
    const first = await post(inTurn(0), paths.api.orders(), { ...buildOrder(), phone: '' }, { key: 'once' });
    const other = { ...buildOrder({ email: 'somebody@buyer.test' }), phone: '' };
    const second = await post(inTurn(1), paths.api.orders(), other, { key: 'once' });
    expect([first.status, second.status]).toEqual([200, 409]);
    expect(await database.db.$count(orders)).toBe(1);
  });
});

describe('the last of a lot', () => {
  it('goes to one of two builders, and the lot never below zero', async () => {
    const { ctx, cookies } = await seedTwoBuilders();
    const floor = await seedFloor(ctx);
    // Five transistors; two a unit. The first two units leave one.
    for (const serial of ['H3-0001', 'H3-0002', 'H3-0003', 'H3-0004']) {
      await seedUnit(database.db, floor, serial);
    }
    const pick = (n: number, serial: string, quantity: number) =>
      post(
        inTurn(n),
        paths.api.picks(serial),
        { lot: floor.lots.transistors, quantity },
        {
          cookie: cookies[n % 2 === 0 ? 0 : 1],
        },
      );
    expect((await pick(0, 'H3-0001', 2)).status).toBe(200);
    expect((await pick(1, 'H3-0002', 2)).status).toBe(200);
    const answers = await Promise.all([
      pick(0, 'H3-0003', 1),
      pick(1, 'H3-0004', 1),
      pick(0, 'H3-0003', 1),
      pick(1, 'H3-0004', 1),
    ]);
    const count = countBy(answers.map(({ status }) => status));
    expect([count(200), count(409)]).toEqual([1, 3]);
    expect(await sumOfEntries(floor.lots.transistors)).toBe(0);
    const [lot] = await database.db.select().from(lots).where(eq(lots.number, floor.lots.transistors));
    expect(lot?.onHand).toBe(0);
    expect(await database.db.$count(picks)).toBe(3);
  });
});

describe('a run', () => {
  it('closed by two servers at the same instant is closed once', async () => {
    const ctx = await seedBuilder(database.db);
    const userId = actingPerson(ctx);
    await database.db.insert(userRoles).values({ userId, role: 'tester' });
    const cookie = await cookieOf(userId);
    const { runId } = await seedCheckedRun(userId);
    const answers = await Promise.all(
      Array.from({ length: 6 }, (_, n) => post(inTurn(n), paths.api.runClosing(runId), {}, { cookie })),
    );
    const count = countBy(answers.map(({ status }) => status));
    expect([count(200), count(409)]).toEqual([1, 5]);
    const [run] = await database.db.select().from(testRuns);
    expect(run).toMatchObject({ state: 'closed', result: 'passed', version: 2 });
    expect(await database.db.$count(runPoints)).toBe(1);
    expect(await database.db.$count(ledgerEntries, eq(ledgerEntries.action, 'run.close'))).toBe(1);
  });

  /** An open run of a plan with one yes/no point, which is answered yes. */
  async function seedCheckedRun(userId: number): Promise<{ runId: number }> {
    const model = await seedModel(database.db);
    const [{ insertId: testPlanRevisionId }] = await database.db.insert(testPlanRevisions).values({
      ...{ modelId: model.modelId, letter: 'B', state: 'draft' as const, supplyV: 13.8, loadOhm: 50 },
      createdAt: at,
    });
    const [{ insertId: testPointId }] = await database.db.insert(testPoints).values({
      ...{ testPlanRevisionId, position: 1, quantityKey: 'check', lowerLimit: 1 },
      ...{ limitRule: 'fixed' as const, decision: 'simple' as const },
    });
    await database.db
      .update(testPlanRevisions)
      .set({ state: 'released' })
      .where(eq(testPlanRevisions.id, testPlanRevisionId));
    const planned = { ...model, testPlanRevisionId };
    const batch = await seedBatch(database.db, planned);
    await seedUnit(database.db, { model: planned, batch }, 'H3-0001', { stage: 'final_test' });
    const cookie = await cookieOf(userId);
    const opened = await post(inTurn(0), paths.api.runs('H3-0001'), {}, { cookie });
    expect(opened.status).toBe(200);
    const [run] = await database.db.select({ id: testRuns.id }).from(testRuns);
    const runId = run?.id ?? 0;
    const read = await post(inTurn(1), paths.api.readings(runId), { testPointId, text: 'yes' }, { cookie });
    expect(read).toMatchObject({ status: 200 });
    return { runId };
  }
});

describe('a server that is killed outright in the middle of a pick', () => {
  let blocker: Connection | undefined;
  afterEach(async () => {
    await blocker?.end();
    blocker = undefined;
  });

  it('has picked nothing; the same click at the other server picks once', async () => {
    const { ctx, cookies } = await seedTwoBuilders();
    const floor = await seedFloor(ctx);
    await seedUnit(database.db, floor, 'H3-0001');
    const [doomed, other] = servers.both;
    const pick = (server: typeof doomed) =>
      post(
        server,
        paths.api.picks('H3-0001'),
        { lot: floor.lots.transistors, quantity: 2 },
        {
          cookie: cookies[0],
          key: 'one-click',
        },
      );

    // Somebody else holds the lot's row, so the pick waits in the middle of its transaction.
    blocker = await mysql.createConnection(database.url);
    await blocker.beginTransaction();
    await blocker.query('SELECT id FROM lots WHERE number = ? FOR UPDATE', [floor.lots.transistors]);
    const cutOff = pick(doomed).catch(() => 'cut off');
    await vi.waitFor(async () => expect(await countWaiting(database.url)).toBe(1), {
      timeout: 15_000,
      interval: 50,
    });
    await doomed.kill();
    expect(await cutOff).toBe('cut off');
    await blocker.commit();

    const again = await pick(other);
    expect(again.status).toBe(200);
    // The answer got lost too: the click is sent a third time.
    const third = await pick(other);
    expect(third).toEqual(again);
    expect(await database.db.$count(picks)).toBe(1);
    expect(await sumOfEntries(floor.lots.transistors)).toBe(3);
    await servers.replace(doomed);
  }, 60_000);
});

/** Statements on this database that ask for the row of a lot and have no answer yet. */
async function countWaiting(url: string): Promise<number> {
  const connection = await mysql.createConnection(url);
  try {
    const [rows] = await connection.query<RowDataPacket[]>(
      `SELECT COUNT(*) AS n FROM information_schema.processlist
       WHERE db = DATABASE() AND id <> CONNECTION_ID() AND info LIKE '%\`lots\`%for update%'`,
    );
    return Number(rows[0]?.['n']);
  } finally {
    await connection.end();
  }
}
