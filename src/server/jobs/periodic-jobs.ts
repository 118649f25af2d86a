import { and, isNotNull, lt } from 'drizzle-orm';
import type { Db } from '~/server/db/client';
import { formReturns, idempotencyKeys, outbox, sessions } from '~/server/db/schema';
import { applyKeptEvents } from '~/server/payments/apply-kept-events';
import { reconcileCheckouts } from '~/server/payments/reconcile-checkouts';
import { releaseExpiredHolds } from '~/server/services/orders/release-expired-holds';

const dayMs = 24 * 3600_000;
const system = { kind: 'system' } as const;

/** What is looked after every few seconds, in this order: payments are asked after before holds are let go. */
export const periodicJobs: Readonly<Record<string, (db: Db, now: Date) => Promise<unknown>>> = {
  applyKeptEvents: (db, now) => applyKeptEvents({ db, now, actor: { kind: 'provider' } }),
  reconcileCheckouts: (db, now) => reconcileCheckouts({ db, now, actor: system }),
  releaseExpiredHolds: (db, now) => releaseExpiredHolds({ db, now, actor: system }),
  forgetWhatIsOver,
};

/** Sessions that ran out, forms that nobody came back to, keys older than two days, outbox rows done a year ago. */
async function forgetWhatIsOver(db: Db, now: Date): Promise<void> {
  const before = (days: number) => new Date(now.getTime() - days * dayMs);
  await db.delete(sessions).where(lt(sessions.expiresAt, now));
  await db.delete(formReturns).where(lt(formReturns.createdAt, before(1)));
  await db.delete(idempotencyKeys).where(lt(idempotencyKeys.createdAt, before(2)));
  await db.delete(outbox).where(and(isNotNull(outbox.doneAt), lt(outbox.doneAt, before(365))));
}
