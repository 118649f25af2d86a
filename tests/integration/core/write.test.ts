import { asc, eq } from 'drizzle-orm';
import { expect, test } from 'vitest';
import { openDatabase } from '~/server/db/client';
import {
  idempotencyKeys,
  ledgerEntries,
  ledgerSubjects,
  numberSeries,
  outbox,
  users,
} from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { databaseErrno, nextNumber, write } from '~/server/write';
import { testDatabase } from '../../setup/database';
import { callContext, someDay, underKey } from '../../factories/contexts';
import { deferred } from './deferred';

const database = testDatabase();

const entries = () => database.db.select().from(ledgerEntries).orderBy(asc(ledgerEntries.id));

/** A small service: makes a user and says so. */
function addUser(ctx: Ctx): Promise<{ userId: number }> {
  return write(ctx, async (w) => {
    const [{ insertId }] = await w.tx.insert(users).values({ createdAt: w.now });
    await w.record({ action: 'test.add', subjects: [{ type: 'user', id: insertId }] });
    return { userId: insertId };
  });
}

test('rule 9: who did what, when, from what to what, is kept for every change', async () => {
  const { userId } = await addUser(callContext(database.db));
  await write(
    callContext(database.db, { actor: { kind: 'user', userId }, requestId: 'request-1' }),
    async (w) => {
      await w.record({
        action: 'lot.count',
        subjects: [
          { type: 'lot', id: 3 },
          { type: 'part', id: 9 },
          { type: 'lot', id: 3 },
        ],
        details: { onHand: { from: 10, to: 9 } },
      });
      return null;
    },
  );
  const [, entry] = await entries();
  expect(entry).toMatchObject({
    at: someDay,
    actorKind: 'user',
    actorUserId: userId,
    action: 'lot.count',
    details: { onHand: { from: 10, to: 9 } },
    requestId: 'request-1',
  });
  const subjects = await database.db
    .select()
    .from(ledgerSubjects)
    .where(eq(ledgerSubjects.ledgerEntryId, entry?.id ?? 0));
  expect(subjects.map(({ subjectType, subjectId }) => `${subjectType}:${subjectId}`).sort()).toEqual([
    'lot:3',
    'part:9',
  ]);
});

test('rule 9: an entry of the ledger of changes is never changed or deleted', async () => {
  await addUser(callContext(database.db));
  await expect(database.db.update(ledgerEntries).set({ action: 'test.other' })).rejects.toMatchObject({
    cause: { errno: 1644 },
  });
  await database.db.delete(ledgerSubjects);
  await expect(database.db.delete(ledgerEntries)).rejects.toMatchObject({
    cause: { errno: 1644 },
  });
  expect(await entries()).toHaveLength(1);
});

test('rule 10: times are kept in UTC with milliseconds, whatever the zone of the process', async () => {
  const zone = process.env['TZ'];
  process.env['TZ'] = 'Pacific/Chatham';
  try {
    await addUser(callContext(database.db, { now: new Date('2026-03-02T09:00:00.123Z') }));
    const [row] = await database.db.select({ createdAt: users.createdAt }).from(users);
    expect(row?.createdAt.toISOString()).toBe('2026-03-02T09:00:00.123Z');
    const [rows] = await database.db.execute('select cast(created_at as char) as kept from users');
    expect(rows).toMatchObject([{ kept: '2026-03-02 09:00:00.123' }]);
  } finally {
    if (zone === undefined) delete process.env['TZ'];
    else process.env['TZ'] = zone;
  }
});

test.each([0, 2])('a change with %i ledger entries is rolled back', async (count) => {
  const change = write(callContext(database.db), async (w) => {
    await w.tx.insert(users).values({ createdAt: w.now });
    for (let entry = 0; entry < count; entry += 1) await w.record({ action: 'test.add', subjects: [] });
    return null;
  });
  await expect(change).rejects.toThrow(`made ${count} ledger entries`);
  expect(await database.db.$count(users)).toBe(0);
  expect(await entries()).toEqual([]);
});

test('a service joins its caller’s transaction, and each makes an entry of its own', async () => {
  await write(callContext(database.db), async (w) => {
    await addUser(w);
    await addUser(w);
    await w.record({ action: 'test.both', subjects: [] });
    return null;
  });
  expect((await entries()).map(({ action }) => action)).toEqual(['test.add', 'test.add', 'test.both']);
  const failing = write(callContext(database.db), async (w) => {
    await addUser(w);
    throw new DomainError('conflict', 'Not now.');
  });
  await expect(failing).rejects.toThrow('Not now.');
  expect(await database.db.$count(users)).toBe(2);
});

test('of two transactions that lock each other out, the one that MariaDB ends is done again', async () => {
  const [{ insertId: one }] = await database.db.insert(users).values({ createdAt: someDay });
  const [{ insertId: two }] = await database.db.insert(users).values({ createdAt: someDay });
  let attempts = 0;
  const holds = [deferred(), deferred()];
  const lockBoth = (index: 0 | 1, first: number, second: number) =>
    write(callContext(database.db), async (w) => {
      attempts += 1;
      await w.tx.select().from(users).where(eq(users.id, first)).for('update');
      holds[index]?.resolve();
      await holds[1 - index]?.promise;
      await w.tx
        .update(users)
        .set({ version: index + 2 })
        .where(eq(users.id, second));
      await w.record({ action: 'test.lock', subjects: [{ type: 'user', id: second }] });
      return index;
    });
  expect(await Promise.all([lockBoth(0, one, two), lockBoth(1, two, one)])).toEqual([0, 1]);
  expect(attempts).toBe(3);
  expect(await entries()).toHaveLength(2);
  const kept = await database.db
    .select({ id: users.id, version: users.version })
    .from(users)
    .orderBy(users.id);
  expect(kept).toEqual([
    { id: one, version: 3 },
    { id: two, version: 2 },
  ]);
});

