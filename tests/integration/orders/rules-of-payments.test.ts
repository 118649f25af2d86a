import { asc } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { outbox, placeHolds, providerEvents, refunds, units } from '~/server/db/schema';
import { applyKeptEvents } from '~/server/payments/apply-kept-events';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { cancelUnpaidOrder } from '~/server/services/orders/cancel-unpaid-order';
import { keepProviderEvent } from '~/server/services/orders/keep-provider-event';
import { placeOrder } from '~/server/services/orders/place-order';
import { releaseExpiredHolds } from '~/server/services/orders/release-expired-holds';
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
import { readBatch, readOrder } from './read-rows';

const database = testDatabase();
let model: SeededModel;

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
});

describe('rule 4: nobody stays charged without a place', () => {
  it('keeps prices and options as they were sold, in whole minor units', async () => {
    await seedBatch(database.db, model);
    const option = ['band.40m', 'band.30m', 'band.20m', 'filter.narrow'];
    const { orderId } = await placeOrder(
      buildOrder({ quantity: 3, option, pay: 'deposit' }),
      buildContext(database.db),
    );
    expect(await readOrder(database.db, orderId)).toMatchObject({
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
    await releaseExpiredHolds(byProvider(database.db, late));
    await deliver(byProvider(database.db, late), await buildPaid(database.db, checkoutId));
    expect((await readOrder(database.db, orderId)).state).toBe('paid');
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 1, placesHeld: 0 });
    expect(await database.db.select().from(refunds)).toHaveLength(0);
  });

  it('sends a late payment back where none is left, and says so', async () => {
    await seedBatch(database.db, model, { places: 1 });
    const late = await placeOrder(buildOrder(), buildContext(database.db));
    const now = minutesAfter(at, 40);
    await releaseExpiredHolds(byProvider(database.db, now));
    const quick = await placeOrder(
      buildOrder({ email: 'quick@buyer.test' }),
      buildContext(database.db, { now }),
    );
    await deliver(byProvider(database.db, now), await buildPaid(database.db, quick.checkoutId));
    await deliver(byProvider(database.db, now), await buildPaid(database.db, late.checkoutId));

    expect((await readOrder(database.db, late.orderId)).state).toBe('cancelled');
    expect((await readOrder(database.db, quick.orderId)).state).toBe('paid');
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
    await deliver(byProvider(database.db), fact);
    expect(await database.db.select().from(refunds)).toHaveLength(1);
    expect(await database.db.select().from(units)).toHaveLength(0);
    expect(await readBatch(database.db)).toMatchObject({ placesTaken: 0, placesHeld: 0 });
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
        byProvider(database.db),
      );
      const fact = { kind: 'payment_refunded', paymentIntentId, refundedMinor, currency: 'EUR' } as const;
      await applyProviderEvent({ providerEventId, fact }, byProvider(database.db));
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
      byProvider(database.db),
    );
    expect(await applyProviderEvent({ providerEventId, fact }, byProvider(database.db))).toEqual({
      state: 'kept',
    });
    expect(await applyKeptEvents(byProvider(database.db))).toEqual({ applied: 0 });

    const { orderId } = await placeOrder(buildOrder(), buildContext(database.db));
    expect(await applyKeptEvents(byProvider(database.db))).toEqual({ applied: 1 });
    expect(await applyKeptEvents(byProvider(database.db))).toEqual({ applied: 0 });
    expect((await readOrder(database.db, orderId)).state).toBe('paid');
    expect(await database.db.select().from(units)).toHaveLength(1);
  });

  it('keeps an event of an unknown type', async () => {
    const input = { eventId: 'evt_x', type: 'invoice.finalized', objectId: 'in_1', body: '{"a":1}' };
    const { providerEventId } = await keepProviderEvent(input, byProvider(database.db));
    await applyProviderEvent(
      { providerEventId, fact: { kind: 'unknown', reason: 'type_not_used' } },
      byProvider(database.db),
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
      byProvider(database.db),
    );
    const fact = { kind: 'checkout_expired', checkoutId: reference, sessionId } as const;
    await applyProviderEvent({ providerEventId, fact }, byProvider(database.db));
    expect((await readOrder(database.db, orderId)).state).toBe('paid');
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
        byProvider(database.db),
      );
      await applyProviderEvent(
        { providerEventId, fact: { kind, checkoutId: reference, sessionId } },
        byProvider(database.db),
      );
      await releaseExpiredHolds(byProvider(database.db, minutesAfter(at, 120)));
      expect((await readBatch(database.db)).placesHeld).toBe(kind === 'checkout_awaits_payment' ? 1 : 0);
    }
  });
});
