import type { Db } from '~/server/db/client';
import type { Actor, CallContext } from '~/server/write';

/** 09:00 UTC on a working day, with milliseconds. */
export const someDay = new Date('2026-03-02T09:00:00.123Z');

/** A call from outside a transaction, on behalf of the system unless someone is named. */
export function callContext(db: Db, more: Partial<CallContext> = {}): CallContext {
  return { db, actor: { kind: 'system' }, now: someDay, ...more };
}

/** A call under an Idempotency-Key, as a door makes it for one request. */
export function underKey(db: Db, key: string, requestHash = 'a'.repeat(64), actor?: Actor): CallContext {
  return callContext(db, {
    ...(actor === undefined ? {} : { actor }),
    idempotency: { actor: 'visitor', route: 'POST /api/tests', key, requestHash, steps: 0 },
  });
}
