import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { linkToken } from '~/server/auth/tokens';
import {
  contacts,
  models,
  orders,
  runPoints,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
} from '~/server/db/schema';
import { writeOrderReceived, writeOrderWithoutPlace } from '~/server/documents/order-received';
import { env } from '~/server/env';
import { readBenchRecord } from '~/server/queries/catalog/read-bench-record';
import { listRigs, readRig, readRigOfBatch } from '~/server/queries/catalog/read-rig';
import { findOrderByToken, findOwnOrder } from '~/server/queries/orders/find-order';
import { listOwnOrders } from '~/server/queries/orders/list-own-orders';
import { readOrder } from '~/server/queries/orders/read-order';
import { placeOrder } from '~/server/services/orders/place-order';
import { at, seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import type { SeededModel } from '../../factories/catalog';
import { buildContext, buildOrder, minutesAfter, seedPaidOrder } from '../../factories/orders';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let model: SeededModel;

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
});

describe('the shop', () => {
  it('shows the first batch with a free place, or else the first that is open', async () => {
    await seedBatch(database.db, model, { number: 12, state: 'closed' });
    await seedBatch(database.db, model, { number: 13, places: 2, placesTaken: 2 });
    expect((await readRig(database.db, 'holm-3', '2027-03-01'))?.batch).toMatchObject({
      number: 13,
      placesLeft: 0,
    });
    await seedBatch(database.db, model, { number: 14, placesTaken: 13 });
    expect((await readRig(database.db, 'holm-3', '2027-03-01'))?.batch).toMatchObject({
      number: 14,
      placesLeft: 7,
    });
    expect((await readRigOfBatch(database.db, 13, '2027-03-01'))?.batch.number).toBe(13);
    expect((await readRig(database.db, 'holm-3', '2027-03-23'))?.batch?.estimatedOn).toBe('2027-03-23');
    expect((await readRig(database.db, 'holm-3', '2027-03-24'))?.batch?.estimatedOn).toBeNull();
    expect(await readRigOfBatch(database.db, 12, '2027-03-01')).toBeNull();
  });

  it('leaves out what is not for sale', async () => {
    await database.db.update(models).set({ state: 'withdrawn' });
    expect(await readRig(database.db, 'holm-3', '2027-03-01')).toBeNull();
    expect(await listRigs(database.db, '2027-03-01')).toEqual([]);
    await seedBatch(database.db, model);
    await expect(placeOrder(buildOrder(), buildContext(database.db))).rejects.toThrow('not for sale');
  });
});

describe('what the last ones left the bench with', () => {
  async function seedRun(unitId: number, runNo: number, result: 'passed' | 'failed', powerW: number) {
    const [point] = await database.db.select().from(testPoints);
    const [{ insertId: testRunId }] = await database.db.insert(testRuns).values({
      unitId,
      runNo,
      testPlanRevisionId: model.testPlanRevisionId,
      state: 'closed',
      result,
      testerUserId: 1,
      alignment: {},
      computationVersion: '1',
      openedAt: at,
      closedAt: minutesAfter(at, unitId * 10 + runNo),
    });
    await database.db.insert(runPoints).values({
      testRunId,
      testPointId: point?.id ?? 0,
      verdict: result === 'passed' ? 'pass' : 'fail',
      value: powerW,
      readingCount: 1,
      ruleText: '',
    });
  }

  it('counts the newest closed run of each unit, where it passed', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db, { quantity: 6 });
    const [{ insertId: testPlanRevisionId }] = await database.db.insert(testPlanRevisions).values({
      modelId: model.modelId,
      letter: 'B',
      state: 'draft',
      supplyV: 13.8,
      loadOhm: 50,
      createdAt: at,
    });
    await database.db.insert(testPoints).values({
      testPlanRevisionId,
      position: 1,
      quantityKey: 'rf_power',
      band: '40m',
      limitRule: 'fixed',
      decision: 'guarded',
    });
    const rows = await database.db.select({ id: units.id }).from(units);
    for (const [index, { id }] of rows.entries()) {
      await seedRun(id, 1, index === 0 ? 'failed' : 'passed', 3 + index / 10);
    }
    // The first failed and passed after rework; the last passed and then failed.
    await seedRun(rows[0]?.id ?? 0, 2, 'passed', 2.9);
    await seedRun(rows[5]?.id ?? 0, 2, 'failed', 1);
    const record = await readBenchRecord(database.db, model.modelId);
    expect(record.unitCount).toBe(5);
    expect(record.bands).toMatchObject([{ band: '40m', medianPowerW: 3.2 }]);
  });
});

describe('an order', () => {
  it('is read by its link, by its buyer and by nobody else', async () => {
    await seedBatch(database.db, model);
    const { orderId, number } = await seedPaidOrder(database.db, { pay: 'deposit', quantity: 2 });
    const token = linkToken(env().secret, 'order', orderId);
    expect(await findOrderByToken(database.db, token)).toEqual({ id: orderId });
    expect(await findOrderByToken(database.db, token.toUpperCase())).toBeNull();
    const [row] = await database.db.select().from(orders);
    const buyer = row?.buyerUserId ?? 0;
    expect(await findOwnOrder(database.db, number, buyer)).toEqual({ id: orderId });
    expect(await findOwnOrder(database.db, number, buyer + 1)).toBeNull();
    expect(await listOwnOrders(database.db, buyer)).toMatchObject([{ number, what: '2 × Holm 3' }]);
    const order = await readOrder(database.db, { id: orderId }, at);
    expect(order).toMatchObject({
      state: 'paid',
      totalMinor: 77_800,
      paidMinor: 20_000,
      balanceMinor: 57_800,
      isPayable: true,
      heldUntil: null,
      units: [
        { serial: 'H3-0001', stage: 'kit' },
        { serial: 'H3-0002', stage: 'kit' },
      ],
    });
  });
});

describe('letters', () => {
  it('tells the buyer of the place, with the link that opens the order', async () => {
    await seedBatch(database.db, model);
    const { orderId } = await seedPaidOrder(database.db, { pay: 'deposit', name: '<b>Quirin</b>' });
    const letter = await writeOrderReceived(database.db, { letter: 'order_received', orderId });
    expect(letter?.to).toBe('quirin@buyer.test');
    expect(letter?.text).toContain('H3-0001');
    expect(letter?.text).toContain('€\u00a0289');
    expect(letter?.text).toContain('by 23 March 2027');
    const token = /\/orders\/([\w-]{43})/.exec(letter?.text ?? '')?.[1] ?? '';
    expect(await findOrderByToken(database.db, token)).toEqual({ id: orderId });
    expect(letter?.html).toContain('&lt;b&gt;Quirin&lt;/b&gt;');
    expect(letter?.html).not.toContain('<b>Quirin');
  });

  it('has nobody to write to where the address was erased', async () => {
    await seedBatch(database.db, model);
    const { orderId } = await seedPaidOrder(database.db);
    await database.db.update(contacts).set({ email: '', erasedAt: at });
    expect(await writeOrderReceived(database.db, { orderId })).toBeNull();
    expect(await writeOrderWithoutPlace(database.db, { orderId })).toBeNull();
    expect(await database.db.select().from(orders).where(eq(orders.id, orderId))).toHaveLength(1);
  });
});
