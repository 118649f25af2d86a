import { z } from 'zod';
import { LIMIT_NAMES } from '~/domain/bench/limit-rules';
import { QUANTITY_KINDS } from '~/domain/bench/quantities';
import type { QuantityFormat } from '~/domain/bench/quantities';
import { parseDecimal } from '~/domain/bench/decimal';
import { parseFormula } from '~/domain/formula/formula';
import { isCountryCode } from '~/lib/countries';
import { definitionKey } from './bench-definitions';
import { formList } from './form-list';

const text = (max: number, sentence: string) =>
  z
    .string({ required_error: sentence })
    .trim()
    .min(1, sentence)
    .max(max, `At most ${String(max)} characters.`);

const ticked = z.preprocess((value) => value === 'on' || value === 'true' || value === true, z.boolean());
const emptyIsNull = (value: unknown) => (value === '' || value === undefined ? null : value);
const isFormat = (name: string): name is QuantityFormat => name in QUANTITY_KINDS;

/** Revision that an editor began with; 0 for what is new. */
const basedOn = z.coerce.number().int().nonnegative().default(0);

/** A works' own quantity as its form sends it; unit and units of entry follow from how it is written. */
export const quantityEdit = z.object({
  basedOn,
  key: definitionKey,
  label: text(60, 'Say what it is.'),
  format: z
    .string({ required_error: 'Choose how it is written.' })
    .refine(isFormat, 'Choose how it is written from the list.'),
  path: z.enum(['none', 'adds', 'subtracts'], { message: 'Choose what a path does to it.' }).default('none'),
  limitSense: z.enum(['lower', 'upper', 'both'], { message: 'Choose which way is better.' }),
  formula: z.preprocess(emptyIsNull, z.string().trim().nullable()),
  source: text(300, 'Say where its definition is from; it may be the works itself.'),
});

export type QuantityEdit = z.output<typeof quantityEdit>;

const day = z.preprocess(
  emptyIsNull,
  z
    .string()
    .regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as 2027-03-09.')
    .nullable(),
);

/** A number with a decimal point or comma, or nothing. */
function numberOrNull(sentence: string) {
  return z.preprocess(
    emptyIsNull,
    z
      .union([z.number(), z.string()])
      .nullable()
      .transform((value, context): number | null => {
        if (value === null || typeof value === 'number') return value;
        const read = parseDecimal(value);
        if (read.ok && read.value >= 0) return read.value;
        context.addIssue({ code: 'custom', message: sentence });
        return z.NEVER;
      }),
  );
}

const clauseRow = z.object({
  name: z.string().trim().max(120, 'At most 120 characters.').default(''),
  by: z.enum(['transmit', 'product'], { message: 'Choose whose frequency decides.' }).default('transmit'),
  fromMhz: numberOrNull('A frequency in MHz, or nothing.'),
  toMhz: numberOrNull('A frequency in MHz, or nothing.'),
  requiredDb: z.string().trim().default(''),
});

const clauseFields = ['name', 'by', 'fromMhz', 'toMhz', 'requiredDb'] as const;

/** A form sends a list for each column of the rows; a script sends `clauses`. */
function clausesOf(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || 'clauses' in value) return value;
  const columns = value as Record<string, unknown>;
  const list = (name: string) => formList(columns[name]);
  const clauses = Array.from({ length: list('requiredDb').length }, (_, row) =>
    Object.fromEntries(clauseFields.map((name) => [name, list(name)[row] ?? ''])),
  );
  return { ...columns, clauses };
}

const ruleHead = z.object({
  basedOn,
  key: definitionKey,
  title: text(120, 'Name the rule.'),
  source: text(300, 'Say where its text stands.'),
  edition: text(200, 'Say which edition or date of it you read.'),
  validFrom: day,
  validTo: day,
  note: z.string().trim().max(500, 'At most 500 characters.').default(''),
  destinations: z
    .preprocess(
      (value) =>
        typeof value === 'string'
          ? value
              .toUpperCase()
              .split(/[\s,;]+/)
              .filter((code) => code !== '')
          : value,
      z.array(z.string().refine(isCountryCode, 'Name countries by their two letters: DE, AT, US.')).max(250),
    )
    .default([]),
  isElsewhere: ticked,
  isAutomatic: ticked,
  clauses: z.array(clauseRow).max(30, 'At most 30 rows.'),
});

/** A works' own emission rule as its form sends it; frequencies of its rows in MHz. */
export const limitRuleEdit = z.preprocess(clausesOf, ruleHead).transform((rule, context) => {
  const clauses = rule.clauses.flatMap((clause, row) => {
    if (clause.name === '' && clause.requiredDb === '') return [];
    const fault = (field: string, message: string) =>
      context.addIssue({ code: 'custom', path: ['clauses', row, field], message });
    if (clause.name === '') fault('name', 'Name the row, as its text does.');
    const parsed = parseFormula(clause.requiredDb, LIMIT_NAMES);
    if (!parsed.ok) fault('requiredDb', parsed.reason);
    const { fromMhz, toMhz } = clause;
    if (fromMhz !== null && toMhz !== null && fromMhz >= toMhz)
      fault('toMhz', 'It ends below where it begins.');
    return [clause];
  });
  if (clauses.length === 0) {
    context.addIssue({ code: 'custom', path: ['clauses'], message: 'A rule needs at least one row.' });
  }
  if (rule.isAutomatic && rule.destinations.length === 0 && !rule.isElsewhere) {
    context.addIssue({
      code: 'custom',
      path: ['destinations'],
      message: 'Say where it counts: countries, or everywhere that no other rule names.',
    });
  }
  return { ...rule, clauses };
});

export type LimitRuleEdit = z.output<typeof limitRuleEdit>;

/** `?power=5&tx=7030&product=14060`: what the limits are shown for. */
export const limitQuestion = z.object({
  power: z.string().max(40).optional(),
  tx: z.string().max(40).optional(),
  product: z.string().max(40).optional(),
});
