import { z } from 'zod';
import { LIMIT_NAMES } from '~/domain/bench/limit-rules';
import type { ChosenRule, LimitRule } from '~/domain/bench/limit-rules';
import type { EntryUnit, Quantity, QuantityFormat, QuantityUnit } from '~/domain/bench/quantities';
import { parseFormula } from '~/domain/formula/formula';

const isoDay = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as 2027-03-09.');
const text = (max: number) =>
  z
    .string()
    .trim()
    .min(1)
    .max(max, `At most ${String(max)} characters.`);
const certainty = z.enum(['read', 'read in quotation', 'from memory', 'entered']);
const hertz = z.number().finite().nonnegative();

/** A key as formulas can name it. */
export const definitionKey = z
  .string()
  .regex(
    /^[a-z][a-z0-9_]{1,39}$/,
    'A key has 2 to 40 small letters, digits and underscores, a letter first.',
  );

const formats = [
  'power',
  'ratio',
  'level',
  'current',
  'voltage',
  'frequency',
  'frequency_error',
  'time',
  'temperature',
  'percent',
  'number',
  'yes_no',
] as const satisfies readonly QuantityFormat[];
const units = [
  'W',
  'dBc',
  'dBm',
  'dB',
  'A',
  'V',
  'Hz',
  's',
  'K',
  '1',
  '',
] as const satisfies readonly QuantityUnit[];
const entryUnits = [
  ...([
    'dBm',
    'W',
    'Vrms',
    'Vpk',
    'Vpp',
    'Vdc',
    'dBc',
    'dB',
    'A',
    'V',
    'Hz',
    's',
    '°C',
    'K',
    '%',
    '1',
  ] as const),
  'yes/no',
] as const satisfies readonly EntryUnit[];

/** A quantity as it is stored, sent and judged with. */
export const quantitySchema: z.ZodType<Quantity, z.ZodTypeDef, unknown> = z.object({
  key: definitionKey,
  label: text(60),
  unit: z.enum(units),
  entryUnits: z.array(z.enum(entryUnits)).readonly(),
  defaultUnit: z.string().nullable(),
  format: z.enum(formats),
  path: z.enum(['none', 'adds', 'subtracts']),
  limitSense: z.enum(['lower', 'upper', 'both']),
  order: z.number().int().nullable(),
  formula: z.string().nullable(),
  source: text(300),
});

const clause = z.object({
  name: text(120),
  certainty,
  by: z.enum(['transmit', 'product']),
  fromHz: hertz.nullable(),
  toHz: hertz.nullable(),
  toInclusive: z.boolean().optional(),
  underW: z.number().finite().positive().nullable().optional(),
  requiredDb: z.string().superRefine((formula, context) => {
    const parsed = parseFormula(formula, LIMIT_NAMES);
    if (!parsed.ok) context.addIssue({ code: 'custom', message: parsed.reason });
  }),
});

/** An emission rule as it is stored and sent. */
export const limitRuleSchema: z.ZodType<LimitRule, z.ZodTypeDef, unknown> = z.object({
  key: definitionKey,
  title: text(120),
  source: text(300),
  edition: text(200),
  validFrom: isoDay.nullable(),
  validTo: isoDay.nullable(),
  certainty,
  note: z.string().trim().max(500),
  destinations: z.array(z.string().regex(/^[A-Z]{2}$/, 'A country has two letters.')).readonly(),
  isElsewhere: z.boolean(),
  isAutomatic: z.boolean(),
  clauses: z.array(clause).min(1, 'A rule needs at least one row.').readonly(),
});

/** The rule of a run as the station gets it. */
export const chosenRuleSchema: z.ZodType<ChosenRule, z.ZodTypeDef, unknown> = z.object({
  key: z.string(),
  title: z.string(),
  source: z.string(),
  note: z.string(),
  certainty,
  rules: z.array(limitRuleSchema).readonly(),
});
