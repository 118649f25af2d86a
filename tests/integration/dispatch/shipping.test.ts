import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { letters } from '~/server/documents/letters';
import { makePackingList } from '~/server/documents/packing-list';
import { ledgerEntries, orders, outbox, shipments, units } from '~/server/db/schema';
import { readPacking } from '~/server/queries/dispatch/read-packing';
import { readShipment } from '~/server/queries/dispatch/read-shipment';
import { packOrder } from '~/server/services/dispatch/pack-order';
import { shipShipment } from '~/server/services/dispatch/ship-shipment';
import { unpackShipment } from '~/server/services/dispatch/unpack-shipment';
import { askForBalance } from '~/server/services/orders/ask-for-balance';
import { seedCertificate, seedDispatch, seedReadyOrder, seedRun } from '../../factories/dispatch';
import { testDatabase } from '../../setup/database';
import { textOf } from '../../pdf/tools';

const database = testDatabase();

// UPU S10: RR473124829 is the example of the standard's guide, from memory.
const tracked = { carrier: 'Parcel post', trackingNumber: 'RR473124829DE' };

async function packedOrder(changes: Parameters<typeof seedReadyOrder>[2] = {}) {
  const { db } = database;
  const seed = await seedDispatch(db);
  const order = await seedReadyOrder(db, seed, changes);
  const serials = order.units.map(({ serial }) => serial);
  const { shipmentNumber, shipmentId } = await packOrder(
    { orderNumber: order.number, serials },
    seed.shipper,
  );
  return { db, seed, order, serials, shipmentNumber, shipmentId };
}

async function listShippedMail() {
  const rows = await database.db.select().from(outbox).where(eq(outbox.kind, 'mail'));
  return rows.filter(({ payload }) => payload['letter'] === 'shipped');
}

describe('packing', () => {
  it('takes scanned serial numbers as they come off a reader, each once', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed, { quantity: 2 });
    await packOrder({ orderNumber: order.number, serials: ['h3-OOO1', 'H3-0001'] }, seed.shipper);
    const stages = await db
      .select({ serial: units.serial, stage: units.stage })
      .from(units)
      .orderBy(units.id);
    expect(stages).toEqual([
      { serial: 'H3-0001', stage: 'ship' },
      { serial: 'H3-0002', stage: 'pack' },
    ]);
  });

  it('says of a unit that does not belong whose it is', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed);
    const other = await seedReadyOrder(db, seed, { email: 'other@buyer.test' });
    const packing = packOrder({ orderNumber: order.number, serials: ['H3-0002', 'H3-9999'] }, seed.shipper);
    const sentence = `H3-0002 is for order ${other.number}, not for this one. There is no unit H3-9999.`;
    await expect(packing).rejects.toMatchObject({ code: 'invalid', fields: { serials: sentence } });
  });

  it('packs no unit twice, also when it is packed twice at once', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed);
    const input = { orderNumber: order.number, serials: ['H3-0001'] };
    const results = await Promise.allSettled([
      packOrder(input, seed.shipper),
      packOrder(input, seed.shipper),
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await db.select().from(shipments)).toHaveLength(1);
  });

  it('can be undone until the parcel has left', async () => {
    const { db, seed, order, serials, shipmentNumber } = await packedOrder();
    await unpackShipment({ number: shipmentNumber }, seed.shipper);
    expect(await db.select().from(shipments)).toEqual([]);
    const again = await packOrder({ orderNumber: order.number, serials }, seed.shipper);
    await shipShipment({ ...tracked, number: again.shipmentNumber }, seed.shipper);
    await expect(unpackShipment({ number: again.shipmentNumber }, seed.shipper)).rejects.toMatchObject({
      code: 'conflict',
    });
  });
});

