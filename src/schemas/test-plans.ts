import { z } from 'zod';
import { emptyLine, isEmptyLine } from '~/domain/bench/plan-lines';
import type { PlanField, PlanLine } from '~/domain/bench/plan-lines';
import type { OutputStage } from '~/domain/bench/types';
import { formList } from './form-list';

const fields = Object.keys(emptyLine).filter((field): field is PlanField => field in emptyLine);

const cell = z.string().max(500, 'At most 500 characters.').default('');
const planLine: z.ZodType<PlanLine & { no: string }, z.ZodTypeDef, unknown> = z.object({
  /** Where the row is to stand; rows are sorted by it. */
  no: z.coerce.string().max(10).default(''),
  quantity: cell,
  band: cell,
  freq: cell,
  lower: cell,
  upper: cell,
  limitRule: cell,
  decision: cell,
  required: cell,
  condition: cell,
  supply: cell,
  method: cell,
});

/** A form sends a list for each column; a script sends rows as `lines`. */
function rowsOf(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || 'lines' in value) return value;
  const columns = value as Record<string, unknown>;
  const list = (name: string) => formList(columns[name]);
  const count = Math.max(0, ...fields.map((field) => list(field).length));
  const lines = Array.from({ length: count }, (_, row) =>
    Object.fromEntries(['no', ...fields].map((name) => [name, list(name)[row] ?? ''])),
  );
  return { ...columns, lines };
}

function figure(sentence: string, min: number, max: number) {
  return z
    .union([z.number(), z.string()], { message: sentence })
    .transform((value) => (typeof value === 'number' ? value : Number(value.trim().replace(',', '.') || NaN)))
    .pipe(z.number({ message: sentence }).min(min, sentence).max(max, sentence));
}

const orNull = <T extends z.ZodTypeAny>(schema: T) =>
  z.preprocess((value) => (value === '' || value === undefined ? null : value), schema.nullable());

const head = z.object({
  /** Of the plan as it was when its editor began. */
  stamp: z.string().max(40),
  note: z.string().trim().max(500, 'At most 500 characters.').default(''),
  supplyV: figure('The supply in V, such as 13.8.', 0.5, 100),
  loadOhm: figure('The load in Ω, such as 50.', 1, 10_000),
  devices: orNull(
    figure('How many transistors share the output, 1 to 16.', 1, 16).pipe(
      z.number().int('A whole number of transistors.'),
    ),
  ),
  thetaKPerW: orNull(figure('Kelvin per watt from junction to ambient, such as 26.', 0.01, 1000)),
  duty: orNull(figure('Share of the time with the key down, 1 to 100 %.', 1, 100)),
  hasSink: z.preprocess((value) => value === 'on' || value === true || value === 'true', z.boolean()),
  lines: z.array(planLine).max(500, 'A plan has at most 500 points.'),
});

export interface PlanEdit {
  stamp: string;
  note: string;
  supplyV: number;
  loadOhm: number;
  outputStage: OutputStage | null;
  /** In order; each with its row as it was sent, from 0. */
  lines: { row: number; line: PlanLine }[];
}

/** A draft as its editor sends it, whole; empty rows are left out, the others stand in the order of their numbers. */
export const planEdit: z.ZodType<PlanEdit, z.ZodTypeDef, unknown> = z
  .preprocess(rowsOf, head)
  .transform((plan, context) => {
    const { devices, thetaKPerW, duty, hasSink, lines, ...rest } = plan;
    if (devices === null && (thetaKPerW !== null || duty !== null)) {
      context.addIssue({
        code: 'custom',
        path: ['devices'],
        message: 'Say how many transistors share the output, or leave all of it empty.',
      });
    }
    const outputStage = devices === null ? null : { devices, thetaKPerW, duty: (duty ?? 100) / 100, hasSink };
    const kept = lines
      .map(({ no, ...line }, row) => ({ row, line, place: placeOf(no, row) }))
      .filter(({ line }) => !isEmptyLine(line))
      .sort((a, b) => a.place - b.place || a.row - b.row)
      .map(({ row, line }) => ({ row, line }));
    return { ...rest, outputStage, lines: kept };
  });

function placeOf(no: string, row: number): number {
  const place = Number(no.replace(',', '.'));
  return no.trim() === '' || !Number.isFinite(place) ? row + 1 : place;
}

export const planLetter = z
  .string()
  .regex(/^[A-Za-z]{1,2}$/)
  .transform((letter) => letter.toUpperCase());
