import { setTimeout as pause } from 'node:timers/promises';
import { db } from '~/server/db/client';
import type { Db } from '~/server/db/client';
import { stopCertificateThread } from '~/server/documents/certificate-pdf';
import { log } from '~/server/log';
import { handlers } from './handlers';
import { NeverPossible } from './job';
import { leaseOutbox, markDone, markFailed } from './lease-outbox';
import type { LeasedRow } from './lease-outbox';
import { periodicJobs } from './periodic-jobs';

const idleMs = 250;
const periodMs = 5000;

/**
 * Works the outbox and the periodic jobs until asked to stop; what is under way is finished first.
 */
export async function runWorker(signal: AbortSignal): Promise<void> {
  const database = db();
  let nextRound = 0;
  while (!signal.aborted) {
    let done = 0;
    try {
      if (Date.now() >= nextRound) {
        await runPeriodicJobs(database);
        nextRound = Date.now() + periodMs;
      }
      done = await drainOutbox(database, signal);
    } catch (error) {
      log.error({ err: error }, 'the worker could not reach the database');
    }
    if (done === 0) await pause(idleMs, undefined, { signal }).catch(() => undefined);
  }
  await stopCertificateThread();
  await database.close();
}

/** Does what lies in the outbox now, a few rows at a time; gives how many rows were tried. */
export async function drainOutbox(database: Db, signal?: AbortSignal): Promise<number> {
  if (signal?.aborted === true) return 0;
  const rows = await leaseOutbox(database, new Date(), 8);
  await Promise.all(rows.map((row) => doRow(database, row)));
  return rows.length;
}

async function doRow(database: Db, row: LeasedRow): Promise<void> {
  const handler = handlers[row.kind];
  try {
    if (handler === undefined) throw new NeverPossible(`Nothing here does “${row.kind}”.`);
    await handler({ db: database, now: new Date(), key: row.key, payload: row.payload });
    await markDone(database, row.id, new Date());
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    log.warn({ err: error, kind: row.kind, key: row.key, attempts: row.attempts }, 'an outbox row failed');
    await markFailed(database, row, reason, new Date(), error instanceof NeverPossible);
  }
}

async function runPeriodicJobs(database: Db): Promise<void> {
  for (const [name, job] of Object.entries(periodicJobs)) {
    try {
      await job(database, new Date());
    } catch (error) {
      log.error({ err: error, job: name }, 'a periodic job failed');
    }
  }
}
