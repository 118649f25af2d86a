import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { batches, bomLines, bomRevisions, models, testPlanRevisions } from '~/server/db/schema';
import { listBatches } from '~/server/queries/planning/list-batches';
import { readBatch } from '~/server/queries/planning/read-batch';
import { changeBatch } from '~/server/services/planning/change-batch';
import type { BatchChange } from '~/server/services/planning/change-batch';
import { openBatch } from '~/server/services/planning/open-batch';
import { placeHold } from '~/server/services/production/place-hold';
import { databaseErrno } from '~/server/write';
import { callAs } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { at, seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import { seedPaidOrder } from '../../factories/orders';
import { seedLot } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
const opening = { modelSlug: 'holm-3', places: 4, priceMinor: 38_900, depositMinor: 10_000, currency: 'EUR' };

async function seedOwner() {
  await seedWorks(database.db);
  return callAs(database.db, await seedPerson(database.db, { name: 'Mara Quill', roles: ['owner'] }));
}

describe('opening a batch', () => {
  it('freezes the newest released revisions, and keeps them when newer ones are released', async () => {
    const { db } = database;
    const owner = await seedOwner();
    const model = await seedModel(db);
    // A draft that is newer is not taken.
    await db
      .insert(bomRevisions)
      .values({ modelId: model.modelId, letter: 'B', state: 'draft', createdAt: at });
    const { batchId, number } = await openBatch({ ...opening, estimatedOn: '2027-05-01' }, owner);
    expect(number).toBe(1);
    const read = async () => (await db.select().from(batches).where(eq(batches.id, batchId)))[0];
    const frozen = {
      bomRevisionId: model.bomRevisionId,
      buildSheetRevisionId: model.buildSheetRevisionId,
      testPlanRevisionId: model.testPlanRevisionId,
    };
    expect(await read()).toMatchObject({ ...frozen, state: 'open', places: 4, estimatedOn: '2027-05-01' });
    await db.update(bomRevisions).set({ state: 'retired' }).where(eq(bomRevisions.id, model.bomRevisionId));
    await db.update(bomRevisions).set({ state: 'released' }).where(eq(bomRevisions.letter, 'B'));
    expect(await read()).toMatchObject(frozen);
    const next = await openBatch(opening, owner);
    expect(next.number).toBe(2);
    expect((await db.select().from(batches).where(eq(batches.number, 2)))[0]?.bomRevisionId).not.toBe(
      model.bomRevisionId,
    );
  });

  it('says which revision is missing', async () => {
    const { db } = database;
    const owner = await seedOwner();
    await seedModel(db);
    await db.update(testPlanRevisions).set({ state: 'draft' });
    await db.update(bomRevisions).set({ state: 'draft' });
    await expect(openBatch(opening, owner)).rejects.toMatchObject({
      code: 'refused',
      message: 'Holm 3 has no released BOM, no released test plan. Release it first; a batch is built to it.',
    });
    expect(await db.select().from(batches)).toEqual([]);
  });

  it('is built to a BOM that the database itself keeps from changing (rule 6)', async () => {
    const { db } = database;
    const owner = await seedOwner();
    const model = await seedModel(db);
    await seedLot(owner, { number: 'R-1' });
    await openBatch(opening, owner);
    const line = {
      bomRevisionId: model.bomRevisionId,
      lineNo: 1,
      partId: 1,
      quantity: 1,
      designators: ['R1'],
    };
    const adding = db.insert(bomLines).values(line);
    // 1644 is SIGNAL of the trigger.
    await expect(adding.catch((error: unknown) => databaseErrno(error))).resolves.toBe(1644);
  });
});

describe('changing a batch', () => {
  const change = (changes: Partial<BatchChange> = {}): BatchChange => ({
    number: 13,
    version: 1,
    places: 20,
    priceMinor: 38_900,
    depositMinor: 10_000,
    currency: 'EUR',
    estimatedOn: '2027-03-23',
    state: 'open',
    ...changes,
  });

  it('keeps places at what is taken and held', async () => {
    const { db } = database;
    const owner = await seedOwner();
    await seedBatch(db, await seedModel(db));
    await seedPaidOrder(db, { quantity: 3 });
    await expect(changeBatch(change({ places: 2 }), owner)).rejects.toMatchObject({
      code: 'invalid',
      fields: { places: '3 places are taken or held; there cannot be fewer.' },
    });
    await changeBatch(change({ places: 3, priceMinor: 41_000, state: 'closed' }), owner);
    expect((await db.select().from(batches))[0]).toMatchObject({
      places: 3,
      priceMinor: 41_000,
      state: 'closed',
      closedAt: owner.now,
      version: 2,
    });
  });

  it('is held to its places by the database itself (rule 1)', async () => {
    const { db } = database;
    await seedBatch(db, await seedModel(db), { places: 2 });
    const overfilling = db.update(batches).set({ placesTaken: 2, placesHeld: 1 });
    // 4025 is a CHECK that failed.
    await expect(overfilling.catch((error: unknown) => databaseErrno(error))).resolves.toBe(4025);
    await db.update(batches).set({ placesTaken: 1, placesHeld: 1 });
    const shrinking = db.update(batches).set({ places: 1 });
    await expect(shrinking.catch((error: unknown) => databaseErrno(error))).resolves.toBe(4025);
  });

  it('does not write over what somebody else changed', async () => {
    const { db } = database;
    const owner = await seedOwner();
    await seedBatch(db, await seedModel(db));
    const results = await Promise.allSettled([
      changeBatch(change({ places: 21 }), owner),
      changeBatch(change({ places: 22 }), owner),
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });
});

describe('what people see of a batch', () => {
  it('shows prices only to whom they concern, and late units first', async () => {
    const { db } = database;
    const owner = await seedOwner();
    const { batchId } = await seedBatch(db, await seedModel(db));
    await seedPaidOrder(db, { quantity: 2 });
    // The batch is now expected later than the next order was promised.
    await db.update(batches).set({ estimatedOn: '2027-06-01' }).where(eq(batches.id, batchId));
    await seedPaidOrder(db, { email: 'other@buyer.test' });
    await placeHold({ subject: { type: 'unit', number: 'H3-0003' }, reason: 'Scratched' }, owner);
    const [row] = await listBatches(db, { withPrices: false, limit: 10 });
    expect(row).toMatchObject({
      price: null,
      taken: 3,
      free: 17,
      holds: 1,
      stages: [{ stage: 'kit', count: 3 }],
    });
    const batch = await readBatch(db, 13, { withPrices: true, today: '2027-04-01' });
    expect(batch?.price).toEqual({ minor: 38_900, depositMinor: 10_000, currency: 'EUR' });
    expect(batch?.holds).toMatchObject([{ on: 'H3-0003', reason: 'Scratched', by: 'Mara Quill' }]);
    expect(batch?.units.map(({ serial, isLate, onHold }) => [serial, isLate, onHold])).toEqual([
      ['H3-0001', true, false],
      ['H3-0002', true, false],
      ['H3-0003', false, true],
    ]);
  });

  it('opens no batch of a model that is not there', async () => {
    const owner = await seedOwner();
    expect(await database.db.select().from(models)).toEqual([]);
    await expect(openBatch(opening, owner)).rejects.toMatchObject({ code: 'not_found' });
  });
});
