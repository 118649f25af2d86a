import { asc, eq } from 'drizzle-orm';
import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { openDatabase } from '~/server/db/client';
import { outbox } from '~/server/db/schema';
import type { handlers } from '~/server/jobs/handlers';
import type { JobCall } from '~/server/jobs/job';
import { NeverPossible } from '~/server/jobs/job';
import { leaseOutbox, markDone, markFailed } from '~/server/jobs/lease-outbox';
import { drainOutbox } from '~/server/jobs/run-worker';
import { testDatabase } from '../../setup/database';
import { someDay } from '../../factories/contexts';
import { deferred } from './deferred';

// Rows of these kinds are done by the test itself; the rest by the real handlers.
const done = vi.hoisted(() => ({ test: (_: JobCall): Promise<void> => Promise.resolve() }));
vi.mock('~/server/jobs/handlers', async (load) => {
  const real = await load<{ handlers: typeof handlers }>();
  return { handlers: { ...real.handlers, test: (call: JobCall) => done.test(call) } };
});

const database = testDatabase();
const secondsLater = (seconds: number) => new Date(someDay.getTime() + seconds * 1000);
const rows = () => database.db.select().from(outbox).orderBy(asc(outbox.id));

beforeEach(() => {
  done.test = () => Promise.resolve();
});

afterEach(() => {
  vi.restoreAllMocks();
});

async function seedRows(
  count: number,
  kind = 'test',
  availableAt = someDay,
  createdAt = someDay,
): Promise<void> {
  await database.db.insert(outbox).values(
    Array.from({ length: count }, (_, index) => ({
      key: `${kind}:${index + 1}`,
      kind,
      payload: { index },
      createdAt,
      availableAt,
    })),
  );
}

test('two workers at once lease no row twice and leave none', async () => {
  await seedRows(40);
  const other = openDatabase(database.url);
  try {
    const leases = await Promise.all(
      Array.from({ length: 20 }, (_, index) =>
        leaseOutbox(index % 2 === 0 ? database.db : other, someDay, 3),
      ),
    );
    const rest = await leaseOutbox(other, someDay, 100);
    const ids = [...leases.flat(), ...rest].map(({ id }) => id).sort((a, b) => a - b);
    expect(ids).toEqual((await rows()).map(({ id }) => id));
    expect(leases.flat().length).toBeGreaterThan(0);
  } finally {
    await other.close();
  }
});

test('a worker passes over the rows that another is just leasing', async () => {
  await seedRows(2);
  const other = openDatabase(database.url, 1);
  const [mayEnd, isLocked] = [deferred(), deferred()];
  try {
    const holding = other.transaction(async (tx) => {
      await tx.select().from(outbox).where(eq(outbox.key, 'test:1')).for('update');
      isLocked.resolve();
      await mayEnd.promise;
    });
    await isLocked.promise;
    const leased = await leaseOutbox(database.db, someDay, 8);
    expect(leased.map(({ key }) => key)).toEqual(['test:2']);
    mayEnd.resolve();
    await holding;
  } finally {
    await other.close();
  }
});

test('the lease of a worker that died runs out, and the row is done again under its key', async () => {
  await seedRows(1);
  const [first] = await leaseOutbox(database.db, someDay, 8);
  expect(await leaseOutbox(database.db, secondsLater(119), 8)).toEqual([]);
  const [again] = await leaseOutbox(database.db, secondsLater(121), 8);
  expect(again).toMatchObject({ id: first?.id, key: 'test:1', attempts: 1 });
  await markDone(database.db, first?.id ?? 0, secondsLater(122));
  expect(await leaseOutbox(database.db, secondsLater(10_000), 8)).toEqual([]);
});

test('a row waits until it is due, the earliest first', async () => {
  await seedRows(1, 'later', secondsLater(10));
  await seedRows(1, 'sooner', secondsLater(5));
  expect(await leaseOutbox(database.db, secondsLater(4), 8)).toEqual([]);
  const leased = await leaseOutbox(database.db, secondsLater(10), 8);
  expect(leased.map(({ key }) => key)).toEqual(['sooner:1', 'later:1']);
});

test('a failure puts a row off, each time for longer, up to a quarter of an hour', async () => {
  await seedRows(1);
  const waits: number[] = [];
  let now = someDay;
  for (let attempt = 0; attempt < 12; attempt += 1) {
    const [row] = await leaseOutbox(database.db, now, 8);
    if (row === undefined) throw new Error('The row was to be open again.');
    await markFailed(database.db, row, 'nobody answers', now, false);
    const [after] = await rows();
    waits.push(((after?.availableAt.getTime() ?? 0) - now.getTime()) / 1000);
    now = after?.availableAt ?? now;
  }
  expect(waits).toEqual([1, 2, 4, 8, 16, 32, 64, 128, 256, 512, 900, 900]);
  expect((await rows())[0]).toMatchObject({ attempts: 12, lastError: 'nobody answers', gaveUpAt: null });
});

test('a row that still fails after three days is given up', async () => {
  await seedRows(1);
  const late = secondsLater(3 * 24 * 3600 + 1);
  const [row] = await leaseOutbox(database.db, late, 8);
  if (row === undefined) throw new Error('The row was to be open.');
  await markFailed(database.db, row, 'nobody answers', late, false);
  expect((await rows())[0]?.gaveUpAt).toEqual(late);
  expect(await leaseOutbox(database.db, secondsLater(9 * 24 * 3600), 8)).toEqual([]);
});

test('the worker does a row once; a failure is tried again, one that can never help is given up', async () => {
  const now = new Date();
  await seedRows(3, 'test', now, now);
  const calls: string[] = [];
  done.test = ({ key }) => {
    calls.push(key);
    if (key === 'test:2') throw new Error('nobody answers');
    if (key === 'test:3') throw new NeverPossible('there is no such letter');
    return Promise.resolve();
  };
  expect(await drainOutbox(database.db)).toBe(3);
  const [one, two, three] = await rows();
  expect(one?.doneAt).toBeInstanceOf(Date);
  expect(two).toMatchObject({ doneAt: null, gaveUpAt: null, leasedUntil: null, lastError: 'nobody answers' });
  expect(two?.availableAt.getTime()).toBeGreaterThan(now.getTime());
  expect(three).toMatchObject({ doneAt: null, lastError: 'there is no such letter' });
  expect(three?.gaveUpAt).toBeInstanceOf(Date);
  await database.db.update(outbox).set({ availableAt: someDay });
  await drainOutbox(database.db);
  expect(calls.sort()).toEqual(['test:1', 'test:2', 'test:2', 'test:3']);
});

test('a kind that nobody does is given up, not tried for ever', async () => {
  await seedRows(1, 'unheard_of');
  await drainOutbox(database.db);
  expect((await rows())[0]?.gaveUpAt).toBeInstanceOf(Date);
});

test('a stopped worker takes no new row', async () => {
  await seedRows(1);
  expect(await drainOutbox(database.db, AbortSignal.abort())).toBe(0);
  expect((await rows())[0]?.attempts).toBe(0);
});
