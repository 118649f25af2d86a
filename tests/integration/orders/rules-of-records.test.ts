import { asc } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { ledgerEntries, outbox, units, userProfiles } from '~/server/db/schema';
import { placeOrder } from '~/server/services/orders/place-order';
import { seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import type { SeededModel } from '../../factories/catalog';
import {
  buildContext,
  buildOrder,
  buildPaid,
  byProvider,
  deliver,
  seedPaidOrder,
} from '../../factories/orders';
import { testDatabase } from '../../setup/database';
import { outcomes } from '../../setup/outcomes';
import { readOrder } from './read-rows';

const database = testDatabase();
let model: SeededModel;

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
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
    expect((await readOrder(database.db, first.orderId)).buyerUserId).toBe(
      (await readOrder(database.db, second.orderId)).buyerUserId,
    );
  });

  it('makes one account where two orders of a new buyer are paid at once', async () => {
    await seedBatch(database.db, model);
    const facts = [];
    for (let n = 0; n < 4; n += 1) {
      const { checkoutId } = await placeOrder(buildOrder(), buildContext(database.db));
      facts.push(await buildPaid(database.db, checkoutId));
    }
    const { refused } = await outcomes(facts.map((fact) => deliver(byProvider(database.db), fact)));
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