test('an error that trying again cannot mend is not tried again', async () => {
  let attempts = 0;
  const change = write(callContext(database.db), async (w) => {
    attempts += 1;
    await w.tx.insert(users).values({ id: 5, createdAt: w.now });
    await w.tx.insert(users).values({ id: 5, createdAt: w.now });
    return null;
  });
  const error: unknown = await change.catch((reason: unknown) => reason);
  expect(databaseErrno(error)).toBe(1062);
  expect(attempts).toBe(1);
  expect(databaseErrno(new Error('no database'))).toBeUndefined();
});

test('one key sent twice at once acts once, and both get the same answer', async () => {
  const answers = await Promise.all(Array.from({ length: 5 }, () => addUser(underKey(database.db, 'key-1'))));
  expect(new Set(answers.map(({ userId }) => userId)).size).toBe(1);
  expect(await database.db.$count(users)).toBe(1);
  expect(await entries()).toHaveLength(1);
  expect(await addUser(underKey(database.db, 'key-2'))).not.toEqual(answers[0]);
});

test('a key is compared byte for byte, and belongs to its caller and its door', async () => {
  await addUser(underKey(database.db, 'key-a'));
  await addUser(underKey(database.db, 'KEY-A'));
  const other = underKey(database.db, 'key-a');
  if (other.idempotency) other.idempotency.actor = 'user:7';
  await addUser(other);
  const elsewhere = underKey(database.db, 'key-a');
  if (elsewhere.idempotency) elsewhere.idempotency.route = 'POST /api/others';
  await addUser(elsewhere);
  expect(await database.db.$count(users)).toBe(4);
});

test('a key with another body is refused', async () => {
  await addUser(underKey(database.db, 'key-1', 'a'.repeat(64)));
  await expect(addUser(underKey(database.db, 'key-1', 'b'.repeat(64)))).rejects.toMatchObject({
    code: 'conflict',
  });
  expect(await database.db.$count(users)).toBe(1);
});

test('a request that writes twice repeats both writes with their own answers', async () => {
  const request = async () => {
    const ctx = underKey(database.db, 'key-1');
    return [await addUser(ctx), await addUser(ctx)];
  };
  const first = await request();
  expect(first[0]).not.toEqual(first[1]);
  expect(await request()).toEqual(first);
  expect(await database.db.$count(users)).toBe(2);
});

test('a request cut off between its writes goes on where it ended', async () => {
  const cutOff = underKey(database.db, 'key-1');
  const first = await addUser(cutOff);
  const again = underKey(database.db, 'key-1');
  expect(await addUser(again)).toEqual(first);
  await addUser(again);
  expect(await database.db.$count(users)).toBe(2);
});

test('a refused request leaves no key behind', async () => {
  const refused = write(underKey(database.db, 'key-1'), () => {
    throw new DomainError('conflict', 'Not now.');
  });
  await expect(refused).rejects.toThrow('Not now.');
  expect(await database.db.$count(idempotencyKeys)).toBe(0);
  await addUser(underKey(database.db, 'key-1'));
  expect(await database.db.$count(users)).toBe(1);
});

test('a number series has no gap and no double under fifty draws at once, some of them rolled back', async () => {
  const many = openDatabase(database.url, 25);
  try {
    const draws = await Promise.allSettled(
      Array.from({ length: 60 }, (_, index) =>
        write(callContext(many), async (w) => {
          const number = await nextNumber(w.tx, 'serial:T1');
          if (index % 6 === 0) throw new DomainError('conflict', 'Not now.');
          await w.record({ action: 'test.draw', subjects: [] });
          return number;
        }),
      ),
    );
    const drawn = draws.flatMap((draw) => (draw.status === 'fulfilled' ? [draw.value] : []));
    expect(drawn.sort((a, b) => a - b)).toEqual(Array.from({ length: 50 }, (_, index) => index + 1));
    const reasons = draws.flatMap((draw) => (draw.status === 'rejected' ? [String(draw.reason)] : []));
    expect(new Set(reasons)).toEqual(new Set(['DomainError: Not now.']));
  } finally {
    await many.close();
  }
});

test('each series counts for itself, from 1', async () => {
  await write(callContext(database.db), async (w) => {
    expect(await nextNumber(w.tx, 'order')).toBe(1);
    expect(await nextNumber(w.tx, 'order')).toBe(2);
    expect(await nextNumber(w.tx, 'certificate')).toBe(1);
    await w.record({ action: 'test.draw', subjects: [] });
    return null;
  });
  const kept = await database.db.select().from(numberSeries).orderBy(numberSeries.series);
  expect(kept).toEqual([
    { series: 'certificate', nextValue: 2 },
    { series: 'order', nextValue: 3 },
  ]);
});

test('rule 8: what a change asks of the outside is written with it, once under its key, or not at all', async () => {
  const post = (payload: Record<string, unknown>, fails = false) =>
    write(callContext(database.db), async (w) => {
      await w.post({ kind: 'mail', key: 'order-received:1', payload });
      await w.record({ action: 'test.post', subjects: [] });
      if (fails) throw new DomainError('conflict', 'Not now.');
      return null;
    });
  await expect(post({ orderId: 0 }, true)).rejects.toThrow('Not now.');
  expect(await database.db.$count(outbox)).toBe(0);
  await post({ orderId: 1 });
  await post({ orderId: 2 });
  const rows = await database.db.select().from(outbox);
  expect(rows).toHaveLength(1);
  expect(rows[0]).toMatchObject({
    key: 'order-received:1',
    payload: { orderId: 1 },
    createdAt: someDay,
    availableAt: someDay,
    attempts: 0,
    doneAt: null,
  });
});
