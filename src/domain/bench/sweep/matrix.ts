import { numberCell } from './cells';
import type { DraftResult } from './drafts';
import { guessFreqUnit } from './drafts';
import { freqFactor, freqUnitIn, freqUnitOf } from './level-units';
import type { Table } from './table';
import type { SweepHints, SweepQuestion } from './types';

/** Frequencies in the heading of a matrix, one row a time; null where the heading is no such row. */
function headingFrequencies(table: Table): { values: number[]; unit: string } | null {
  const { heading, dialect, width } = table;
  if (heading?.length !== width || width < 4) return null;
  if (numberCell(heading[0] ?? '', dialect.decimal) !== null) return null;
  const cells = heading.slice(1).map((cell) => numberCell(cell, dialect.decimal));
  const values = cells.flatMap((cell) => (cell === null ? [] : [cell.value]));
  const rises = values.every((value, index) => index === 0 || value > (values[index - 1] ?? Infinity));
  if (values.length !== cells.length || !rises) return null;
  return { values, unit: cells[0]?.unit ?? '' };
}

/** True where the file is a matrix: its heading is a rising row of frequencies. */
export function isMatrix(table: Table): boolean {
  return headingFrequencies(table) !== null;
}

/** Reads a matrix; the highest level of each column over all rows is kept. */
export function readMatrix(table: Table, hints: SweepHints): DraftResult {
  const found = headingFrequencies(table);
  if (found === null) return { ok: false, reason: 'The first row is no rising row of frequencies.' };
  const { values } = found;
  const questions: SweepQuestion[] = [];
  const named = hints.freqUnit ?? freqUnitOf(found.unit) ?? freqUnitIn(table.heading?.[0] ?? '');
  const guess = guessFreqUnit(values[values.length - 1] ?? 0);
  if (named === null && guess.question !== null)
    questions.push({ about: 'frequency unit', text: guess.question, needsValue: false });
  const unit = named ?? guess.unit;
  const factor = freqFactor(unit);
  const level = new Float64Array(values.length).fill(-Infinity);
  for (let row = 0; row < table.rows; row += 1) {
    for (let column = 0; column < values.length; column += 1) {
      const here = table.values[row * table.width + column + 1] ?? NaN;
      if (here > (level[column] ?? Infinity)) level[column] = here;
    }
  }
  return {
    ok: true,
    draft: {
      form: 'matrix',
      columns: ['frequencies in the heading'],
      freqColumn: null,
      levelColumn: null,
      freqHz: Float64Array.from(values, (value) => value * factor),
      resolutionHz: 0,
      level,
      freqUnit: unit,
      levelUnit: null,
      calibratedForm: true,
      questions,
      notes: [
        `The frequencies are the heading; of ${String(table.rows)} rows the highest level of each column was kept.`,
      ],
    },
  };
}
