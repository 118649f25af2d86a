import { and, asc, eq, inArray, isNull, lt, lte, or, sql } from 'drizzle-orm';
import type { Db } from '~/server/db/client';
import { outbox } from '~/server/db/schema';

export interface LeasedRow {
  id: number;
  key: string;
  kind: string;
  payload: Record<string, unknown>;
  attempts: number;
  createdAt: Date;
}

const leaseMs = 2 * 60_000;
/** A mail server may be down for a weekend. */
const giveUpAfterMs = 3 * 24 * 3600_000;

/**
 * Leases open rows to this worker; other workers skip them. A worker that dies lets its lease run out, and
 * the row is done again under the same key.
 */
export async function leaseOutbox(database: Db, now: Date, most: number): Promise<LeasedRow[]> {
  return database.transaction(async (tx) => {
    const rows = await tx
      .select({
        id: outbox.id,
        key: outbox.key,
        kind: outbox.kind,
        payload: outbox.payload,
        attempts: outbox.attempts,
        createdAt: outbox.createdAt,
      })
      .from(outbox)
      .where(
        and(
          isNull(outbox.doneAt),
          isNull(outbox.gaveUpAt),
          lte(outbox.availableAt, now),
          or(isNull(outbox.leasedUntil), lt(outbox.leasedUntil, now)),
        ),
      )
      .orderBy(asc(outbox.availableAt), asc(outbox.id))
      .limit(most)
      .for('update', { skipLocked: true });
    if (rows.length > 0) {
      await tx
        .update(outbox)
        .set({ leasedUntil: new Date(now.getTime() + leaseMs), attempts: sql`${outbox.attempts} + 1` })
        .where(
          inArray(
            outbox.id,
            rows.map(({ id }) => id),
          ),
        );
    }
    return rows;
  });
}

export async function markDone(database: Db, id: number, now: Date): Promise<void> {
  await database
    .update(outbox)
    .set({ doneAt: now, leasedUntil: null, lastError: null })
    .where(eq(outbox.id, id));
}

/**
 * Puts a row back for later, each time later, or gives it up when trying again can never help or three days
 * are over.
 */
export async function markFailed(
  database: Db,
  row: LeasedRow,
  reason: string,
  now: Date,
  forGood: boolean,
): Promise<void> {
  const isOld = now.getTime() - row.createdAt.getTime() > giveUpAfterMs;
  const waitMs = Math.min(15 * 60_000, 1000 * 2 ** row.attempts);
  await database
    .update(outbox)
    .set({
      lastError: reason.slice(0, 2000),
      leasedUntil: null,
      availableAt: new Date(now.getTime() + waitMs),
      gaveUpAt: forGood || isOld ? now : null,
    })
    .where(eq(outbox.id, row.id));
}
