import { asc, sql } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { batches, checkouts, payments, providerEvents, unitAllocations, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { cancelUnpaidOrder } from '~/server/services/orders/cancel-unpaid-order';
import { placeOrder } from '~/server/services/orders/place-order';
import { recordHandPayment } from '~/server/services/orders/record-hand-payment';
import { releaseExpiredHolds } from '~/server/services/orders/release-expired-holds';
import { spawnUnits } from '~/server/services/production/spawn-units';
import { at, seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import type { SeededModel } from '../../factories/catalog';
import {
  buildContext,
  buildOrder,
  buildPaid,
  byProvider,
  deliver,
  minutesAfter,
  seedPaidOrder,
} from '../../factories/orders';
import { testDatabase } from '../../setup/database';
import { outcomes } from '../../setup/outcomes';
import { readBatch, readOrder } from './read-rows';

const database = testDatabase();
let model: SeededModel;

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
});

describe('rule 1: places taken and held never exceed a batch’s places', () => {
  it('gives the last three places to three of twelve buyers at once', async () => {
    await seedBatch(database.db, model, { places: 8, placesTaken: 5 });
    const { done, refused } = await outcomes(
      Array.from({ length: 12 }, (_, n) =>
        placeOrder(buildOrder({ email: `buyer${n}@buyer.test` }), buildContext(database.db)),
      ),
    );
    expect(done).toHaveLength(3);
    expect(new Set(done.map(({ number }) => number)).size).toBe(3);
    expect(refused.every((error) => error instanceof DomainError && error.code === 'taken')).toBe(true);
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 5, placesHeld: 3 });
  });

  it('has the database itself refuse one more', async () => {
    await seedBatch(database.db, model, { places: 2, placesTaken: 2 });
    await expect(database.db.update(batches).set({ placesHeld: 1 })).rejects.toThrow();
  });

  it('frees a place when its hold has run out, and not before', async () => {
    await seedBatch(database.db, model, { places: 1 });
    await placeOrder(buildOrder(), buildContext(database.db));
    expect(await releaseExpiredHolds(byProvider(database.db, minutesAfter(at, 29)))).toEqual({ released: 0 });
    await expect(
      placeOrder(buildOrder(), buildContext(database.db, { now: minutesAfter(at, 29) })),
    ).rejects.toThrow(/held by somebody who is paying now/);
    expect(await releaseExpiredHolds(byProvider(database.db, minutesAfter(at, 33)))).toEqual({ released: 1 });
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 0, placesHeld: 0 });
    const [checkout] = await database.db.select().from(checkouts);
    expect(checkout?.state).toBe('expired');
    await placeOrder(buildOrder(), buildContext(database.db, { now: minutesAfter(at, 34) }));
    expect(await releaseExpiredHolds(byProvider(database.db, minutesAfter(at, 35)))).toEqual({ released: 0 });
  });

  it('gives the places of a cancelled order back once', async () => {
    await seedBatch(database.db, model);
    const { orderId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    await cancelUnpaidOrder({ orderId, reason: 'asked by mail' }, buildContext(database.db));
    await expect(cancelUnpaidOrder({ orderId, reason: 'again' }, buildContext(database.db))).rejects.toThrow(
      DomainError,
    );
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 0, placesHeld: 0 });
  });
});

