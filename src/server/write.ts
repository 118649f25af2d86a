import { and, eq, sql } from 'drizzle-orm';
import type { Db, Tx } from '~/server/db/client';
import { idempotencyKeys, ledgerEntries, ledgerSubjects, outbox } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/** On whose behalf something is done. */
export type Actor =
  | { kind: 'user'; userId: number; /** Of the token by which a script asked. */ accessTokenId?: number }
  | { kind: 'visitor' }
  | { kind: 'provider' }
  | { kind: 'system' };

export type SubjectType =
  | 'user'
  | 'works'
  | 'key'
  | 'model'
  | 'bom_revision'
  | 'build_sheet_revision'
  | 'test_plan_revision'
  | 'part'
  | 'lot'
  | 'batch'
  | 'order'
  | 'unit'
  | 'run'
  | 'certificate'
  | 'shipment'
  | 'instrument'
  | 'path'
  | 'quantity_revision'
  | 'limit_rule_revision'
  | 'path_part'
  | 'check_reference'
  | 'event';

export interface Subject {
  type: SubjectType;
  id: number;
}

/** One entry of the ledger of changes. `details` refers to people by id and holds no personal data. */
export interface LedgerEntry {
  /** Area and trade verb: `order.place`, `kit.pick`, `run.close`. */
  action: string;
  subjects: Subject[];
  /** From what to what. */
  details?: Record<string, unknown>;
}

/** What a change asks of the outside, done by a job after the commit. */
export interface OutboxRow {
  kind: string;
  /** By which a second doing is told from a new one. */
  key: string;
  payload: Record<string, unknown>;
  availableAt?: Date;
}

interface Asked {
  actor: Actor;
  now: Date;
  requestId?: string;
  /**
   * Present where the request bore an Idempotency-Key: each of its writes takes effect once, and a repeated
   * request gets what was returned then. `steps` counts the request's writes so far.
   */
  idempotency?: { actor: string; route: string; key: string; requestHash: string; steps: number };
}

/** What a service is called with from outside a transaction. */
export interface CallContext extends Asked {
  db: Db;
}

/** What runs inside {@link write}; a service called with it joins the caller's transaction. */
export interface WriteContext extends Asked {
  tx: Tx;
  /** Writes this service call's one entry in the ledger of changes. */
  record: (entry: LedgerEntry) => Promise<void>;
  /** Writes an outbox row; a key that is there already is left as it is. */
  post: (row: OutboxRow) => Promise<void>;
}

export type Ctx = CallContext | WriteContext;

const attempts = 5;

/**
 * Opens the only writing transaction there is, or joins the caller's. Repeats on deadlock (1213) and
 * lock wait (1205), and refuses to commit unless exactly one ledger entry was made by this call. What
 * `work` returns must be plain JSON.
 *
 * @throws whatever `work` throws, after rolling back.
 */
export async function write<T>(ctx: Ctx, work: (tx: WriteContext) => Promise<T>): Promise<T> {
  if ('tx' in ctx) return inTransaction(ctx.tx, ctx, work);
  const step = ctx.idempotency === undefined ? 0 : (ctx.idempotency.steps += 1);
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await ctx.db.transaction((tx) => outermost(tx, ctx, step, work), {
        isolationLevel: 'read committed',
      });
    } catch (error) {
      if (attempt >= attempts || !mayPass(error)) throw error;
    }
  }
}

async function outermost<T>(
  tx: Tx,
  ctx: CallContext,
  step: number,
  work: (tx: WriteContext) => Promise<T>,
): Promise<T> {
  if (ctx.idempotency === undefined) return inTransaction(tx, ctx, work);
  const { actor, route, key, requestHash } = ctx.idempotency;
  const sameStep = and(
    eq(idempotencyKeys.actor, actor),
    eq(idempotencyKeys.route, route),
    eq(idempotencyKeys.key, key),
    eq(idempotencyKeys.step, step),
  );
  // The row is the lock: a second request with the same key waits here for the first to end.
  const [claim] = await tx
    .insert(idempotencyKeys)
    .ignore()
    .values({ actor, route, key, step, requestHash, createdAt: ctx.now });
  if (claim.affectedRows === 0) {
    const [earlier] = await tx.select().from(idempotencyKeys).where(sameStep);
    if (earlier?.requestHash !== requestHash) {
      throw new DomainError('conflict', 'This Idempotency-Key was used for a different request.');
    }
    // Services return plain JSON, so what was kept is what was returned.
    return earlier.result as T;
  }
  const result = await inTransaction(tx, ctx, work);
  await tx
    .update(idempotencyKeys)
    .set({ result: result ?? null })
    .where(sameStep);
  return result;
}