describe('shipping', () => {
  it('ships once when it is shipped twice at once', async () => {
    const { db, seed, shipmentNumber } = await packedOrder();
    const input = { ...tracked, number: shipmentNumber };
    const [first, second] = await Promise.all([
      shipShipment(input, seed.shipper),
      shipShipment(input, seed.owner),
    ]);
    expect(second).toEqual(first);
    expect(await listShippedMail()).toHaveLength(1);
    const shipped = await db.select().from(ledgerEntries).where(eq(ledgerEntries.action, 'shipment.ship'));
    expect(shipped).toHaveLength(1);
  });

  it('refuses another number for a parcel that has left', async () => {
    const { seed, shipmentNumber } = await packedOrder();
    await shipShipment({ ...tracked, number: shipmentNumber }, seed.shipper);
    const other = { number: shipmentNumber, carrier: 'Courier', trackingNumber: 'AB12' };
    await expect(shipShipment(other, seed.shipper)).rejects.toMatchObject({
      code: 'conflict',
      message: 'The parcel has left the works. It left with Parcel post, RR473124829DE.',
    });
  });

  it('closes the order only when everything of it has left', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed, { quantity: 3 });
    const stateOf = async () =>
      (await db.select().from(orders).where(eq(orders.id, order.orderId)))[0]?.state;
    const parcels = [];
    for (const serials of [['H3-0001', 'H3-0002'], ['H3-0003']]) {
      parcels.push(await packOrder({ orderNumber: order.number, serials }, seed.shipper));
    }
    const [first, second] = parcels.map(({ shipmentNumber }) => shipmentNumber);
    expect(
      await shipShipment({ number: first ?? 0, carrier: 'Parcel post', trackingNumber: null }, seed.shipper),
    ).toMatchObject({ orderFulfilled: false });
    expect(await stateOf()).toBe('paid');
    expect(
      await shipShipment({ number: second ?? 0, carrier: 'Parcel post', trackingNumber: null }, seed.shipper),
    ).toMatchObject({ orderFulfilled: true });
    expect(await stateOf()).toBe('fulfilled');
  });

  it('asks for the mail in the transaction that ships, and in no other (rule 8)', async () => {
    const { db, seed, shipmentNumber, shipmentId } = await packedOrder();
    expect(await listShippedMail()).toEqual([]);
    await db
      .transaction(async (tx) => {
        const ctx = { ...seed.shipper, tx, record: () => Promise.resolve(), post: () => Promise.resolve() };
        await shipShipment({ ...tracked, number: shipmentNumber }, ctx);
        expect(
          await tx
            .select()
            .from(outbox)
            .where(eq(outbox.key, `shipped:${shipmentId}`)),
        ).toHaveLength(1);
        throw new Error('the transaction comes to nothing');
      })
      .catch((error: unknown) =>
        expect(error).toMatchObject({ message: 'the transaction comes to nothing' }),
      );
    expect(await listShippedMail()).toEqual([]);
    expect((await db.select().from(shipments))[0]?.state).toBe('packed');
    await shipShipment({ ...tracked, number: shipmentNumber }, seed.shipper);
    expect(await listShippedMail()).toMatchObject([
      { key: `shipped:${shipmentId}`, payload: { letter: 'shipped', shipmentId } },
    ]);
  });

  it('mails the certificate as PDF and the tracking number to the buyer', async () => {
    const { db, seed, shipmentNumber, shipmentId } = await packedOrder({ quantity: 2 });
    await shipShipment({ ...tracked, number: shipmentNumber }, seed.shipper);
    const letter = await letters['shipped']?.(db, { letter: 'shipped', shipmentId });
    expect(letter?.to).toBe('quirin@buyer.test');
    expect(letter?.subject).toContain('shipped');
    expect(letter?.text).toContain('RR473124829DE');
    expect(
      letter?.attachments?.map(({ filename, content }) => [filename, Buffer.from(content).toString()]),
    ).toEqual([
      ['TC-2027-00001.pdf', '%PDF-1.7 H3-0001 1'],
      ['TC-2027-00002.pdf', '%PDF-1.7 H3-0002 2'],
    ]);
  });

  it('refuses a tracking number whose check digit is wrong, until it is confirmed', async () => {
    const { db, seed, shipmentNumber } = await packedOrder();
    const mistyped = { number: shipmentNumber, carrier: 'Parcel post', trackingNumber: 'RR 473 124 828 DE' };
    const shipping = shipShipment(mistyped, seed.shipper);
    await expect(shipping).rejects.toThrow('RR473124828DE is mistyped');
    await expect(shipping).rejects.toMatchObject({ code: 'refused' });
    await expect(shipping).rejects.toHaveProperty('fields.trackingNumber');
    expect((await db.select().from(shipments))[0]?.state).toBe('packed');
    await shipShipment({ ...mistyped, trackingConfirmed: true }, seed.shipper);
    expect((await db.select().from(shipments))[0]).toMatchObject({
      state: 'shipped',
      trackingNumber: 'RR473124828DE',
    });
  });

  it('refuses a parcel that holds an older test sheet', async () => {
    const { db, seed, order, shipmentNumber } = await packedOrder();
    const [unit = { id: 0, serial: '' }] = order.units;
    const testRunId = await seedRun(db, seed, unit.id, { result: 'passed' });
    await seedCertificate(db, seed, order, unit, { testRunId });
    await expect(shipShipment({ ...tracked, number: shipmentNumber }, seed.shipper)).rejects.toThrow(
      'certified anew since packing',
    );
  });
});