describe('rule 2: a paid line of quantity n has exactly n units', () => {
  it('spawns them in order, with the batch’s frozen revisions', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db, { quantity: 2 });
    await seedPaidOrder(database.db, { quantity: 1, option: ['band.40m', 'band.20m', 'band.15m'] });
    const rows = await database.db.select().from(units).orderBy(asc(units.id));
    expect(rows.map(({ serial, lineIndex, stage }) => [serial, lineIndex, stage])).toEqual([
      ['H3-0001', 1, 'kit'],
      ['H3-0002', 2, 'kit'],
      ['H3-0003', 1, 'kit'],
    ]);
    expect(rows[0]).toMatchObject({
      bomRevisionId: model.bomRevisionId,
      buildSheetRevisionId: model.buildSheetRevisionId,
      testPlanRevisionId: model.testPlanRevisionId,
      options: ['band.40m', 'band.30m', 'band.20m'],
    });
    expect(rows[2]?.options).toEqual(['band.40m', 'band.20m', 'band.15m']);
    expect(await database.db.select().from(unitAllocations)).toHaveLength(3);
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 3, placesHeld: 0 });
  });

  it('makes one unit a rig of five deliveries of one event at once', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    const fact = await buildPaid(database.db, checkoutId);
    const { done, refused } = await outcomes(
      Array.from({ length: 5 }, () => deliver(byProvider(database.db), fact)),
    );
    expect(refused).toEqual([]);
    expect(done.every(({ state }) => state === 'applied')).toBe(true);
    expect(await database.db.select().from(units)).toHaveLength(2);
    expect(await database.db.select().from(payments)).toHaveLength(1);
    expect(await database.db.select().from(providerEvents)).toHaveLength(1);
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 2, placesHeld: 0 });
  });

  it('makes none twice where two different events speak of one payment at once', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
    const fact = await buildPaid(database.db, checkoutId);
    const { refused } = await outcomes(
      ['evt_a', 'evt_b', 'evt_c'].map((id) => deliver(byProvider(database.db), fact, id)),
    );
    expect(refused).toEqual([]);
    expect(await database.db.select().from(units)).toHaveLength(1);
    expect(await database.db.select().from(payments)).toHaveLength(1);
  });

  it('leaves nothing behind when it fails half way', async () => {
    await seedBatch(database.db, model);
    const { orderId, checkoutId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    // The second unit cannot be made.
    await database.db.execute(
      sql.raw(
        "create trigger units_cut_off before insert on units for each row if new.serial = 'H3-0002' then signal sqlstate '45000' set message_text = 'cut off'; end if",
      ),
    );
    await expect(
      deliver(byProvider(database.db), await buildPaid(database.db, checkoutId)),
    ).rejects.toThrow();
    expect(await database.db.select().from(units)).toHaveLength(0);
    expect(await database.db.select().from(payments)).toHaveLength(0);
    expect((await readOrder(database.db, orderId)).state).toBe('awaiting_payment');
    await database.db.execute(sql.raw('drop trigger units_cut_off'));
    await deliver(byProvider(database.db), await buildPaid(database.db, checkoutId));
    expect(await database.db.select().from(units)).toHaveLength(2);
  });

  it('passes over a serial number that somebody typed at the bench', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    await database.db.insert(units).values({
      serial: 'H3-0002',
      modelId: model.modelId,
      options: [],
      stage: 'final_test',
      testPlanRevisionId: model.testPlanRevisionId,
      alignment: {},
      pageCode: 'X',
      createdAt: at,
    });
    await deliver(byProvider(database.db), await buildPaid(database.db, checkoutId));
    const serials = await database.db.select({ serial: units.serial }).from(units).orderBy(asc(units.serial));
    expect(serials.map(({ serial }) => serial)).toEqual(['H3-0001', 'H3-0002', 'H3-0003']);
  });

  it('refuses to spawn a line’s units again', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db);
    await expect(spawnUnits({ orderLineId: 1 }, byProvider(database.db))).rejects.toThrow(
      'This line has its units already.',
    );
  });

  it('spawns them for a deposit, and for money by hand', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db, { pay: 'deposit' });
    const { number } = await placeOrder(buildOrder(), buildContext(database.db));
    const byHand = { orderNumber: number, kind: 'transfer' as const };
    await recordHandPayment({ ...byHand, amountMinor: 10_000 }, buildContext(database.db));
    expect(await database.db.select().from(units)).toHaveLength(1);
    await expect(
      recordHandPayment({ ...byHand, amountMinor: 28_901 }, buildContext(database.db)),
    ).rejects.toThrow('more than the order has to pay');
    const paid = await recordHandPayment({ ...byHand, amountMinor: 28_900 }, buildContext(database.db));
    expect(paid.balanceMinor).toBe(0);
    expect(await database.db.select().from(units)).toHaveLength(2);
  });
});
