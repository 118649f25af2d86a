import { asc, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import {
  batches,
  checkouts,
  ledgerEntries,
  orders,
  outbox,
  payments,
  placeHolds,
  providerEvents,
  refunds,
  unitAllocations,
  units,
  userProfiles,
} from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { applyKeptEvents } from '~/server/payments/apply-kept-events';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { cancelUnpaidOrder } from '~/server/services/orders/cancel-unpaid-order';
import { keepProviderEvent } from '~/server/services/orders/keep-provider-event';
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
  deliver,
  minutesAfter,
  seedPaidOrder,
} from '../../factories/orders';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let model: SeededModel;

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
});

const provider = (now = at) => buildContext(database.db, { actor: { kind: 'provider' }, now });

async function batch() {
  const [row] = await database.db.select().from(batches);
  if (row === undefined) throw new Error('There is no batch.');
  return row;
}

async function order(id: number) {
  const [row] = await database.db.select().from(orders).where(eq(orders.id, id));
  if (row === undefined) throw new Error('There is no order.');
  return row;
}

async function outcomes<T>(tries: Promise<T>[]) {
  const settled = await Promise.allSettled(tries);
  const refused = settled.flatMap((one) => (one.status === 'rejected' ? [one.reason as unknown] : []));
  return { done: settled.flatMap((one) => (one.status === 'fulfilled' ? [one.value] : [])), refused };
}

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
    expect(await batch()).toMatchObject({ placesTaken: 5, placesHeld: 3 });
  });

  it('has the database itself refuse one more', async () => {
    await seedBatch(database.db, model, { places: 2, placesTaken: 2 });
    await expect(database.db.update(batches).set({ placesHeld: 1 })).rejects.toThrow();
  });

  it('frees a place when its hold has run out, and not before', async () => {
    await seedBatch(database.db, model, { places: 1 });
    await placeOrder(buildOrder(), buildContext(database.db));
    expect(await releaseExpiredHolds(provider(minutesAfter(at, 29)))).toEqual({ released: 0 });
    await expect(
      placeOrder(buildOrder(), buildContext(database.db, { now: minutesAfter(at, 29) })),
    ).rejects.toThrow(/held by somebody who is paying now/);
    expect(await releaseExpiredHolds(provider(minutesAfter(at, 33)))).toEqual({ released: 1 });
    expect(await batch()).toMatchObject({ placesTaken: 0, placesHeld: 0 });
    const [checkout] = await database.db.select().from(checkouts);
    expect(checkout?.state).toBe('expired');
    await placeOrder(buildOrder(), buildContext(database.db, { now: minutesAfter(at, 34) }));
    expect(await releaseExpiredHolds(provider(minutesAfter(at, 35)))).toEqual({ released: 0 });
  });

  it('gives the places of a cancelled order back once', async () => {
    await seedBatch(database.db, model);
    const { orderId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    await cancelUnpaidOrder({ orderId, reason: 'asked by mail' }, buildContext(database.db));
    await expect(cancelUnpaidOrder({ orderId, reason: 'again' }, buildContext(database.db))).rejects.toThrow(
      DomainError,
    );
    expect(await batch()).toMatchObject({ placesTaken: 0, placesHeld: 0 });
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
    expect(await batch()).toMatchObject({ placesTaken: 3, placesHeld: 0 });
  });

  it('makes one unit a rig of five deliveries of one event at once', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    const fact = await buildPaid(database.db, checkoutId);
    const { done, refused } = await outcomes(Array.from({ length: 5 }, () => deliver(provider(), fact)));
    expect(refused).toEqual([]);
    expect(done.every(({ state }) => state === 'applied')).toBe(true);
    expect(await database.db.select().from(units)).toHaveLength(2);
    expect(await database.db.select().from(payments)).toHaveLength(1);
    expect(await database.db.select().from(providerEvents)).toHaveLength(1);
    expect(await batch()).toMatchObject({ placesTaken: 2, placesHeld: 0 });
  });

  it('makes none twice where two different events speak of one payment at once', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
    const fact = await buildPaid(database.db, checkoutId);
    const { refused } = await outcomes(
      ['evt_a', 'evt_b', 'evt_c'].map((id) => deliver(provider(), fact, id)),
    );
    expect(refused).toEqual([]);
    expect(await database.db.select().from(units)).toHaveLength(1);
    expect(await database.db.select().from(payments)).toHaveLength(1);
  });

  it('leaves nothing behind when it fails half way', async () => {
    await seedBatch(database.db, model);
    const { orderId, checkoutId } = await placeOrder(buildOrder({ quantity: 2 }), buildContext(database.db));
    // The second serial number is taken already, so the second unit cannot be made.
    await database.db.insert(units).values({
      serial: 'H3-0002',
      modelId: model.modelId,
      options: [],
      stage: 'kit',
      testPlanRevisionId: model.testPlanRevisionId,
      alignment: {},
      pageCode: 'X',
      createdAt: at,
    });
    await expect(deliver(provider(), await buildPaid(database.db, checkoutId))).rejects.toThrow();
    expect(await database.db.select().from(units)).toHaveLength(1);
    expect(await database.db.select().from(payments)).toHaveLength(0);
    expect((await order(orderId)).state).toBe('awaiting_payment');
    await database.db.delete(units);
    await deliver(provider(), await buildPaid(database.db, checkoutId));
    expect(await database.db.select().from(units)).toHaveLength(2);
  });

  it('refuses to spawn a line’s units again', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db);
    await expect(spawnUnits({ orderLineId: 1 }, provider())).rejects.toThrow(
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

describe('rule 4: nobody stays charged without a place', () => {
  it('keeps prices and options as they were sold, in whole minor units', async () => {
    await seedBatch(database.db, model);
    const option = ['band.40m', 'band.30m', 'band.20m', 'filter.narrow'];
    const { orderId } = await placeOrder(
      buildOrder({ quantity: 3, option, pay: 'deposit' }),
      buildContext(database.db),
    );
    expect(await order(orderId)).toMatchObject({
      totalMinor: 131_100,
      dueNowMinor: 30_000,
      currency: 'EUR',
      tax: { kind: 'zero_rated', ratePpm: 0, country: 'DE' },
    });
  });

  it('takes the place for a late payment where one is still free', async () => {
    await seedBatch(database.db, model, { places: 1 });
    const { orderId, checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
    const late = minutesAfter(at, 40);
    await releaseExpiredHolds(provider(late));
    await deliver(provider(late), await buildPaid(database.db, checkoutId));
    expect((await order(orderId)).state).toBe('paid');
    expect(await batch()).toMatchObject({ placesTaken: 1, placesHeld: 0 });
    expect(await database.db.select().from(refunds)).toHaveLength(0);
  });

  it('sends a late payment back where none is left, and says so', async () => {
    await seedBatch(database.db, model, { places: 1 });
    const late = await placeOrder(buildOrder(), buildContext(database.db));
    const now = minutesAfter(at, 40);
    await releaseExpiredHolds(provider(now));
    const quick = await placeOrder(
      buildOrder({ email: 'quick@buyer.test' }),
      buildContext(database.db, { now }),
    );
    await deliver(provider(now), await buildPaid(database.db, quick.checkoutId));
    await deliver(provider(now), await buildPaid(database.db, late.checkoutId));

    expect((await order(late.orderId)).state).toBe('cancelled');
    expect((await order(quick.orderId)).state).toBe('paid');
    expect(await database.db.select().from(units)).toHaveLength(1);
    const [refund] = await database.db.select().from(refunds);
    expect(refund).toMatchObject({ state: 'wanted', amountMinor: 38_900, currency: 'EUR' });
    const posted = await database.db.select({ key: outbox.key }).from(outbox).orderBy(asc(outbox.id));
    expect(posted.map(({ key }) => key)).toEqual([
      `order-received:${quick.orderId}`,
      `order-without-place:${late.orderId}`,
      `refund:${refund?.id}`,
    ]);
  });

  it('sends back what is paid for a cancelled order', async () => {
    await seedBatch(database.db, model);
    const { orderId, checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
    const fact = await buildPaid(database.db, checkoutId);
    await cancelUnpaidOrder({ orderId, reason: 'asked by mail' }, buildContext(database.db));
    await deliver(provider(), fact);
    expect(await database.db.select().from(refunds)).toHaveLength(1);
    expect(await database.db.select().from(units)).toHaveLength(0);
    expect(await batch()).toMatchObject({ placesTaken: 0, placesHeld: 0 });
  });

  it('writes down what was refunded at the provider itself, once', async () => {
    await seedBatch(database.db, model);
    const { checkoutId } = await seedPaidOrder(database.db);
    const { paymentIntentId } = await buildPaid(database.db, checkoutId);
    for (const [eventId, refundedMinor] of [
      ['evt_r2', 5000],
      ['evt_r1', 2000],
      ['evt_r3', 5000],
    ] as const) {
      const { providerEventId } = await keepProviderEvent(
        { eventId, type: 'charge.refunded', objectId: 'ch_1', body: '{}' },
        provider(),
      );
      const fact = { kind: 'payment_refunded', paymentIntentId, refundedMinor, currency: 'EUR' } as const;
      await applyProviderEvent({ providerEventId, fact }, provider());
    }
    const rows = await database.db.select().from(refunds);
    expect(rows.reduce((sum, { amountMinor }) => sum + amountMinor, 0)).toBe(5000);
  });
});

describe('rule 5: each provider event takes effect once, in any order of arrival', () => {
  it('keeps an event that comes before its checkout is known, and applies it later', async () => {
    await seedBatch(database.db, model);
    const reference = `1-${at.getTime()}`;
    const event = {
      id: 'evt_early',
      object: 'event',
      type: 'checkout.session.completed',
      created: 1,
      livemode: false,
      data: {
        object: {
          object: 'checkout.session',
          id: 'cs_early',
          payment_status: 'paid',
          payment_intent: 'pi_early',
          amount_total: 38_900,
          currency: 'eur',
          metadata: { checkout_id: reference, order_number: '1' },
        },
      },
    };
    const fact = {
      kind: 'checkout_paid',
      checkoutId: reference,
      sessionId: 'cs_early',
      paymentIntentId: 'pi_early',
      amountMinor: 38_900,
      currency: 'EUR',
    } as const;
    const { providerEventId } = await keepProviderEvent(
      { eventId: event.id, type: event.type, objectId: 'cs_early', body: JSON.stringify(event) },
      provider(),
    );
    expect(await applyProviderEvent({ providerEventId, fact }, provider())).toEqual({ state: 'kept' });
    expect(await applyKeptEvents(provider())).toEqual({ applied: 0 });

    const { orderId } = await placeOrder(buildOrder(), buildContext(database.db));
    expect(await applyKeptEvents(provider())).toEqual({ applied: 1 });
    expect(await applyKeptEvents(provider())).toEqual({ applied: 0 });
    expect((await order(orderId)).state).toBe('paid');
    expect(await database.db.select().from(units)).toHaveLength(1);
  });

  it('keeps an event of an unknown type', async () => {
    const input = { eventId: 'evt_x', type: 'invoice.finalized', objectId: 'in_1', body: '{"a":1}' };
    const { providerEventId } = await keepProviderEvent(input, provider());
    await applyProviderEvent(
      { providerEventId, fact: { kind: 'unknown', reason: 'type_not_used' } },
      provider(),
    );
    const [row] = await database.db.select().from(providerEvents);
    expect(row).toMatchObject({ state: 'unknown', body: '{"a":1}' });
  });

  it('lets a payment stand that was told before the end of its page', async () => {
    await seedBatch(database.db, model);
    const { orderId, checkoutId } = await seedPaidOrder(database.db);
    const { checkoutId: reference, sessionId } = await buildPaid(database.db, checkoutId);
    const { providerEventId } = await keepProviderEvent(
      { eventId: 'evt_end', type: 'checkout.session.expired', objectId: sessionId, body: '{}' },
      provider(),
    );
    const fact = { kind: 'checkout_expired', checkoutId: reference, sessionId } as const;
    await applyProviderEvent({ providerEventId, fact }, provider());
    expect((await order(orderId)).state).toBe('paid');
    const [hold] = await database.db.select().from(placeHolds);
    expect(hold?.state).toBe('taken');
  });

  it('holds the place on while the money takes days, and frees it when it does not come', async () => {
    await seedBatch(database.db, model, { places: 1 });
    const { checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
    const { checkoutId: reference, sessionId } = await buildPaid(database.db, checkoutId);
    for (const kind of ['checkout_awaits_payment', 'checkout_payment_failed'] as const) {
      const { providerEventId } = await keepProviderEvent(
        { eventId: kind, type: kind, objectId: sessionId, body: '{}' },
        provider(),
      );
      await applyProviderEvent(
        { providerEventId, fact: { kind, checkoutId: reference, sessionId } },
        provider(),
      );
      await releaseExpiredHolds(provider(minutesAfter(at, 120)));
      expect((await batch()).placesHeld).toBe(kind === 'checkout_awaits_payment' ? 1 : 0);
    }
  });
});

describe('rule 8: mail is asked for in the same transaction', () => {
  it('asks for one letter, with ids only, and makes the buyer’s account once', async () => {
    await seedBatch(database.db, model);
    const first = await seedPaidOrder(database.db);
    const second = await seedPaidOrder(database.db, { email: 'QUIRIN@buyer.test' });
    const rows = await database.db.select().from(outbox).orderBy(asc(outbox.id));
    expect(rows.map(({ kind, key, payload }) => ({ kind, key, payload }))).toEqual(
      [first, second].map(({ orderId }) => ({
        kind: 'mail',
        key: `order-received:${orderId}`,
        payload: { letter: 'order_received', orderId },
      })),
    );
    expect(await database.db.select().from(userProfiles)).toHaveLength(1);
    expect((await order(first.orderId)).buyerUserId).toBe((await order(second.orderId)).buyerUserId);
  });

  it('makes one account where two orders of a new buyer are paid at once', async () => {
    await seedBatch(database.db, model);
    const facts = [];
    for (let n = 0; n < 4; n += 1) {
      const { checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
      facts.push(await buildPaid(database.db, checkoutId));
    }
    const { refused } = await outcomes(facts.map((fact) => deliver(provider(), fact)));
    expect(refused).toEqual([]);
    expect(await database.db.select().from(userProfiles)).toHaveLength(1);
    expect((await database.db.select().from(units)).map(({ serial }) => serial).sort()).toEqual([
      'H3-0001',
      'H3-0002',
      'H3-0003',
      'H3-0004',
    ]);
  });
});

describe('rule 9: who did what is kept', () => {
  it('makes one entry a call, without personal data', async () => {
    await seedBatch(database.db, model);
    await seedPaidOrder(database.db);
    const rows = await database.db.select().from(ledgerEntries).orderBy(asc(ledgerEntries.id));
    expect(rows.map(({ action }) => action)).toEqual([
      'order.place',
      'event.keep',
      'unit.spawn',
      'order.pay',
    ]);
    expect(JSON.stringify(rows)).not.toMatch(/quirin|quell|heather|q0abc/i);
  });
});
