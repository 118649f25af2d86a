import { sql } from 'drizzle-orm';
import type { AnyMySqlColumn } from 'drizzle-orm/mysql-core';
import {
  check,
  double,
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core';
import { unitStages } from '~/domain/production/stages';
import { testRuns } from './bench';
import {
  bomLines,
  bomRevisions,
  buildSheetRevisions,
  buildSteps,
  models,
  testPlanRevisions,
} from './catalog';
import { code, currency, id, moment, ref, whole } from './columns';
import { files } from './files';
import { orderLines } from './orders';
import { users } from './people';
import { lots, storeEntries } from './stores';

/** A number of places for one model, built together to frozen revisions. */
export const batches = mysqlTable(
  'batches',
  {
    id: id(),
    number: int().notNull().unique(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    bomRevisionId: ref()
      .notNull()
      .references(() => bomRevisions.id),
    buildSheetRevisionId: ref()
      .notNull()
      .references(() => buildSheetRevisions.id),
    testPlanRevisionId: ref()
      .notNull()
      .references(() => testPlanRevisions.id),
    state: mysqlEnum(['planned', 'open', 'building', 'closed']).notNull(),
    places: int().notNull(),
    placesTaken: int().notNull().default(0),
    placesHeld: int().notNull().default(0),
    priceMinor: whole().notNull(),
    /** Null where the whole price is due at once. */
    depositMinor: whole(),
    currency: currency().notNull(),
    /** The owner's date, shown as an estimate. */
    estimatedOn: code(10),
    createdAt: moment().notNull(),
    closedAt: moment(),
    version: int().notNull().default(1),
  },
  (table) => [
    index('batches_model_id_state_idx').on(table.modelId, table.state),
    check(
      'batches_places_check',
      sql`${table.placesTaken} >= 0 and ${table.placesHeld} >= 0 and ${table.placesTaken} + ${table.placesHeld} <= ${table.places}`,
    ),
  ],
);

/** One serial number. Its batch and its order may be none: built ahead, or typed at the bench. */
export const units = mysqlTable(
  'units',
  {
    id: id(),
    serial: code(30).notNull().unique(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    batchId: ref().references(() => batches.id),
    orderLineId: ref().references((): AnyMySqlColumn => orderLines.id),
    /** Which of the line's units it is; one line never has two of the same. */
    lineIndex: int(),
    options: json().$type<string[]>().notNull(),
    stage: mysqlEnum(unitStages).notNull(),
    bomRevisionId: ref().references(() => bomRevisions.id),
    buildSheetRevisionId: ref().references(() => buildSheetRevisions.id),
    testPlanRevisionId: ref()
      .notNull()
      .references(() => testPlanRevisions.id),
    firmwareVersion: varchar({ length: 40 }),
    alignment: json().$type<Record<string, string>>().notNull(),
    /** Of the unit's own page. */
    pageCode: code(16).notNull().unique(),
    createdAt: moment().notNull(),
    version: int().notNull().default(1),
  },
  (table) => [
    unique('units_order_line_id_line_index_unique').on(table.orderLineId, table.lineIndex),
    index('units_batch_id_stage_idx').on(table.batchId, table.stage),
    index('units_stage_idx').on(table.stage),
    check('units_line_index_check', sql`(${table.orderLineId} is null) = (${table.lineIndex} is null)`),
  ],
);

/** Which order a unit was meant for, and when. */
export const unitAllocations = mysqlTable(
  'unit_allocations',
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    orderLineId: ref()
      .notNull()
      .references((): AnyMySqlColumn => orderLines.id),
    reason: varchar({ length: 300 }).notNull(),
    fromAt: moment().notNull(),
    untilAt: moment(),
  },
  (table) => [
    index('unit_allocations_unit_id_idx').on(table.unitId),
    index('unit_allocations_order_line_id_idx').on(table.orderLineId),
  ],
);

/** So many of a part from a lot, for a BOM line, to a unit or to a whole batch. */
export const picks = mysqlTable(
  'picks',
  {
    id: id(),
    storeEntryId: ref()
      .notNull()
      .unique()
      .references(() => storeEntries.id),
    lotId: ref()
      .notNull()
      .references(() => lots.id),
    unitId: ref().references(() => units.id),
    batchId: ref().references(() => batches.id),
    bomLineId: ref().references(() => bomLines.id),
    quantity: whole().notNull(),
    designators: json().$type<string[]>().notNull(),
    /** Why an approved alternate was taken. */
    alternateReason: varchar({ length: 300 }),
    /** The store entry that put it back; what has none remains in the unit. */
    undoneByEntryId: ref().references(() => storeEntries.id),
    at: moment().notNull(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [
    index('picks_unit_id_idx').on(table.unitId),
    index('picks_batch_id_idx').on(table.batchId),
    index('picks_lot_id_idx').on(table.lotId),
    check('picks_owner_check', sql`(${table.unitId} is null) <> (${table.batchId} is null)`),
    check('picks_quantity_check', sql`${table.quantity} > 0`),
  ],
);

/** A build step as it was done on a unit. A step done again after rework has the next round. */
export const stepRecords = mysqlTable(
  'step_records',
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    buildStepId: ref()
      .notNull()
      .references(() => buildSteps.id),
    round: int().notNull().default(1),
    entry: varchar({ length: 200 }),
    entryValue: double(),
    minutes: int(),
    fileId: ref().references(() => files.id),
    doneAt: moment().notNull(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [
    unique('step_records_unit_id_build_step_id_round_unique').on(
      table.unitId,
      table.buildStepId,
      table.round,
    ),
  ],
);

/** Work on a unit that had gone further. */
export const reworks = mysqlTable(
  'reworks',
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    testRunId: ref().references((): AnyMySqlColumn => testRuns.id),
    /** Why the unit went into rework: what was seen. */
    cause: varchar({ length: 300 }).notNull(),
    /** What was found to be behind it, as the works' causes are counted. */
    foundCause: varchar({ length: 120 }),
    remedy: varchar({ length: 300 }),
    minutes: int(),
    /** The passed run that showed that the remedy held. */
    confirmedByRunId: ref().references((): AnyMySqlColumn => testRuns.id),
    openedAt: moment().notNull(),
    openedBy: ref().references(() => users.id),
    closedAt: moment(),
    closedBy: ref().references(() => users.id),
  },
  (table) => [index('reworks_unit_id_idx').on(table.unitId)],
);

/** A stop, with a reason, an owner and an end. */
export const holds = mysqlTable(
  'holds',
  {
    id: id(),
    subjectType: mysqlEnum(['unit', 'lot', 'batch', 'order']).notNull(),
    subjectId: ref().notNull(),
    reason: varchar({ length: 300 }).notNull(),
    ownerUserId: ref()
      .notNull()
      .references(() => users.id),
    placedAt: moment().notNull(),
    endedAt: moment(),
    endedBy: ref().references(() => users.id),
    endReason: varchar({ length: 300 }),
  },
  (table) => [index('holds_subject_idx').on(table.subjectType, table.subjectId, table.endedAt)],
);
