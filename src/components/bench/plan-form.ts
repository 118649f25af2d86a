import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { frequencyPlanDraft, planColumnNames, planToColumns } from '~/schemas/frequency-plans';
import type { PlanColumns } from '~/schemas/frequency-plans';

/** What the form of a frequency plan shows, and what its preview is made of. */
export interface PlanFormState {
  columns: PlanColumns;
  /** Sentences by field and row: `oscLowMhz.0`. */
  errors: Record<string, string>;
  /** Null where what stands in the form makes no plan. */
  plan: FrequencyPlan | null;
  /** Whether the form holds something that is not kept yet. */
  isDraft: boolean;
}

const nothing: FrequencyPlan = { oscillators: [], stages: [], carriers: [], spacings: [] };

function columnsOf(values: (name: string) => readonly string[]): PlanColumns {
  const columns = planToColumns(nothing);
  for (const name of planColumnNames) columns[name] = values(name);
  return columns;
}

/**
 * The state of the form: as it came back refused, as it stands in the address where somebody looks at it first,
 * or as the revision in use has it.
 */
export function planFormState(
  formReturn: { values: Record<string, string | string[]>; fields: Record<string, string> } | null,
  search: URLSearchParams,
  current: FrequencyPlan | null,
): PlanFormState {
  if (formReturn?.values['oscSymbol'] !== undefined) {
    const columns = columnsOf((name) => [formReturn.values[name] ?? []].flat());
    return { columns, errors: formReturn.fields, plan: null, isDraft: true };
  }
  if (search.has('oscSymbol')) {
    const columns = columnsOf((name) => search.getAll(name));
    const parsed = frequencyPlanDraft.safeParse(columns);
    const issues = parsed.success ? [] : parsed.error.issues;
    const errors = Object.fromEntries(issues.map(({ path, message }) => [path.join('.'), message]));
    return { columns, errors, plan: parsed.success ? parsed.data : null, isDraft: true };
  }
  return { columns: planToColumns(current ?? nothing), errors: {}, plan: current, isDraft: false };
}
