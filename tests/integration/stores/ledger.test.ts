import fc from 'fast-check';
import { eq, sql } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { ledgerEntries, ledgerSubjects, lots, storeEntries } from '~/server/db/schema';
import { countLot } from '~/server/services/stores/count-lot';
import { createPart } from '~/server/services/stores/create-part';
import { receiveLot } from '~/server/services/stores/receive-lot';
import { reverseEntry } from '~/server/services/stores/reverse-entry';
import { setLotState } from '~/server/services/stores/set-lot-state';
import { getLot } from '~/server/queries/stores/get-lot';
import { databaseErrno } from '~/server/write';
import type { CallContext } from '~/server/write';
import { seedWorks } from '../../factories/catalog';
import { buildPart, buildReceipt, seedBuilder, seedLot } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let ctx: CallContext;

beforeEach(async () => {
  await seedWorks(database.db);
  ctx = await seedBuilder(database.db);
});

async function lotRow(number: string) {
  const [row] = await database.db.select().from(lots).where(eq(lots.number, number));
  if (row === undefined) throw new Error(`There is no lot ${number}.`);
  return row;
}

async function sumOfEntries(lotId: number): Promise<number> {
  const [row] = await database.db
    .select({ sum: sql<string>`coalesce(sum(${storeEntries.quantity}), 0)` })
    .from(storeEntries)
    .where(eq(storeEntries.lotId, lotId));
  return Number(row?.sum ?? 0);
}

async function newestEntry(lotId: number): Promise<number> {
  const rows = await database.db
    .select({ id: storeEntries.id })
    .from(storeEntries)
    .where(eq(storeEntries.lotId, lotId));
  return Math.max(...rows.map(({ id }) => id));
}

describe('rule 3: on hand is the sum of store entries', () => {
  it('numbers receipts from one series and enters each', async () => {
    const first = await seedLot(ctx, {}, { quantity: 100 });
    const second = await receiveLot(
      buildReceipt({ quantity: 40, supplier: 'Hill & Daughters', bin: 'A-3' }),
      ctx,
    );
    expect([first, second.number]).toEqual(['L-1', 'L-2']);
    const row = await lotRow('L-2');
    expect([row.onHand, await sumOfEntries(row.id)]).toEqual([40, 40]);
  });

  it('a count becomes a move that says why', async () => {
    const number = await seedLot(ctx, {}, { quantity: 100 });
    const counted = await countLot({ lot: number, counted: 93, reason: 'spilled on the floor' }, ctx);
    expect(counted).toMatchObject({ difference: -7, onHand: 93 });
    const found = await getLot(database.db, number);
    expect(found?.entries[0]).toMatchObject({ kind: 'count', quantity: -7, reason: 'spilled on the floor' });
  });

  it('says so where the books agree with the count', async () => {
    const number = await seedLot(ctx, {}, { quantity: 5 });
    await expect(countLot({ lot: number, counted: 5, reason: 'stocktaking' }, ctx)).rejects.toThrow(
      'The books have 5 in lot L-1 too',
    );
  });

  it('reverses an entry once, by another that names it', async () => {
    const number = await seedLot(ctx, {}, { quantity: 10 });
    const { entryId } = await countLot({ lot: number, counted: 4, reason: 'miscounted' }, ctx);
    const reversed = await reverseEntry({ lot: number, entryId, reason: 'the rest lay in another bin' }, ctx);
    expect(reversed).toMatchObject({ quantity: 6, onHand: 10 });
    await expect(reverseEntry({ lot: number, entryId, reason: 'again' }, ctx)).rejects.toThrow(
      'This entry is reversed already.',
    );
    await expect(
      reverseEntry({ lot: number, entryId: reversed.reversalId, reason: 'no' }, ctx),
    ).rejects.toThrow('itself a reversal');
  });

  it('never falls below zero, and keeps nothing of what was refused', async () => {
    const number = await seedLot(ctx, {}, { quantity: 10 });
    const row = await lotRow(number);
    const receipt = await newestEntry(row.id);
    await countLot({ lot: number, counted: 3, reason: 'used on the bench' }, ctx);
    await expect(
      reverseEntry({ lot: number, entryId: receipt, reason: 'sent back' }, ctx),
    ).rejects.toMatchObject({
      code: 'conflict',
    });
    expect((await lotRow(number)).onHand).toBe(3);
    expect(await sumOfEntries(row.id)).toBe(3);
  });

  it('the database itself refuses a lot below zero', async () => {
    const number = await seedLot(ctx, {}, { quantity: 10 });
    const error: unknown = await database.db
      .update(lots)
      .set({ onHand: -1 })
      .where(eq(lots.number, number))
      .catch((caught: unknown) => caught);
    expect(databaseErrno(error)).toBe(4025);
  });

  it('a store entry is never changed or deleted', async () => {
    const number = await seedLot(ctx, {}, { quantity: 10 });
    const { id } = await lotRow(number);
    const changed: unknown = await database.db
      .update(storeEntries)
      .set({ quantity: 11 })
      .where(eq(storeEntries.lotId, id))
      .catch((caught: unknown) => caught);
    const deleted: unknown = await database.db
      .delete(storeEntries)
      .where(eq(storeEntries.lotId, id))
      .catch((caught: unknown) => caught);
    expect([databaseErrno(changed), databaseErrno(deleted)]).toEqual([1644, 1644]);
    expect(await sumOfEntries(id)).toBe(10);
  });

  it('holds over any history of counts, reversals and refusals', async () => {
    let round = 0;
    await fc.assert(
      fc.asyncProperty(
        fc.integer({ min: 1, max: 50 }),
        fc.array(
          fc.oneof(
            fc.record({ kind: fc.constant('count' as const), to: fc.integer({ min: 0, max: 60 }) }),
            fc.record({ kind: fc.constant('reverse' as const), which: fc.nat(12) }),
          ),
          { maxLength: 12 },
        ),
        async (received, moves) => {
          round += 1;
          const number = await seedLot(ctx, { number: `P-${round}` }, { quantity: received });
          const { id } = await lotRow(number);
          for (const move of moves) {
            const entries = await database.db
              .select({ id: storeEntries.id })
              .from(storeEntries)
              .where(eq(storeEntries.lotId, id));
            const entryId = entries[move.kind === 'reverse' ? move.which % entries.length : 0]?.id ?? 0;
            const doing =
              move.kind === 'count'
                ? countLot({ lot: number, counted: move.to, reason: 'counted' }, ctx)
                : reverseEntry({ lot: number, entryId, reason: 'taken back' }, ctx);
            await doing.catch((error: unknown) => expect(error).toHaveProperty('code', 'conflict'));
            const { onHand } = await lotRow(number);
            expect(onHand).toBe(await sumOfEntries(id));
            expect(onHand).toBeGreaterThanOrEqual(0);
          }
        },
      ),
      { numRuns: 25 },
    );
  });
});

