import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  double,
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  text,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core';
import { testPlanRevisions, testPoints } from './catalog';
import { code, country, id, moment, ref } from './columns';
import { files } from './files';
import { users } from './people';
import { units } from './production';

export const instruments = mysqlTable('instruments', {
  id: id(),
  number: code(20).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
});

/** What an instrument is good for, as known at one time: `InstrumentSpec` of `domain/bench/types`. */
export const instrumentRevisions = mysqlTable(
  'instrument_revisions',
  {
    id: id(),
    instrumentId: ref()
      .notNull()
      .references(() => instruments.id),
    revision: int().notNull(),
    spec: json().$type<unknown>().notNull(),
    calibrationFileId: ref().references(() => files.id),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [
    unique('instrument_revisions_instrument_id_revision_unique').on(table.instrumentId, table.revision),
  ],
);

export const paths = mysqlTable('paths', {
  id: id(),
  number: code(20).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
});

/** The parts between unit and instrument: `PathSpec` of `domain/bench/types`. */
export const pathRevisions = mysqlTable(
  'path_revisions',
  {
    id: id(),
    pathId: ref()
      .notNull()
      .references(() => paths.id),
    revision: int().notNull(),
    spec: json().$type<unknown>().notNull(),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [unique('path_revisions_path_id_revision_unique').on(table.pathId, table.revision)],
);

/** Quantities as data. The ones that ship are revision 1; a works adds its own. */
export const quantityRevisions = mysqlTable(
  'quantity_revisions',
  {
    id: id(),
    key: code(40).notNull(),
    revision: int().notNull(),
    definition: json().$type<unknown>().notNull(),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [unique('quantity_revisions_key_revision_unique').on(table.key, table.revision)],
);

/** Limit rules as data: source, clause, edition, validity, how sure we are of the text. */
export const limitRuleRevisions = mysqlTable(
  'limit_rule_revisions',
  {
    id: id(),
    key: code(60).notNull(),
    revision: int().notNull(),
    definition: json().$type<unknown>().notNull(),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [unique('limit_rule_revisions_key_revision_unique').on(table.key, table.revision)],
);

/** One final test of one unit. Closed is closed (a trigger refuses the rest). */
export const testRuns = mysqlTable(
  'test_runs',
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    runNo: int().notNull(),
    testPlanRevisionId: ref()
      .notNull()
      .references(() => testPlanRevisions.id),
    state: mysqlEnum(['open', 'closed']).notNull(),
    result: mysqlEnum(['passed', 'passed_by_concession', 'undecided', 'failed']),
    stoppedEarly: boolean().notNull().default(false),
    testerUserId: ref()
      .notNull()
      .references(() => users.id),
    /** Null where the unit has no buyer: judged by the strictest rule of all. */
    destinationCountry: country(),
    supplyV: double(),
    ambientC: double(),
    firmwareVersion: varchar({ length: 40 }),
    alignment: json().$type<Record<string, string>>().notNull(),
    /** What was done otherwise than the test plan says, as the certificate prints it. */
    deviations: varchar({ length: 500 }).notNull().default(''),
    /** Of the computation that judged it. */
    computationVersion: varchar({ length: 20 }).notNull(),
    openedAt: moment().notNull(),
    closedAt: moment(),
    version: int().notNull().default(1),
  },
  (table) => [
    unique('test_runs_unit_id_run_no_unique').on(table.unitId, table.runNo),
    index('test_runs_state_idx').on(table.state, table.openedAt),
  ],
);

/** A spectrum file read into a run, with what was understood of it. */
export const sweeps = mysqlTable(
  'sweeps',
  {
    id: id(),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    fileId: ref()
      .notNull()
      .references(() => files.id),
    band: code(8).notNull(),
    understood: json().$type<unknown>().notNull(),
    createdAt: moment().notNull(),
    byUserId: ref().references(() => users.id),
  },
  (table) => [index('sweeps_test_run_id_idx').on(table.testRunId)],
);

/** What was read, as entered; everything else is computed from it. */
export const readings = mysqlTable(
  'readings',
  {
    id: id(),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    testPointId: ref()
      .notNull()
      .references(() => testPoints.id),
    /** 1 for the first; *read again* adds the next, all of them count. */
    readingNo: int().notNull(),
    quantityKey: code(40).notNull(),
    band: code(8),
    freqHz: double(),
    enteredText: varchar({ length: 60 }).notNull(),
    enteredUnit: varchar({ length: 12 }).notNull(),
    /** At the meter, in the quantity's SI unit or dB. */
    value: double().notNull(),
    /** Hidden in the noise: the true one is at most this. */
    atMost: boolean().notNull().default(false),
    /** The tester showed that the ratio holds with 10 dB more attenuation. */
    attenuationHeld: boolean().notNull().default(false),
    source: mysqlEnum(['typed', 'sweep', 'wire', 'history']).notNull(),
    sweepId: ref().references(() => sweeps.id),
    instrumentRevisionId: ref().references(() => instrumentRevisions.id),
    pathRevisionId: ref().references(() => pathRevisions.id),
    at: moment().notNull(),
    byUserId: ref().references(() => users.id),
    voidedAt: moment(),
    voidReason: varchar({ length: 300 }),
    version: int().notNull().default(1),
  },
  (table) => [
    unique('readings_test_run_id_test_point_id_reading_no_unique').on(
      table.testRunId,
      table.testPointId,
      table.readingNo,
    ),
  ],
);

/** The verdict on each test point as a closed run keeps it, with the limit as it was resolved. */
export const runPoints = mysqlTable(
  'run_points',
  {
    id: id(),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    testPointId: ref()
      .notNull()
      .references(() => testPoints.id),
    verdict: mysqlEnum(['pass', 'too_close', 'fail', 'not_run']).notNull(),
    /** At the unit. */
    value: double(),
    expandedUncertainty: double(),
    coverageFactor: double(),
    readingCount: int().notNull(),
    lowerLimit: double(),
    upperLimit: double(),
    ruleKey: code(60),
    ruleText: text().notNull(),
    probabilityOfConformance: double(),
    /** A concession's reason, by the owner, never on a legal limit. */
    concession: varchar({ length: 500 }),
  },
  (table) => [
    unique('run_points_test_run_id_test_point_id_unique').on(table.testRunId, table.testPointId),
    check('run_points_concession_check', sql`${table.concession} is null or ${table.ruleKey} is null`),
  ],
);
