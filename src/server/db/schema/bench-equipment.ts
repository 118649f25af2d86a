import { boolean, double, index, int, json, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import { instrumentRevisions, instruments, pathRevisions, paths, testRuns } from './bench';
import { models, testPoints } from './catalog';
import { code, id, moment, ref } from './columns';
import { files } from './files';
import { users } from './people';
import { units } from './production';

/** A part that paths are built from: a pad, a cable, a load with a tap. */
export const pathParts = mysqlTable('path_parts', {
  id: id(),
  number: code(20).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
});

/** What a part loses, as known at one time: `PathPart` of `domain/bench/types`. */
export const pathPartRevisions = mysqlTable(
  'path_part_revisions',
  {
    id: id(),
    pathPartId: ref()
      .notNull()
      .references(() => pathParts.id),
    revision: int().notNull(),
    spec: json().$type<unknown>().notNull(),
    /** The file that the loss table was read from. */
    fileId: ref().references(() => files.id),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [
    unique('path_part_revisions_path_part_id_revision_unique').on(table.pathPartId, table.revision),
  ],
);

/** What the works measures at the start of a session: a kept unit or source, and the band it has to read in. */
export const checkReferences = mysqlTable('check_references', {
  id: id(),
  number: code(20).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  quantityKey: code(40).notNull(),
  freqHz: double(),
  /** At the unit, in the quantity's unit inside. */
  nominal: double().notNull(),
  /** Half-width of the band: dB for powers and ratios, else in the quantity's unit inside. */
  tolerance: double().notNull(),
  instrumentId: ref()
    .notNull()
    .references(() => instruments.id),
  pathId: ref().references(() => paths.id),
  createdAt: moment().notNull(),
  retiredAt: moment(),
});

/** One measurement of a reference. */
export const dailyChecks = mysqlTable(
  'daily_checks',
  {
    id: id(),
    checkReferenceId: ref()
      .notNull()
      .references(() => checkReferences.id),
    instrumentRevisionId: ref()
      .notNull()
      .references(() => instrumentRevisions.id),
    pathRevisionId: ref().references(() => pathRevisions.id),
    enteredText: varchar({ length: 60 }).notNull(),
    enteredUnit: varchar({ length: 12 }).notNull(),
    /** At the unit, in the quantity's unit inside. */
    value: double().notNull(),
    /** From the nominal value, in the unit of the tolerance. */
    deviation: double().notNull(),
    isGood: boolean().notNull(),
    at: moment().notNull(),
    byUserId: ref().references(() => users.id),
    explanation: varchar({ length: 500 }),
    explainedAt: moment(),
    explainedBy: ref().references(() => users.id),
  },
  (table) => [index('daily_checks_check_reference_id_idx').on(table.checkReferenceId, table.at)],
);

/** A closed run on which a bad daily check casts doubt, until the owner ends it with a note. */
export const runFlags = mysqlTable(
  'run_flags',
  {
    id: id(),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    dailyCheckId: ref()
      .notNull()
      .references(() => dailyChecks.id),
    createdAt: moment().notNull(),
    endedAt: moment(),
    endedBy: ref().references(() => users.id),
    note: varchar({ length: 500 }),
  },
  (table) => [
    unique('run_flags_test_run_id_daily_check_id_unique').on(table.testRunId, table.dailyCheckId),
    index('run_flags_ended_at_idx').on(table.endedAt),
  ],
);

/** The owner lets a point of an open run go, with a reason; never on a legal limit. */
export const runConcessions = mysqlTable(
  'run_concessions',
  {
    id: id(),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    testPointId: ref()
      .notNull()
      .references(() => testPoints.id),
    reason: varchar({ length: 500 }).notNull(),
    at: moment().notNull(),
    byUserId: ref()
      .notNull()
      .references(() => users.id),
    withdrawnAt: moment(),
    withdrawnBy: ref().references(() => users.id),
  },
  (table) => [index('run_concessions_test_run_id_idx').on(table.testRunId, table.testPointId)],
);

/** An old test sheet, pasted as a table. It is history: no verdict and no certificate rests on it. */
export const historySheets = mysqlTable(
  'history_sheets',
  {
    id: id(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    /** As typed; of a unit in the books where there is one. */
    serial: code(30).notNull(),
    unitId: ref().references(() => units.id),
    /** `YYYY-MM-DD` as the sheet says; null where it does not. */
    testedOn: code(10),
    note: varchar({ length: 300 }).notNull().default(''),
    createdAt: moment().notNull(),
    createdBy: ref().references(() => users.id),
  },
  (table) => [
    index('history_sheets_serial_idx').on(table.serial),
    index('history_sheets_model_id_idx').on(table.modelId),
  ],
);

/** One cell of an old test sheet. */
export const historyReadings = mysqlTable(
  'history_readings',
  {
    id: id(),
    historySheetId: ref()
      .notNull()
      .references(() => historySheets.id),
    quantityKey: code(40).notNull(),
    band: code(8),
    enteredText: varchar({ length: 60 }).notNull(),
    enteredUnit: varchar({ length: 12 }).notNull(),
    /** As the sheet has it, in the quantity's unit inside. */
    value: double().notNull(),
  },
  (table) => [index('history_readings_history_sheet_id_idx').on(table.historySheetId)],
);