describe('lots', () => {
  it('a part is in the books once', async () => {
    await createPart(buildPart(), ctx);
    await expect(createPart(buildPart(), ctx)).rejects.toMatchObject({
      code: 'conflict',
      fields: { number: 'There is a part R-0805-4K7 already.' },
    });
  });

  it('a receipt of a part that is not in the books is refused beside its field', async () => {
    await expect(receiveLot(buildReceipt({ part: 'NOBODY' }), ctx)).rejects.toMatchObject({
      code: 'not_found',
      fields: { part: 'There is no part NOBODY. Enter it under Stores first.' },
    });
    expect(await database.db.$count(lots)).toBe(0);
  });

  it('is barred with its reason and made usable again without it', async () => {
    const number = await seedLot(ctx);
    await setLotState({ lot: number, state: 'barred', reason: 'drifts with temperature' }, ctx);
    expect(await lotRow(number)).toMatchObject({ state: 'barred', barredReason: 'drifts with temperature' });
    await setLotState({ lot: number, state: 'usable' }, ctx);
    expect(await lotRow(number)).toMatchObject({ state: 'usable', barredReason: null });
  });
});

describe('rule 9: who did what, when, from what to what', () => {
  it('is kept for every move and can be read beside the lot', async () => {
    const number = await seedLot(ctx, {}, { quantity: 10 });
    const { id } = await lotRow(number);
    await countLot({ lot: number, counted: 8, reason: 'two were broken' }, ctx);
    await setLotState({ lot: number, state: 'barred', reason: 'legs break off' }, ctx);
    const rows = await database.db
      .select({
        action: ledgerEntries.action,
        user: ledgerEntries.actorUserId,
        details: ledgerEntries.details,
      })
      .from(ledgerSubjects)
      .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
      .where(sql`${ledgerSubjects.subjectType} = 'lot' and ${ledgerSubjects.subjectId} = ${id}`)
      .orderBy(ledgerEntries.id);
    expect(rows.map(({ action }) => action)).toEqual(['lot.receive', 'lot.count', 'lot.bar']);
    expect(rows.map(({ user }) => user)).toEqual(
      Array(3).fill(ctx.actor.kind === 'user' ? ctx.actor.userId : null),
    );
    expect(rows[1]?.details).toMatchObject({ onHand: { from: 10, to: 8 }, reason: 'two were broken' });
    expect(rows[2]?.details).toMatchObject({
      state: { from: 'usable', to: 'barred' },
      reason: 'legs break off',
    });
  });
});
