import { sql } from 'drizzle-orm';
import type { AnyMySqlColumn } from 'drizzle-orm/mysql-core';
import { boolean, check, index, int, mysqlEnum, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import { lotStates } from '~/domain/stores/lots';
import { bomRevisions, models } from './catalog';
import { code, country, currency, id, moment, ref, whole } from './columns';
import { users } from './people';

export const suppliers = mysqlTable('suppliers', {
  id: id(),
  name: varchar({ length: 120 }).notNull().unique(),
  email: varchar({ length: 254 }),
  leadTimeDays: int(),
});

export const bins = mysqlTable('bins', {
  id: id(),
  code: code(20).notNull().unique(),
});

/** An item by its own part number. Quantities of it are whole smallest units. */
export const parts = mysqlTable('parts', {
  id: id(),
  number: code(40).notNull().unique(),
  description: varchar({ length: 200 }).notNull(),
  value: varchar({ length: 60 }).notNull().default(''),
  footprint: varchar({ length: 80 }).notNull().default(''),
  unit: mysqlEnum(['piece', 'mm', 'mg']).notNull(),
  /** *each*: its lot is scanned into every unit; *batch*: taken from the open lot of the batch. */
  trace: mysqlEnum(['each', 'batch']).notNull(),
  /** A board or sub-assembly with its own BOM and lots. */
  isMade: boolean().notNull().default(false),
  hsCode: code(12),
  originCountry: country(),
  createdAt: moment().notNull(),
  version: int().notNull().default(1),
});

/** A part approved in place of another, for one model or everywhere. */
export const partAlternates = mysqlTable(
  'part_alternates',
  {
    id: id(),
    partId: ref()
      .notNull()
      .references(() => parts.id),
    alternatePartId: ref()
      .notNull()
      .references(() => parts.id),
    modelId: ref().references((): AnyMySqlColumn => models.id),
    rank: int().notNull(),
  },
  (table) => [
    unique('part_alternates_part_alternate_model_unique').on(
      table.partId,
      table.alternatePartId,
      table.modelId,
    ),
  ],
);

/** One receipt of a part. `onHand` is kept by the same transaction as each store entry. */
export const lots = mysqlTable(
  'lots',
  {
    id: id(),
    number: code(20).notNull().unique(),
    partId: ref()
      .notNull()
      .references(() => parts.id),
    supplierId: ref().references(() => suppliers.id),
    /** A lot of a made part names the BOM it was made to. */
    bomRevisionId: ref().references((): AnyMySqlColumn => bomRevisions.id),
    binId: ref().references(() => bins.id),
    dateCode: varchar({ length: 30 }).notNull().default(''),
    state: mysqlEnum(lotStates).notNull(),
    barredReason: varchar({ length: 300 }),
    quantityReceived: whole().notNull(),
    onHand: whole().notNull(),
    costMinor: whole(),
    currency: currency(),
    receivedAt: moment().notNull(),
    version: int().notNull().default(1),
  },
  (table) => [
    index('lots_part_id_state_idx').on(table.partId, table.state, table.receivedAt),
    check('lots_on_hand_check', sql`${table.onHand} >= 0`),
  ],
);

/** One line of the store's ledger: never changed or deleted, only reversed by another. */
export const storeEntries = mysqlTable(
  'store_entries',
  {
    id: id(),
    lotId: ref()
      .notNull()
      .references(() => lots.id),
    kind: mysqlEnum(['receipt', 'pick', 'return', 'count', 'scrap', 'consign', 'reversal']).notNull(),
    /** Into the lot positive, out of it negative. */
    quantity: whole().notNull(),
    reason: varchar({ length: 300 }).notNull().default(''),
    reversesId: ref()
      .unique()
      .references((): AnyMySqlColumn => storeEntries.id),
    at: moment().notNull(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [
    index('store_entries_lot_id_idx').on(table.lotId, table.id),
    check('store_entries_quantity_check', sql`${table.quantity} <> 0`),
  ],
);
