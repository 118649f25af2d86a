import { emptyLine, writePlanLine } from '~/domain/bench/plan-lines';
import type { PlanField, PlanLine } from '~/domain/bench/plan-lines';
import type { TestPoint } from '~/domain/bench/types';
import { typedList } from '~/lib/typed-values';

/** A row of the editor with where it stands. */
export interface EditorRow {
  no: string;
  line: PlanLine;
}

/** Rows that are there to be filled in. */
const blanks = 3;

const isField = (name: string): name is PlanField => name in emptyLine;
const fields = Object.keys(emptyLine).filter(isField);

/** The rows of a refused form as they were typed, or those of the plan with some empty ones after them. */
export function editorRows(
  form: { values: Record<string, string | string[]> } | null,
  points: readonly TestPoint[],
): EditorRow[] {
  if (form !== null && 'quantity' in form.values) {
    const columns = new Map(fields.map((field) => [field, typedList(form, field, [])]));
    const numbers = typedList(form, 'no', []);
    return (columns.get('quantity') ?? []).map((_, row) => {
      const line = { ...emptyLine };
      for (const field of fields) line[field] = columns.get(field)?.[row] ?? '';
      return { no: numbers[row] ?? '', line };
    });
  }
  return [
    ...points.map((point, index) => ({ no: String(index + 1), line: writePlanLine(point) })),
    ...Array.from({ length: blanks }, () => ({ no: '', line: emptyLine })),
  ];
}
