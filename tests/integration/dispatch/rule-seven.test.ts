import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import type { Db } from '~/server/db/client';
import { contacts, orders, payments, reworks, shipments, units } from '~/server/db/schema';
import { listDispatch } from '~/server/queries/dispatch/list-ready';
import { packOrder } from '~/server/services/dispatch/pack-order';
import { shipShipment } from '~/server/services/dispatch/ship-shipment';
import { placeHold } from '~/server/services/production/place-hold';
import { seedCertificate, seedDispatch, seedReadyOrder, seedRun } from '../../factories/dispatch';
import type { DispatchOrderSeed, DispatchSeed } from '../../factories/dispatch';
import { buildOrder, buildContext } from '../../factories/orders';
import { placeOrder } from '~/server/services/orders/place-order';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

interface Reason {
  name: string;
  says: RegExp;
  /** Makes this one thing wrong. */
  spoil: (
    db: Db,
    seed: DispatchSeed,
    order: DispatchOrderSeed,
    unit: { id: number; serial: string },
  ) => Promise<void>;
}

const reasons: Reason[] = [
  {
    name: 'its newest run is open',
    says: /newest run is not closed/,
    spoil: async (db, seed, _order, unit) => {
      await seedRun(db, seed, unit.id, { state: 'open', closedAt: null });
    },
  },
  {
    name: 'its newest run failed',
    says: /newest run did not pass/,
    spoil: async (db, seed, _order, unit) => {
      await seedRun(db, seed, unit.id, { result: 'failed' });
    },
  },
  {
    name: 'its newest run is undecided',
    says: /newest run is undecided/,
    spoil: async (db, seed, _order, unit) => {
      await seedRun(db, seed, unit.id, { result: 'undecided' });
    },
  },
  {
    name: 'its certificate is of an older run',
    says: /certificate of its newest run is not issued/,
    spoil: async (db, seed, _order, unit) => {
      await seedRun(db, seed, unit.id, { result: 'passed' });
    },
  },
  {
    name: 'its certificate is made out to another buyer',
    says: /made out to another buyer/,
    spoil: async (db, seed, order, unit) => {
      const other = await placeOrder(buildOrder({ email: 'other@buyer.test' }), buildContext(db));
      const [found] = await db.select().from(orders).where(eq(orders.id, other.orderId));
      const testRunId = await seedRun(db, seed, unit.id, { result: 'passed' });
      await seedCertificate(db, seed, { ...order, contactId: found?.contactId ?? 0 }, unit, { testRunId });
    },
  },
  {
    name: 'its certificate was judged for another destination',
    says: /judged for another destination/,
    spoil: async (db, seed, order, unit) => {
      const testRunId = await seedRun(db, seed, unit.id, { result: 'passed' });
      await seedCertificate(db, seed, { ...order, destination: 'US' }, unit, { testRunId });
    },
  },
  {
    name: 'its certificate is not printed yet',
    says: /still being printed/,
    spoil: async (db, seed, order, unit) => {
      const testRunId = await seedRun(db, seed, unit.id, { result: 'passed' });
      await seedCertificate(db, seed, order, unit, { testRunId, fileId: null });
    },
  },
  {
    name: 'a hold is on the unit',
    says: /One hold is on it/,
    spoil: async (_db, seed, _order, unit) => {
      await placeHold(
        { subject: { type: 'unit', number: unit.serial }, reason: 'Knob is loose' },
        seed.owner,
      );
    },
  },
  {
    name: 'a hold is on its batch',
    says: /One hold is on it/,
    spoil: async (_db, seed) => {
      await placeHold({ subject: { type: 'batch', number: 13 }, reason: 'Lot in doubt' }, seed.owner);
    },
  },
  {
    name: 'a hold is on its order',
    says: /One hold is on it/,
    spoil: async (_db, seed, order) => {
      await placeHold(
        { subject: { type: 'order', number: order.number }, reason: 'Buyer asked' },
        seed.owner,
      );
    },
  },
  {
    name: 'it is in rework',
    says: /in rework/,
    spoil: async (db, _seed, _order, unit) => {
      await db.insert(reworks).values({ unitId: unit.id, cause: 'Dry joint', openedAt: new Date() });
    },
  },
  {
    name: 'it went back to its final test',
    says: /It is at final test/,
    spoil: async (db, _seed, _order, unit) => {
      await db.update(units).set({ stage: 'final_test' }).where(eq(units.id, unit.id));
    },
  },
  {
    name: 'its order is not paid in full',
    says: /waits for the balance/,
    spoil: async (db, _seed, order) => {
      await db.update(payments).set({ amountMinor: 10_000 }).where(eq(payments.orderId, order.orderId));
    },
  },
  {
    name: 'its order is cancelled',
    says: /order is cancelled; nothing is sent/,
    spoil: async (db, _seed, order) => {
      await db.update(orders).set({ state: 'cancelled' }).where(eq(orders.id, order.orderId));
    },
  },
  {
    name: 'its address is incomplete',
    says: /address lacks the street and the postcode/,
    spoil: async (db, _seed, order) => {
      await db
        .update(contacts)
        .set({ addressLines: [], postcode: '' })
        .where(eq(contacts.id, order.contactId));
    },
  },
  {
    name: 'its address is in another country than it was sold to',
    says: /another country than the order was sold to/,
    spoil: async (db, _seed, order) => {
      await db.update(contacts).set({ country: 'AT' }).where(eq(contacts.id, order.contactId));
    },
  },
];

describe('rule 7: a unit is dispatched only when all of it holds', () => {
  it('lets one pass for which all holds', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed);
    const serials = order.units.map(({ serial }) => serial);
    const { shipmentNumber } = await packOrder({ orderNumber: order.number, serials }, seed.shipper);
    const shipped = await shipShipment(
      { number: shipmentNumber, carrier: 'Parcel post', trackingNumber: 'RR473124829DE' },
      seed.shipper,
    );
    expect(shipped.orderFulfilled).toBe(true);
    expect(await db.select({ stage: units.stage }).from(units)).toEqual([{ stage: 'gone' }]);
  });

  it.each(reasons)('does not pack it where $name', async ({ says, spoil }) => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed);
    const [unit = { id: 0, serial: '' }] = order.units;
    await spoil(db, seed, order, unit);

    const packing = packOrder({ orderNumber: order.number, serials: [unit.serial] }, seed.shipper);
    await expect(packing).rejects.toThrow(says);
    await expect(packing).rejects.toMatchObject({ code: 'conflict' });
    expect(await db.select().from(shipments)).toEqual([]);

    // The list of what is ready says the same, and only this.
    const [listed] = await listDispatch(db, { today: '2027-03-20', orderNumber: order.number });
    expect(listed?.units[0]?.isReady).toBe(false);
    expect(listed?.units[0]?.missing).toHaveLength(1);
    expect(listed?.units[0]?.missing[0]).toMatch(says);
  });

  it.each(reasons)('does not ship it, packed before, where $name', async ({ says, spoil }) => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed);
    const [unit = { id: 0, serial: '' }] = order.units;
    const { shipmentNumber } = await packOrder(
      { orderNumber: order.number, serials: [unit.serial] },
      seed.shipper,
    );
    await spoil(db, seed, order, unit);
    const shipping = shipShipment(
      { number: shipmentNumber, carrier: 'Parcel post', trackingNumber: null },
      seed.shipper,
    );
    await expect(shipping).rejects.toThrow(says);
    await expect(shipping).rejects.toMatchObject({ code: 'conflict' });
    const [parcel] = await db.select().from(shipments);
    expect(parcel).toMatchObject({ state: 'packed', shippedAt: null });
  });
});
