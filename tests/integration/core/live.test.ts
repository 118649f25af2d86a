import { setTimeout as pause } from 'node:timers/promises';
import { expect, onTestFinished, test, vi } from 'vitest';
import { openDatabase } from '~/server/db/client';
import { ledgerEntries, ledgerSubjects } from '~/server/db/schema';
import { changeStream } from '~/server/live/change-stream';
import type { Change } from '~/server/live/tail';
import { tailLedger } from '~/server/live/tail';
import type { CallContext, Subject } from '~/server/write';
import { write } from '~/server/write';
import { testDatabase } from '../../setup/database';
import { deferred } from './deferred';
import { readEvents } from './read-events';

const database = testDatabase();

function context(): CallContext {
  return { db: database.db, actor: { kind: 'system' }, now: new Date() };
}

async function change(action: string, ...subjects: Subject[]): Promise<void> {
  await write(context(), async (w) => {
    await w.record({ action, subjects });
    return null;
  });
}

function openTail(onLook: () => void = () => undefined) {
  const errors: unknown[] = [];
  const tail = tailLedger({
    reader: () => {
      onLook();
      return database.db;
    },
    everyMs: 5,
    rereadMs: 15_000,
    onError: (error) => errors.push(error),
  });
  onTestFinished(() => expect(errors).toEqual([]));
  return tail;
}

/** Listens, and waits for as many changes as a test expects. */
function listen(tail: ReturnType<typeof openTail>) {
  const heard: Change[] = [];
  let check: () => void = () => undefined;
  const { started, stop } = tail.listen((one) => {
    heard.push(one);
    check();
  });
  onTestFinished(stop);
  return {
    heard,
    started,
    stop,
    until: (count: number) =>
      new Promise<Change[]>((resolve) => {
        check = () => {
          if (heard.length >= count) resolve(heard);
        };
        check();
      }),
  };
}

test('the tail tells what is committed after it started, with its subjects, once', async () => {
  await change('unit.old', { type: 'unit', id: 1 });
  let looks = 0;
  const tail = openTail(() => (looks += 1));
  const { started, until, heard } = listen(tail);
  await started;
  await change('unit.tick', { type: 'unit', id: 1 }, { type: 'batch', id: 4 });
  await change('works.change');
  await until(2);
  // Later looks read the same entries again.
  const enough = looks + 4;
  await vi.waitUntil(() => looks >= enough);
  expect(heard.map(({ action, subjects }) => ({ action, subjects }))).toEqual([
    {
      action: 'unit.tick',
      subjects: [
        { type: 'batch', id: 4 },
        { type: 'unit', id: 1 },
      ],
    },
    { action: 'works.change', subjects: [] },
  ]);
});

test('the tail tells an entry that commits after one with a higher id', async () => {
  const { started, until } = listen(openTail());
  await started;
  const other = openDatabase(database.url, 1);
  onTestFinished(() => other.close());
  const { promise: mayCommit, resolve: letCommit } = deferred();
  const { promise: lowerId, resolve: haveLowerId } = deferred<number>();
  const slow = other.transaction(async (tx) => {
    const [{ insertId }] = await tx
      .insert(ledgerEntries)
      .values({ at: new Date(), actorKind: 'system', action: 'unit.slow', details: {} });
    await tx.insert(ledgerSubjects).values({ ledgerEntryId: insertId, subjectType: 'unit', subjectId: 1 });
    haveLowerId(insertId);
    await mayCommit;
  });
  const slowId = await lowerId;
  await change('unit.quick', { type: 'unit', id: 2 });
  const [quick] = await until(1);
  expect(quick?.action).toBe('unit.quick');
  letCommit();
  await slow;
  const heard = await until(2);
  expect(heard.map(({ action }) => action)).toEqual(['unit.quick', 'unit.slow']);
  expect(heard[1]?.id).toBe(slowId);
  expect(slowId).toBeLessThan(heard[0]?.id ?? 0);
});

test('one tail serves all listeners, and asks nothing while nobody listens', async () => {
  let asked = 0;
  const tail = openTail(() => (asked += 1));
  const one = listen(tail);
  const two = listen(tail);
  await one.started;
  await change('unit.tick', { type: 'unit', id: 1 });
  expect(await one.until(1)).toEqual(await two.until(1));
  one.stop();
  expect(tail.isRunning()).toBe(true);
  two.stop();
  expect(tail.isRunning()).toBe(false);
  const before = asked;
  // Time for eight looks, if it went on.
  await pause(40);
  expect(asked).toBe(before);
  const three = listen(tail);
  await three.started;
  await change('unit.tick', { type: 'unit', id: 2 });
  const heard = await three.until(1);
  expect(heard.map(({ subjects }) => subjects)).toEqual([[{ type: 'unit', id: 2 }]]);
});

test('a stream carries what was asked for and no more, and ends when its reader goes', async () => {
  const tail = openTail();
  await change('unit.first', { type: 'unit', id: 12 });
  const response = changeStream({
    tail,
    reader: database.db,
    subjects: [
      { type: 'unit', id: 12 },
      { type: 'batch', id: null },
    ],
    userId: 7,
  });
  expect(response.headers.get('content-type')).toBe('text/event-stream');
  const events = readEvents(response);
  const state = await events.next();
  expect(state.value).toMatchObject({ event: 'state', data: { id: 1 } });
  await change('unit.other', { type: 'unit', id: 13 });
  await change('unit.tick', { type: 'user', id: 9 }, { type: 'unit', id: 12 }, { type: 'batch', id: 3 });
  const told = await events.next();
  expect(told.value).toEqual({
    id: '3',
    event: 'change',
    data: {
      action: 'unit.tick',
      subjects: [
        { type: 'batch', id: 3 },
        { type: 'unit', id: 12 },
      ],
    },
  });
  await events.return();
  expect(tail.isRunning()).toBe(false);
});

test('a stream ends when the roles of its listener change', async () => {
  const tail = openTail();
  const response = changeStream({
    tail,
    reader: database.db,
    subjects: [{ type: 'unit', id: 12 }],
    userId: 7,
  });
  const events = readEvents(response);
  expect((await events.next()).value).toEqual({ event: 'state', data: null });
  await change('person.change', { type: 'user', id: 7 });
  expect((await events.next()).done).toBe(true);
  expect(tail.isRunning()).toBe(false);
});

test('a stream that is never read does not listen', async () => {
  const tail = openTail();
  const response = changeStream({ tail, reader: database.db, subjects: [], userId: 7 });
  expect(tail.isRunning()).toBe(false);
  await response.body?.cancel();
});
