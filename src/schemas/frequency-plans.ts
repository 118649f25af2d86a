import { z } from 'zod';
import { BAND_KEYS } from '~/domain/bench/bands';
import type { FrequencyPlan, Oscillator } from '~/domain/bench/frequency-plan';
import { checkPlan } from '~/domain/bench/plan-preview';
import { formList } from './form-list';

const band = z.enum(BAND_KEYS as [(typeof BAND_KEYS)[number], ...typeof BAND_KEYS]).nullable();
const hertz = z.number().finite().positive();
const symbol = z.string().min(1).max(10);
const name = z.string().min(1).max(40);
const expression = z.string().min(1).max(80);

/** A frequency plan as it is stored and read. */
export const frequencyPlanSchema: z.ZodType<FrequencyPlan, z.ZodTypeDef, unknown> = z.object({
  oscillators: z
    .array(
      z.object({
        symbol,
        name,
        ranges: z.array(z.object({ band, lowHz: hertz, highHz: hertz })).max(12),
      }),
    )
    .max(8),
  stages: z.array(z.object({ symbol, name, band, expression })).max(24),
  carriers: z.array(z.object({ band, expression })).max(12),
  spacings: z.array(z.object({ kind: z.enum(['supply', 'clock']), name, spacingHz: hertz })).max(8),
});

const column = (max: number) =>
  z.preprocess(
    formList,
    z
      .array(
        z
          .string()
          .trim()
          .max(max, `At most ${String(max)} characters.`),
      )
      .max(60),
  );

/** The columns of the form's tables: a row is what stands at the same place in each column of its table. */
const planColumns = z.object({
  oscSymbol: column(10),
  oscName: column(40),
  oscBand: column(4),
  oscLowMhz: column(20),
  oscHighMhz: column(20),
  stageSymbol: column(10),
  stageName: column(40),
  stageBand: column(4),
  stageExpression: column(80),
  carrierBand: column(4),
  carrierExpression: column(80),
  spacingKind: column(8),
  spacingName: column(40),
  spacingKhz: column(20),
});

/** The fields of the form, each of them a column. */
export type PlanColumn = keyof z.output<typeof planColumns>;
/** What stands in the form's fields. */
export type PlanColumns = Record<PlanColumn, readonly string[]>;

/** Names of the columns. */
export const planColumnNames = Object.keys(planColumns.shape) as PlanColumn[];

function numberOf(text: string): number {
  return text === '' ? NaN : Number(text.replace('\u2212', '-').replace(',', '.'));
}

const bandOf = (text: string | undefined) => BAND_KEYS.find((key) => key === text) ?? null;

/** Rows of the form in the place of each oscillator's ranges, so that a fault is shown where it was typed. */
interface Places {
  ranges: number[][];
  stages: number[];
  carriers: number[];
  spacings: number[];
}

/** The plan that the form's rows make; rows in which nothing stands are left out. */
function planOfRows(rows: PlanColumns, fault: (field: string, sentence: string) => void) {
  const places: Places = { ranges: [], stages: [], carriers: [], spacings: [] };
  const plan: FrequencyPlan = { oscillators: [], stages: [], carriers: [], spacings: [] };
  const at = (field: PlanColumn, row: number): string => rows[field][row] ?? '';
  const stands = (row: number, ...fields: PlanColumn[]): boolean =>
    fields.some((field) => at(field, row) !== '');

  const frequency = (field: PlanColumn, row: number, factor: number, sentence: string): number => {
    // To the millihertz: 4.1 MHz is 4,100,000 Hz and not a hair less.
    const value = Math.round(numberOf(at(field, row)) * factor * 1e3) / 1e3;
    if (Number.isFinite(value) && value > 0) return value;
    fault(`${field}.${String(row)}`, sentence);
    return factor;
  };

  for (const row of rows.oscSymbol.keys()) {
    if (!stands(row, 'oscSymbol', 'oscName', 'oscLowMhz', 'oscHighMhz')) continue;
    const lowHz = frequency('oscLowMhz', row, 1e6, 'State the frequency in MHz, above 0.');
    const isFixed = at('oscHighMhz', row) === '';
    const highHz = isFixed
      ? lowHz
      : frequency('oscHighMhz', row, 1e6, 'State the upper end in MHz, or leave it empty.');
    const own = at('oscSymbol', row);
    const known = plan.oscillators.findIndex(({ symbol: each }) => each === own);
    const range = { band: bandOf(at('oscBand', row)), lowHz, highHz };
    const oscillator: Oscillator | undefined = plan.oscillators[known];
    if (oscillator !== undefined) {
      oscillator.ranges.push(range);
      places.ranges[known]?.push(row);
      continue;
    }
    plan.oscillators.push({ symbol: own, name: at('oscName', row) || own, ranges: [range] });
    places.ranges.push([row]);
  }
  for (const row of rows.stageSymbol.keys()) {
    if (!stands(row, 'stageSymbol', 'stageName', 'stageExpression')) continue;
    places.stages.push(row);
    plan.stages.push({
      symbol: at('stageSymbol', row),
      name: at('stageName', row) || at('stageSymbol', row),
      band: bandOf(at('stageBand', row)),
      expression: at('stageExpression', row),
    });
  }
  for (const row of rows.carrierExpression.keys()) {
    if (!stands(row, 'carrierExpression')) continue;
    places.carriers.push(row);
    plan.carriers.push({ band: bandOf(at('carrierBand', row)), expression: at('carrierExpression', row) });
  }
  for (const row of rows.spacingName.keys()) {
    if (!stands(row, 'spacingName', 'spacingKhz')) continue;
    places.spacings.push(row);
    if (at('spacingName', row) === '') fault(`spacingName.${String(row)}`, 'Say what it is: display clock.');
    plan.spacings.push({
      kind: at('spacingKind', row) === 'clock' ? 'clock' : 'supply',
      name: at('spacingName', row),
      spacingHz: frequency('spacingKhz', row, 1e3, 'State the spacing in kHz, above 0.'),
    });
  }
  return { plan, places };
}

