import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { handPayment } from '~/schemas/order-payments';
import { counterFilter } from '~/schemas/counter-orders';
import { refunds, payments } from '~/server/db/schema';
import { listCounterOrders } from '~/server/queries/counter/list-orders';
import { readCounterOrder } from '~/server/queries/counter/read-counter-order';
import { packOrder } from '~/server/services/dispatch/pack-order';
import { shipShipment } from '~/server/services/dispatch/ship-shipment';
import { askForBalance } from '~/server/services/orders/ask-for-balance';
import { cancelUnpaidOrder } from '~/server/services/orders/cancel-unpaid-order';
import { placeOrder } from '~/server/services/orders/place-order';
import { recordHandPayment } from '~/server/services/orders/record-hand-payment';
import { seedDispatch, seedReadyOrder } from '../../factories/dispatch';
import { buildContext, buildOrder, seedPaidOrder } from '../../factories/orders';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

const find = (filter: Record<string, string>, limit = 10) =>
  listCounterOrders(database.db, { ...counterFilter.parse(filter), limit });

describe('the list of orders', () => {
  it('is filtered by state, balance and words, and pages by key', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const full = await seedPaidOrder(db, { email: 'full@buyer.test', name: 'Ada Quist', callSign: 'Q7ADA' });
    const deposit = await seedPaidOrder(db, { email: 'part@buyer.test', name: '100% Quell', pay: 'deposit' });
    const unpaid = await placeOrder(buildOrder({ email: 'un@buyer.test' }), buildContext(db));
    const cancelled = await placeOrder(buildOrder({ email: 'gone@buyer.test' }), buildContext(db));
    await cancelUnpaidOrder({ orderId: cancelled.orderId, reason: 'Changed their mind' }, seed.owner);
    const numbers = (rows: { number: number }[]) => rows.map(({ number }) => number);

    expect(numbers(await find({}))).toEqual([cancelled, unpaid, deposit, full].map(({ number }) => number));
    expect(numbers(await find({ state: 'paid' }))).toEqual([deposit.number, full.number]);
    expect(numbers(await find({ state: 'balance_due' }))).toEqual([deposit.number]);
    expect(numbers(await find({ state: 'nonsense', before: 'x' }))).toHaveLength(4);
    expect(numbers(await find({ q: 'q7ada' }))).toEqual([full.number]);
    expect(numbers(await find({ q: '100%' }))).toEqual([deposit.number]);
    expect(numbers(await find({ q: 'h3-0001' }))).toEqual([full.number]);
    expect(numbers(await find({ q: String(unpaid.number) }))).toContain(unpaid.number);

    const [first, second] = await find({}, 2);
    expect(numbers(await find({ before: String(second?.id) }, 2))).toEqual([deposit.number, full.number]);
    expect(first?.owesMinor).toBe(0);
    expect((await find({ state: 'balance_due' }))[0]).toMatchObject({
      totalMinor: 38_900,
      keptMinor: 10_000,
      owesMinor: 28_900,
    });
  });

  it('counts what went back against what was paid, and not what the provider refused', async () => {
    const { db } = database;
    await seedDispatch(db);
    const order = await seedPaidOrder(db);
    const [payment] = await db.select().from(payments).where(eq(payments.orderId, order.orderId));
    const refund = {
      paymentId: payment?.id ?? 0,
      currency: 'EUR',
      reason: 'A scratch',
      createdAt: new Date(),
    };
    await db.insert(refunds).values([
      { ...refund, amountMinor: 1_000, state: 'done' },
      { ...refund, amountMinor: 5_000, state: 'refused' },
    ]);
    expect((await find({}))[0]).toMatchObject({ keptMinor: 37_900, owesMinor: 1_000 });
  });
});

describe('the page of an order', () => {
  it('shows every letter that was asked for, and what happened', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed, { pay: 'deposit' });
    await seedPaidOrder(db, { email: 'other@buyer.test' });
    await askForBalance({ orderNumber: order.number }, seed.owner);
    const typed = handPayment.parse({ kind: 'cash', amount: '289,00', currency: 'EUR' });
    const paid = await recordHandPayment({ ...typed, orderNumber: order.number }, seed.owner);
    expect(paid.balanceMinor).toBe(0);
    const { shipmentNumber } = await packOrder(
      { orderNumber: order.number, serials: ['H3-0001'] },
      seed.shipper,
    );
    await shipShipment(
      { number: shipmentNumber, carrier: 'Parcel post', trackingNumber: null },
      seed.shipper,
    );
    const page = await readCounterOrder(db, order.number, seed.owner.now);
    expect(page?.mail.map(({ letter }) => letter)).toEqual(['shipped', 'balance_due', 'order_received']);
    expect(page?.changes.map(({ action }) => action)).toEqual(
      expect.arrayContaining(['shipment.ship', 'shipment.pack', 'order.pay_by_hand', 'order.ask_balance']),
    );
  });

  it('takes an amount only as the currency has it', () => {
    const parse = (amount: string) => handPayment.safeParse({ kind: 'cash', amount, currency: 'EUR' });
    expect(parse('289').data).toEqual({ kind: 'cash', amountMinor: 28_900 });
    expect(parse('289.005').success).toBe(false);
    expect(parse('-1').success).toBe(false);
    expect(handPayment.parse({ kind: 'transfer', amountMinor: '28900' }).amountMinor).toBe(28_900);
  });
});
