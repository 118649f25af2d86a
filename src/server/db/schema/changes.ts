import {
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  primaryKey,
  text,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core';
import { code, id, moment, ref } from './columns';
import { users } from './people';

/** The ledger of changes: who did what, when, from what to what. Append only (a trigger refuses the rest). */
export const ledgerEntries = mysqlTable(
  'ledger_entries',
  {
    id: id(),
    at: moment().notNull(),
    actorKind: mysqlEnum(['user', 'visitor', 'provider', 'system']).notNull(),
    actorUserId: ref().references(() => users.id),
    action: code(60).notNull(),
    details: json().$type<Record<string, unknown>>().notNull(),
    requestId: code(64),
  },
  (table) => [index('ledger_entries_at_idx').on(table.at)],
);

/** The things that an entry of the ledger of changes is about. */
export const ledgerSubjects = mysqlTable(
  'ledger_subjects',
  {
    ledgerEntryId: ref()
      .notNull()
      .references(() => ledgerEntries.id),
    subjectType: code(30).notNull(),
    subjectId: ref().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.ledgerEntryId, table.subjectType, table.subjectId] }),
    index('ledger_subjects_subject_idx').on(table.subjectType, table.subjectId, table.ledgerEntryId),
  ],
);

/** What a change asks of mail, the payment provider or the PDF maker: written with it, done after it. */
export const outbox = mysqlTable(
  'outbox',
  {
    id: id(),
    /** By which a second doing is told from a new one (Message-ID, idempotency key). */
    key: code(120).notNull().unique(),
    kind: code(40).notNull(),
    payload: json().$type<Record<string, unknown>>().notNull(),
    createdAt: moment().notNull(),
    availableAt: moment().notNull(),
    attempts: int().notNull().default(0),
    leasedUntil: moment(),
    doneAt: moment(),
    gaveUpAt: moment(),
    lastError: text(),
  },
  (table) => [index('outbox_open_idx').on(table.doneAt, table.gaveUpAt, table.availableAt)],
);

/** Answers given under an Idempotency-Key, so that a repeated request changes nothing twice. */
export const idempotencyKeys = mysqlTable(
  'idempotency_keys',
  {
    id: id(),
    actor: code(40).notNull(),
    route: code(200).notNull(),
    key: code(200).notNull(),
    /** A request may write several times; its first transaction is step 1. */
    step: int().notNull(),
    requestHash: code(64).notNull(),
    result: json().$type<unknown>(),
    createdAt: moment().notNull(),
  },
  (table) => [
    unique('idempotency_keys_actor_route_key_step_unique').on(
      table.actor,
      table.route,
      table.key,
      table.step,
    ),
    index('idempotency_keys_created_at_idx').on(table.createdAt),
  ],
);

/** A refused plain HTML form on its way back to its page: what was typed and what is wrong with it. */
export const formReturns = mysqlTable(
  'form_returns',
  {
    id: id(),
    tokenHash: code(64).notNull().unique(),
    path: varchar({ length: 500 }).notNull(),
    values: json().$type<Record<string, string | string[]>>().notNull(),
    message: varchar({ length: 1000 }).notNull(),
    fields: json().$type<Record<string, string>>().notNull(),
    createdAt: moment().notNull(),
  },
  (table) => [index('form_returns_created_at_idx').on(table.createdAt)],
);
