import { index, int, mysqlEnum, mysqlTable, primaryKey, varchar } from 'drizzle-orm/mysql-core';
import { certificates } from './certificates';
import { code, id, moment, ref } from './columns';
import { orders } from './orders';
import { users } from './people';
import { units } from './production';

/** What left, in which parcel. */
export const shipments = mysqlTable(
  'shipments',
  {
    id: id(),
    number: int().notNull().unique(),
    orderId: ref()
      .notNull()
      .references(() => orders.id),
    state: mysqlEnum(['packed', 'shipped']).notNull(),
    carrier: varchar({ length: 80 }).notNull().default(''),
    trackingNumber: code(40),
    weightG: int(),
    packedAt: moment().notNull(),
    packedBy: ref().references(() => users.id),
    shippedAt: moment(),
    shippedBy: ref().references(() => users.id),
    version: int().notNull().default(1),
  },
  (table) => [
    index('shipments_order_id_idx').on(table.orderId),
    index('shipments_state_idx').on(table.state, table.packedAt),
    index('shipments_tracking_number_idx').on(table.trackingNumber),
  ],
);

export const shipmentUnits = mysqlTable(
  'shipment_units',
  {
    shipmentId: ref()
      .notNull()
      .references(() => shipments.id),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    certificateId: ref()
      .notNull()
      .references(() => certificates.id),
  },
  (table) => [
    primaryKey({ columns: [table.shipmentId, table.unitId] }),
    index('shipment_units_unit_id_idx').on(table.unitId),
  ],
);
