import { createServer } from 'node:http';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { POST as postEvent } from '~/pages/api/provider-events';
import { checkouts, orders, payments, providerEvents, refunds, units } from '~/server/db/schema';
import { reconcileCheckouts } from '~/server/payments/reconcile-checkouts';
import { sendRefund } from '~/server/payments/send-refund';
import { startCheckout } from '~/server/payments/start-checkout';
import { takeOrder, takePayment } from '~/server/payments/take-order';
import { placeOrder } from '~/server/services/orders/place-order';
import { releaseExpiredHolds } from '~/server/services/orders/release-expired-holds';
import { listen, readBody, stop } from '../../../local-fakes/http';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import { seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import { buildContext, buildOrder, minutesAfter } from '../../factories/orders';
import { callDoor } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

// The application's own webhook, on a real port, as the stand-in asks for an address.
const webhook = createServer((request, response) => {
  void readBody(request)
    .then((body) =>
      callDoor(postEvent, {
        path: '/api/provider-events',
        body,
        headers: { 'stripe-signature': String(request.headers['stripe-signature']) },
        now: new Date(),
      }),
    )
    .then(({ response: answer }) => response.writeHead(answer.status).end());
});
const fake = await startStripeFake({
  port: 0,
  webhookUrl: `${await listen(webhook, 0)}/api/provider-events`,
  webhookSecret: 'whsec_integration',
  apiKey: 'sk_test_integration',
  retryDelaysMs: [],
});
// Before anything asks for the settings.
process.env['STRIPE_API_URL'] = fake.url;

const database = testDatabase();

beforeAll(() => control('release'));
afterAll(async () => {
  await fake.close();
  await stop(webhook);
});
beforeEach(async () => {
  await seedWorks(database.db);
});
afterEach(() => control('release'));

async function control(action: string, fields: Record<string, string> = {}): Promise<void> {
  const body = new URLSearchParams({ action, ...fields });
  const answer = await fetch(`${fake.url}/control`, {
    method: 'POST',
    body,
    headers: { accept: 'application/json' },
  });
  expect(answer.status).toBe(200);
}

/** Pays at the provider's page; resolves when the event was delivered, or is held back. */
async function pay(
  url: string | null,
  way: Record<string, string> = { number: '4242424242424242' },
): Promise<void> {
  const answer = await fetch(url ?? '', {
    method: 'POST',
    body: new URLSearchParams(way),
    redirect: 'manual',
  });
  expect(answer.status).toBe(303);
}

async function only<T>(rows: Promise<T[]>): Promise<T> {
  const [row, ...more] = await rows;
  if (row === undefined || more.length > 0)
    throw new Error(`Expected one row, found ${more.length + (row ? 1 : 0)}.`);
  return row;
}

const nowContext = (now = new Date()) => buildContext(database.db, { now });

describe('with the provider at the other end', () => {
  it('opens one page for one checkout, whose sum is the order’s', async () => {
    await seedBatch(database.db, await seedModel(database.db));
    const placed = await placeOrder(buildOrder({ quantity: 3 }), nowContext());
    const first = await startCheckout(placed.checkoutId, nowContext());
    const again = await startCheckout(placed.checkoutId, nowContext());
    expect(again).toEqual(first);
    expect(await only(database.db.select().from(checkouts))).toMatchObject({
      state: 'open',
      url: first.providerUrl,
      amountMinor: 116_700,
    });
    await pay(first.providerUrl);
    expect(await only(database.db.select().from(payments))).toMatchObject({
      amountMinor: 116_700,
      currency: 'EUR',
    });
    expect(await database.db.select().from(units)).toHaveLength(3);
  });

  it('takes the deposit first and the balance later', async () => {
    await seedBatch(database.db, await seedModel(database.db));
    const { providerUrl } = await takeOrder(buildOrder({ pay: 'deposit' }), nowContext());
    await pay(providerUrl);
    const order = await only(database.db.select().from(orders));
    const balance = await takePayment({ orderId: order.id }, nowContext());
    await pay(balance.providerUrl);
    expect((await database.db.select().from(payments)).map(({ amountMinor }) => amountMinor)).toEqual([
      10_000, 28_900,
    ]);
    expect(await database.db.select().from(units)).toHaveLength(1);
    await expect(takePayment({ orderId: order.id }, nowContext())).rejects.toThrow('paid in full');
  });

  it('opens later what was cut off before the provider was asked', async () => {
    await seedBatch(database.db, await seedModel(database.db));
    await placeOrder(buildOrder(), nowContext());
    expect(await reconcileCheckouts(nowContext())).toEqual({ opened: 0, asked: 0 });
    const later = new Date(Date.now() + 25_000);
    expect(await reconcileCheckouts(nowContext(later))).toEqual({ opened: 1, asked: 0 });
    expect((await only(database.db.select().from(checkouts))).state).toBe('open');
  });

  it('asks the provider where the event never came', async () => {
    await seedBatch(database.db, await seedModel(database.db));
    const { providerUrl } = await takeOrder(buildOrder(), nowContext());
    await control('hold');
    await pay(providerUrl);
    expect((await only(database.db.select().from(orders))).state).toBe('awaiting_payment');
    const late = minutesAfter(new Date(), 34);
    expect(await reconcileCheckouts(nowContext(late))).toEqual({ opened: 0, asked: 1 });
    await releaseExpiredHolds(nowContext(late));
    expect((await only(database.db.select().from(orders))).state).toBe('paid');
    // The event itself comes at last and changes nothing.
    await control('release');
    expect(await database.db.select().from(providerEvents)).toHaveLength(2);
    expect(await database.db.select().from(payments)).toHaveLength(1);
    expect(await database.db.select().from(units)).toHaveLength(1);
  });

  it('rule 4: what is refunded here is what the provider says', async () => {
    await seedBatch(database.db, await seedModel(database.db), { places: 1 });
    const late = await takeOrder(buildOrder(), nowContext());
    const after = minutesAfter(new Date(), 40);
    await releaseExpiredHolds(nowContext(after));
    await placeOrder(buildOrder({ email: 'quick@buyer.test' }), nowContext(after));
    await pay(late.providerUrl);
    const wanted = await only(database.db.select().from(refunds));
    expect(wanted.state).toBe('wanted');
    expect(await sendRefund(wanted.id, nowContext())).toEqual({ outcome: 'done' });
    expect(await sendRefund(wanted.id, nowContext())).toEqual({ outcome: 'nothing' });
    const refund = await only(database.db.select().from(refunds));
    const payment = await only(database.db.select().from(payments));
    expect(refund).toMatchObject({ state: 'done', amountMinor: payment.amountMinor });
    expect(refund.providerReference).toMatch(/^re_/);
  });

  it('keeps the place while a bank debit is settled', async () => {
    await seedBatch(database.db, await seedModel(database.db), { places: 1 });
    const { providerUrl } = await takeOrder(buildOrder(), nowContext());
    await pay(providerUrl, { method: 'debit' });
    expect(await releaseExpiredHolds(nowContext(minutesAfter(new Date(), 600)))).toEqual({ released: 0 });
    const { providerSessionId } = await only(database.db.select().from(checkouts));
    await control('settle', { session: providerSessionId ?? '' });
    expect((await only(database.db.select().from(orders))).state).toBe('paid');
  });
});