describe('what people see of a parcel', () => {
  it('shows a shipper the address while there is something to ship, and no longer', async () => {
    const { db, seed, order, shipmentNumber } = await packedOrder();
    const shipper = { roles: ['shipper' as const], today: '2027-03-20' };
    expect((await readPacking(db, order.number, shipper))?.addressee).toContain('7 Heather Row');
    expect((await makePackingList(db, { number: shipmentNumber, roles: ['shipper'] })).fileName).toMatch(
      /pdf$/,
    );
    await shipShipment({ ...tracked, number: shipmentNumber }, seed.shipper);
    expect((await readPacking(db, order.number, shipper))?.addressee).toBeNull();
    await expect(makePackingList(db, { number: shipmentNumber, roles: ['shipper'] })).rejects.toMatchObject({
      code: 'forbidden',
    });
    expect(
      (await makePackingList(db, { number: shipmentNumber, roles: ['owner'] })).bytes.byteLength,
    ).toBeGreaterThan(1000);
  });

  it('says what customs asks for where the parcel leaves the country, on paper too', async () => {
    const { db, shipmentNumber } = await packedOrder({
      quantity: 2,
      country: 'US',
      region: 'OH',
      option: ['band.40m', 'band.30m', 'band.20m', 'filter.narrow'],
    });
    const shipment = await readShipment(db, { number: shipmentNumber });
    expect(shipment?.customs).toEqual([
      {
        description: 'Amateur radio transceiver, assembled',
        hsCode: '8525.60',
        originCountry: 'DE',
        quantity: 2,
        netWeightG: 840,
        // Two rigs at € 389 with the filter at € 48.
        valueMinor: 87_400,
        currency: 'EUR',
      },
    ]);
    const text = textOf((await makePackingList(db, { number: shipmentNumber, roles: ['shipper'] })).bytes);
    expect(text.replace(/\s+/gu, ' ')).toContain('8525.60 Germany 0.84 kg € 874.00');
  });

  it('declares nothing inside the country', async () => {
    const { db, shipmentNumber } = await packedOrder();
    expect((await readShipment(db, { number: shipmentNumber }))?.customs).toBeNull();
  });
});

describe('the balance', () => {
  it('is asked for by mail once a day, after a unit has passed', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const order = await seedReadyOrder(db, seed, { pay: 'deposit' });
    expect(await askForBalance({ orderNumber: order.number }, seed.owner)).toEqual({
      orderId: order.orderId,
      balanceMinor: 28_900,
    });
    await expect(askForBalance({ orderNumber: order.number }, seed.owner)).rejects.toMatchObject({
      code: 'conflict',
    });
    const letter = await letters['balance_due']?.(db, { letter: 'balance_due', orderId: order.orderId });
    expect(letter?.to).toBe('quirin@buyer.test');
    expect(letter?.subject).toContain('€\u00a0289');
  });

  it('is not asked for before a unit has passed, nor where all is paid', async () => {
    const { db } = database;
    const seed = await seedDispatch(db);
    const deposit = await seedReadyOrder(db, seed, { pay: 'deposit' });
    await db.update(units).set({ stage: 'final_test' });
    await expect(askForBalance({ orderNumber: deposit.number }, seed.owner)).rejects.toThrow(
      /passed its final test/,
    );
    const full = await seedReadyOrder(db, seed, { email: 'other@buyer.test' });
    await expect(askForBalance({ orderNumber: full.number }, seed.owner)).rejects.toThrow(/paid in full/);
  });
});