async function inTransaction<T>(tx: Tx, asked: Asked, work: (tx: WriteContext) => Promise<T>): Promise<T> {
  let entries = 0;
  const { actor, now, requestId } = asked;
  const result = await work({
    tx,
    actor,
    now,
    ...(requestId === undefined ? {} : { requestId }),
    record: async (entry) => {
      entries += 1;
      await insertEntry(tx, asked, entry);
    },
    post: async (row) => {
      await tx
        .insert(outbox)
        .ignore()
        .values({
          key: row.key,
          kind: row.kind,
          payload: row.payload,
          createdAt: now,
          availableAt: row.availableAt ?? now,
        });
    },
  });
  if (entries !== 1) throw new Error(`A service call made ${entries} ledger entries; it makes exactly one.`);
  return result;
}

async function insertEntry(tx: Tx, asked: Asked, entry: LedgerEntry): Promise<void> {
  const tokenId = asked.actor.kind === 'user' ? asked.actor.accessTokenId : undefined;
  const [{ insertId }] = await tx.insert(ledgerEntries).values({
    at: asked.now,
    actorKind: asked.actor.kind,
    actorUserId: asked.actor.kind === 'user' ? asked.actor.userId : null,
    action: entry.action,
    details: { ...entry.details, ...(tokenId === undefined ? {} : { accessTokenId: tokenId }) },
    requestId: asked.requestId ?? null,
  });
  const subjects = new Map(entry.subjects.map((subject) => [`${subject.type}:${subject.id}`, subject]));
  if (subjects.size === 0) return;
  await tx.insert(ledgerSubjects).values(
    [...subjects.values()].map((subject) => ({
      ledgerEntryId: insertId,
      subjectType: subject.type,
      subjectId: subject.id,
    })),
  );
}

/** MariaDB's number of an error, wherever Drizzle has put it. */
export function databaseErrno(error: unknown): number | undefined {
  for (let cause = error; cause instanceof Error; cause = cause.cause) {
    if ('errno' in cause && typeof cause.errno === 'number') return cause.errno;
  }
  return undefined;
}

function mayPass(error: unknown): boolean {
  const errno = databaseErrno(error);
  return errno === 1213 || errno === 1205;
}

/** The user on whose behalf it is done, or null; for `by_user_id` columns. */
export function actingUserId(ctx: { actor: Actor }): number | null {
  return ctx.actor.kind === 'user' ? ctx.actor.userId : null;
}

/** As {@link actingUserId}, where only a person may do it. */
export function actingPerson(ctx: { actor: Actor }): number {
  if (ctx.actor.kind !== 'user') throw new DomainError('unsigned', 'Sign in first.');
  return ctx.actor.userId;
}

/**
 * Draws the next whole number of a series under its row lock; the first is 1.
 *
 * @param series for example `order`, `certificate`, `serial:H3`
 */
export async function nextNumber(tx: Tx, series: string): Promise<number> {
  await tx.execute(
    sql`insert into number_series (series, next_value) values (${series}, last_insert_id(1) + 1) on duplicate key update next_value = last_insert_id(next_value) + 1`,
  );
  const [rows] = await tx.execute(sql`select last_insert_id() as value`);
  return lastInsertId(rows);
}

function lastInsertId(rows: unknown): number {
  const first: unknown = Array.isArray(rows) ? rows[0] : undefined;
  if (typeof first === 'object' && first !== null && 'value' in first) return Number(first.value);
  throw new Error('MariaDB gave no number for a series.');
}
