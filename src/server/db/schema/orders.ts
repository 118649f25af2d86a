import { sql } from 'drizzle-orm';
import {
  check,
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  text,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core';
import { orderStates } from '~/domain/orders/status';
import { models, spares } from './catalog';
import { code, country, currency, id, moment, ref, whole } from './columns';
import { users } from './people';
import { batches } from './production';

/** A buyer's name and address as one order has them: erasable, referred to, never copied. */
export const contacts = mysqlTable(
  'contacts',
  {
    id: id(),
    userId: ref().references(() => users.id),
    email: varchar({ length: 254 }).notNull(),
    name: varchar({ length: 300 }).notNull(),
    callSign: varchar({ length: 20 }),
    phone: varchar({ length: 40 }),
    addressLines: json().$type<string[]>().notNull(),
    city: varchar({ length: 120 }).notNull(),
    region: varchar({ length: 120 }).notNull().default(''),
    postcode: varchar({ length: 20 }).notNull().default(''),
    country: country().notNull(),
    erasedAt: moment(),
    version: int().notNull().default(1),
  },
  (table) => [index('contacts_email_idx').on(table.email)],
);

export const orders = mysqlTable(
  'orders',
  {
    id: id(),
    number: int().notNull().unique(),
    /** SHA-256 (hex) of the token in the buyer's own link to the order. */
    linkHash: code(64).notNull().unique(),
    buyerUserId: ref().references(() => users.id),
    contactId: ref()
      .notNull()
      .references(() => contacts.id),
    state: mysqlEnum(orderStates).notNull(),
    currency: currency().notNull(),
    /** The sum of the lines. */
    totalMinor: whole().notNull(),
    /** What is asked for now: the total, or a deposit. */
    dueNowMinor: whole().notNull(),
    /** Where it goes, as sold: limits, tax and customs follow it. */
    destinationCountry: country().notNull(),
    /** Tax as it was when sold: rate, kind, country. */
    tax: json().$type<unknown>().notNull(),
    /** The date it was sold with. */
    promisedOn: code(10),
    placedAt: moment().notNull(),
    paidAt: moment(),
    cancelledAt: moment(),
    version: int().notNull().default(1),
  },
  (table) => [
    index('orders_buyer_user_id_idx').on(table.buyerUserId),
    index('orders_state_idx').on(table.state, table.placedAt),
  ],
);

export const orderLines = mysqlTable(
  'order_lines',
  {
    id: id(),
    orderId: ref()
      .notNull()
      .references(() => orders.id),
    lineNo: int().notNull(),
    kind: mysqlEnum(['rig', 'spare', 'carriage']).notNull(),
    modelId: ref().references(() => models.id),
    spareId: ref().references(() => spares.id),
    batchId: ref().references(() => batches.id),
    description: varchar({ length: 300 }).notNull(),
    /** Option keys and labels as they were. */
    options: json().$type<{ key: string; label: string; priceMinor: number }[]>().notNull(),
    quantity: int().notNull(),
    unitPriceMinor: whole().notNull(),
    taxMinor: whole().notNull(),
    totalMinor: whole().notNull(),
  },
  (table) => [
    unique('order_lines_order_id_line_no_unique').on(table.orderId, table.lineNo),
    index('order_lines_batch_id_idx').on(table.batchId),
    check('order_lines_quantity_check', sql`${table.quantity} > 0`),
    check(
      'order_lines_kind_check',
      sql`(${table.kind} = 'rig') = (${table.modelId} is not null) and (${table.kind} = 'rig') = (${table.batchId} is not null) and (${table.kind} = 'spare') = (${table.spareId} is not null)`,
    ),
  ],
);

/** Places kept for an order line: held while its buyer pays, then taken or let go. */
export const placeHolds = mysqlTable(
  'place_holds',
  {
    id: id(),
    batchId: ref()
      .notNull()
      .references(() => batches.id),
    orderLineId: ref()
      .notNull()
      .unique()
      .references(() => orderLines.id),
    quantity: int().notNull(),
    state: mysqlEnum(['held', 'taken', 'released']).notNull(),
    heldUntil: moment().notNull(),
  },
  (table) => [index('place_holds_state_held_until_idx').on(table.state, table.heldUntil)],
);

/** One way to the provider's payment page; its id is the idempotency key of the call. */
export const checkouts = mysqlTable(
  'checkouts',
  {
    id: id(),
    orderId: ref()
      .notNull()
      .references(() => orders.id),
    amountMinor: whole().notNull(),
    purpose: mysqlEnum(['order', 'balance']).notNull(),
    state: mysqlEnum(['wanted', 'open', 'paid', 'expired']).notNull(),
    providerSessionId: code(255).unique(),
    url: text(),
    createdAt: moment().notNull(),
    expiresAt: moment().notNull(),
  },
  (table) => [
    index('checkouts_order_id_idx').on(table.orderId),
    index('checkouts_state_idx').on(table.state, table.expiresAt),
  ],
);

export const payments = mysqlTable(
  'payments',
  {
    id: id(),
    orderId: ref()
      .notNull()
      .references(() => orders.id),
    kind: mysqlEnum(['card', 'transfer', 'cash']).notNull(),
    checkoutId: ref().references(() => checkouts.id),
    /** The provider's payment intent, once only. */
    providerReference: code(255).unique(),
    amountMinor: whole().notNull(),
    currency: currency().notNull(),
    paidAt: moment().notNull(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [
    index('payments_order_id_idx').on(table.orderId),
    check('payments_amount_check', sql`${table.amountMinor} > 0`),
  ],
);

export const refunds = mysqlTable(
  'refunds',
  {
    id: id(),
    paymentId: ref()
      .notNull()
      .references(() => payments.id),
    providerReference: code(255).unique(),
    amountMinor: whole().notNull(),
    currency: currency().notNull(),
    reason: varchar({ length: 300 }).notNull(),
    state: mysqlEnum(['wanted', 'done', 'refused']).notNull(),
    createdAt: moment().notNull(),
    doneAt: moment(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [check('refunds_amount_check', sql`${table.amountMinor} > 0`)],
);

/** Every event of the payment provider, kept as it came; each takes effect once. */
export const providerEvents = mysqlTable(
  'provider_events',
  {
    id: id(),
    eventId: code(255).notNull().unique(),
    type: code(100).notNull(),
    objectId: code(255).notNull(),
    body: text().notNull(),
    /** *kept*: not applied yet, or of a type that we do not know. */
    state: mysqlEnum(['kept', 'applied', 'unknown']).notNull(),
    receivedAt: moment().notNull(),
    appliedAt: moment(),
    note: varchar({ length: 300 }).notNull().default(''),
  },
  (table) => [
    index('provider_events_state_idx').on(table.state, table.receivedAt),
    index('provider_events_object_id_idx').on(table.objectId),
  ],
);