const fieldsOf: Record<string, PlanColumn> = {
  symbol: 'oscSymbol',
  lowHz: 'oscLowMhz',
  band: 'oscBand',
};
const stageFieldsOf: Record<string, PlanColumn> = {
  symbol: 'stageSymbol',
  band: 'stageBand',
  expression: 'stageExpression',
};

/** The form's field in which a fault of the plan was typed. */
function fieldOf(fault: string, places: Places): string {
  const [part = '', index = '', ...rest] = fault.split('.');
  const last = rest[rest.length - 1] ?? '';
  const place = Number(index);
  switch (part) {
    case 'oscillators': {
      const range = rest[0] === 'ranges' ? Number(rest[1]) : 0;
      return `${fieldsOf[last] ?? 'oscSymbol'}.${String(places.ranges[place]?.[range] ?? 0)}`;
    }
    case 'stages':
      return `${stageFieldsOf[last] ?? 'stageSymbol'}.${String(places.stages[place] ?? 0)}`;
    case 'carriers':
      return `${last === 'band' ? 'carrierBand' : 'carrierExpression'}.${String(places.carriers[place] ?? 0)}`;
    default:
      return `spacingKhz.${String(places.spacings[place] ?? 0)}`;
  }
}

function toPlan(rows: PlanColumns, context: z.RefinementCtx): FrequencyPlan {
  const fault = (field: string, message: string): void =>
    context.addIssue({ code: 'custom', path: field.split('.'), message });
  const { plan, places } = planOfRows(rows, fault);
  for (const { field, sentence } of checkPlan(plan)) fault(fieldOf(field, places), sentence);
  if (plan.oscillators.length > 8) {
    fault('oscSymbol.0', 'A plan holds at most eight oscillators.');
  }
  return plan;
}

/** A plan as its form has it, to be looked at before it is kept. */
export const frequencyPlanDraft = planColumns.transform(toPlan);

/** A plan as its form sends it, with the revision that the person saw. */
export const frequencyPlanRevision = planColumns
  .extend({ seen: z.coerce.number().int().nonnegative().optional() })
  .transform(({ seen, ...rows }, context) => ({ seen, plan: toPlan(rows, context) }));

const mhz = (hz: number): string => String(Number((hz / 1e6).toFixed(9)));

/** A plan as its form shows it. */
export function planToColumns(plan: FrequencyPlan): PlanColumns {
  const ranges = plan.oscillators.flatMap(({ symbol: own, name: called, ranges: all }) =>
    all.map((range, index) => ({ ...range, symbol: own, name: index === 0 ? called : '' })),
  );
  return {
    oscSymbol: ranges.map((each) => each.symbol),
    oscName: ranges.map((each) => each.name),
    oscBand: ranges.map((each) => each.band ?? ''),
    oscLowMhz: ranges.map((each) => mhz(each.lowHz)),
    oscHighMhz: ranges.map((each) => (each.highHz === each.lowHz ? '' : mhz(each.highHz))),
    stageSymbol: plan.stages.map((each) => each.symbol),
    stageName: plan.stages.map((each) => each.name),
    stageBand: plan.stages.map((each) => each.band ?? ''),
    stageExpression: plan.stages.map((each) => each.expression),
    carrierBand: plan.carriers.map((each) => each.band ?? ''),
    carrierExpression: plan.carriers.map((each) => each.expression),
    spacingKind: plan.spacings.map((each) => each.kind),
    spacingName: plan.spacings.map((each) => each.name),
    spacingKhz: plan.spacings.map((each) => String(Number((each.spacingHz / 1e3).toFixed(6)))),
  };
}
