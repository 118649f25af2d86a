import { sql } from 'drizzle-orm';
import type { AnyMySqlColumn } from 'drizzle-orm/mysql-core';
import {
  boolean,
  check,
  decimal,
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
import { buildStages } from '~/domain/production/stages';
import { code, country, currency, id, letter, moment, ref, revisionStates, whole } from './columns';
import { users } from './people';
import { parts } from './stores';

/** A rig design that is for sale. */
export const models = mysqlTable('models', {
  id: id(),
  slug: code(60).notNull().unique(),
  serialPrefix: code(8).notNull().unique(),
  name: varchar({ length: 80 }).notNull(),
  tagline: varchar({ length: 200 }).notNull(),
  description: text().notNull(),
  /** The front panel's drawing: `PanelSpec` of `domain/catalog/panel`. */
  panel: json().$type<unknown>().notNull(),
  ratedPowerW: double().notNull(),
  netWeightG: int().notNull(),
  customsDescription: varchar({ length: 200 }).notNull(),
  hsCode: code(12).notNull(),
  state: mysqlEnum(['draft', 'for_sale', 'withdrawn']).notNull(),
  createdAt: moment().notNull(),
  version: int().notNull().default(1),
});

export const optionGroups = mysqlTable(
  'option_groups',
  {
    id: id(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    key: code(40).notNull(),
    label: varchar({ length: 80 }).notNull(),
    minChosen: int().notNull(),
    maxChosen: int().notNull(),
    position: int().notNull(),
  },
  (table) => [
    unique('option_groups_model_id_key_unique').on(table.modelId, table.key),
    check(
      'option_groups_chosen_check',
      sql`${table.minChosen} >= 0 and ${table.minChosen} <= ${table.maxChosen}`,
    ),
  ],
);

export const options = mysqlTable(
  'options',
  {
    id: id(),
    optionGroupId: ref()
      .notNull()
      .references(() => optionGroups.id),
    /** As conditions name it: `band.20m`. */
    key: code(60).notNull(),
    label: varchar({ length: 80 }).notNull(),
    note: varchar({ length: 200 }).notNull().default(''),
    priceMinor: whole().notNull(),
    position: int().notNull(),
    isDefault: boolean().notNull().default(false),
    needs: json().$type<string[]>().notNull(),
    excludes: json().$type<string[]>().notNull(),
  },
  (table) => [unique('options_option_group_id_key_unique').on(table.optionGroupId, table.key)],
);

/** Anything sold that is not a rig. */
export const spares = mysqlTable('spares', {
  id: id(),
  number: code(40).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  partId: ref().references(() => parts.id),
  priceMinor: whole().notNull(),
  currency: currency().notNull(),
  netWeightG: int().notNull(),
  hsCode: code(12).notNull(),
  originCountry: country().notNull(),
  state: mysqlEnum(['for_sale', 'withdrawn']).notNull(),
});

/** A bill of materials, of a model or of a made part. */
export const bomRevisions = mysqlTable(
  'bom_revisions',
  {
    id: id(),
    modelId: ref().references(() => models.id),
    partId: ref().references(() => parts.id),
    letter: letter().notNull(),
    state: mysqlEnum(revisionStates).notNull(),
    note: varchar({ length: 500 }).notNull().default(''),
    replacesId: ref().references((): AnyMySqlColumn => bomRevisions.id),
    createdAt: moment().notNull(),
    releasedAt: moment(),
    releasedBy: ref().references(() => users.id),
  },
  (table) => [
    unique('bom_revisions_model_id_letter_unique').on(table.modelId, table.letter),
    unique('bom_revisions_part_id_letter_unique').on(table.partId, table.letter),
    check('bom_revisions_owner_check', sql`(${table.modelId} is null) <> (${table.partId} is null)`),
  ],
);

export const bomLines = mysqlTable(
  'bom_lines',
  {
    id: id(),
    bomRevisionId: ref()
      .notNull()
      .references(() => bomRevisions.id),
    lineNo: int().notNull(),
    partId: ref()
      .notNull()
      .references(() => parts.id),
    quantity: whole().notNull(),
    designators: json().$type<string[]>().notNull(),
    scrapPercent: decimal({ precision: 5, scale: 2, mode: 'number' }).notNull().default(0),
    condition: varchar({ length: 500 }),
  },
  (table) => [
    unique('bom_lines_bom_revision_id_line_no_unique').on(table.bomRevisionId, table.lineNo),
    index('bom_lines_part_id_idx').on(table.partId),
    check('bom_lines_quantity_check', sql`${table.quantity} > 0`),
  ],
);

export const buildSheetRevisions = mysqlTable(
  'build_sheet_revisions',
  {
    id: id(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    letter: letter().notNull(),
    state: mysqlEnum(revisionStates).notNull(),
    note: varchar({ length: 500 }).notNull().default(''),
    createdAt: moment().notNull(),
    releasedAt: moment(),
    releasedBy: ref().references(() => users.id),
  },
  (table) => [unique('build_sheet_revisions_model_id_letter_unique').on(table.modelId, table.letter)],
);

export const buildSteps = mysqlTable(
  'build_steps',
  {
    id: id(),
    buildSheetRevisionId: ref()
      .notNull()
      .references(() => buildSheetRevisions.id),
    position: int().notNull(),
    stage: mysqlEnum(buildStages).notNull(),
    title: varchar({ length: 120 }).notNull(),
    instruction: text().notNull(),
    caution: varchar({ length: 300 }).notNull().default(''),
    minutes: int(),
    skill: varchar({ length: 40 }),
    condition: varchar({ length: 500 }),
    /** What is to be written down at the step, if anything: `{ label, unit, lower, upper }`. */
    entry: json().$type<unknown>(),
  },
  (table) => [
    unique('build_steps_build_sheet_revision_id_position_unique').on(
      table.buildSheetRevisionId,
      table.position,
    ),
  ],
);

export const testPlanRevisions = mysqlTable(
  'test_plan_revisions',
  {
    id: id(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    letter: letter().notNull(),
    state: mysqlEnum(revisionStates).notNull(),
    note: varchar({ length: 500 }).notNull().default(''),
    supplyV: double().notNull(),
    loadOhm: double().notNull(),
    /** Facts that formulas of quantities need: `OutputStage` of `domain/bench/types`; null where not stated. */
    outputStage: json().$type<unknown>(),
    createdAt: moment().notNull(),
    releasedAt: moment(),
    releasedBy: ref().references(() => users.id),
  },
  (table) => [unique('test_plan_revisions_model_id_letter_unique').on(table.modelId, table.letter)],
);

export const testPoints = mysqlTable(
  'test_points',
  {
    id: id(),
    testPlanRevisionId: ref()
      .notNull()
      .references(() => testPlanRevisions.id),
    position: int().notNull(),
    quantityKey: code(40).notNull(),
    band: code(8),
    freqHz: double(),
    /** In the quantity's SI unit, or dB where the trade uses dB. */
    lowerLimit: double(),
    upperLimit: double(),
    limitRule: mysqlEnum(['fixed', 'spurious']).notNull(),
    decision: mysqlEnum(['guarded', 'simple']).notNull(),
    required: boolean().notNull().default(true),
    condition: varchar({ length: 500 }),
    /** Supply of this point where it is not the plan's, V. */
    supplyV: double(),
    /** How it is read, where the quantity leaves that open: `10 dB (S+N)/N in 500 Hz`. */
    method: varchar({ length: 200 }).notNull().default(''),
  },
  (table) => [
    unique('test_points_test_plan_revision_id_position_unique').on(table.testPlanRevisionId, table.position),
    check('test_points_legal_check', sql`${table.limitRule} = 'fixed' or ${table.decision} = 'guarded'`),
  ],
);

/** Where a model's products come from: `FrequencyPlan` of `domain/bench/frequency-plan`. */
export const frequencyPlanRevisions = mysqlTable(
  'frequency_plan_revisions',
  {
    id: id(),
    modelId: ref()
      .notNull()
      .references(() => models.id),
    revision: int().notNull(),
    plan: json().$type<unknown>().notNull(),
    createdAt: moment().notNull(),
    retiredAt: moment(),
  },
  (table) => [unique('frequency_plan_revisions_model_id_revision_unique').on(table.modelId, table.revision)],
);
