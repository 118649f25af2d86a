import { numberCell } from './cells';
import type { DraftResult } from './drafts';
import { guessFreqUnit } from './drafts';
import { freqFactor, freqUnitIn, freqUnitOf, levelUnitIn, levelUnitOf } from './level-units';
import type { Preamble } from './preamble';
import type { Table } from './table';
import type { LevelUnit, SweepHints } from './types';

interface Column {
  index: number;
  name: string;
  values: Float64Array;
  /** Unit glued to the numbers of each row; one entry where it is the same in all. */
  units: string[];
}

function readColumns(table: Table): Column[] {
  const { rows, width, heading, dialect } = table;
  return Array.from({ length: width }, (_, index) => {
    const values = new Float64Array(rows.length);
    const units: string[] = [];
    for (const [row, cells] of rows.entries()) {
      const cell = numberCell(cells[index] ?? '', dialect.decimal);
      values[row] = cell?.value ?? NaN;
      units.push(cell?.unit ?? '');
    }
    return { index, name: heading?.[index] ?? `column ${String(index + 1)}`, values, units };
  });
}

function every(values: Float64Array, holds: (value: number, before: number | null) => boolean): boolean {
  for (let index = 0; index < values.length; index += 1) {
    if (!holds(values[index] ?? NaN, index === 0 ? null : (values[index - 1] ?? NaN))) return false;
  }
  return true;
}

const isRising = (column: Column): boolean =>
  every(column.values, (value, before) => before === null || value > before);
const isIndex = (column: Column): boolean =>
  Number.isInteger(column.values[0]) &&
  (column.values[0] ?? 2) <= 1 &&
  every(column.values, (value, before) => before === null || value === before + 1);
const isZero = (column: Column): boolean => every(column.values, (value) => value === 0);
const namesFrequency = (column: Column): boolean =>
  /freq|frequenz|fréq/i.test(column.name) ||
  freqUnitIn(column.name) !== null ||
  freqUnitOf(column.units[0] ?? '') !== null;
const namesPhase = (column: Column): boolean => /phase|\bdeg\b|°/i.test(column.name);
const namesLevel = (column: Column): boolean =>
  /ampl|level|power|magn|trace|pegel/i.test(column.name) ||
  levelUnitIn(column.name) !== null ||
  levelUnitOf(column.units[0] ?? '') !== null;

function frequencyColumn(columns: readonly Column[]): Column | null {
  const named = columns.find(namesFrequency);
  if (named !== undefined) return named;
  const rising = columns.filter(isRising);
  return rising.find((column) => !isIndex(column)) ?? null;
}

/** Unit glued to the numbers of a level; refuses a mixture. */
function gluedLevelUnit(
  column: Column,
): { ok: true; unit: LevelUnit | null } | { ok: false; reason: string } {
  const first = column.units[0] ?? '';
  if (column.units.some((unit) => unit !== first)) {
    return { ok: false, reason: 'The levels are in more than one unit: export them in dBm.' };
  }
  return { ok: true, unit: levelUnitOf(first) };
}

interface LevelChoice {
  column: Column;
  questions: string[];
  notes: string[];
}

function chooseLevel(candidates: readonly Column[], hints: SweepHints): LevelChoice | null {
  const notes: string[] = [];
  const useful = candidates.filter((column) => {
    if (namesPhase(column)) return false;
    if (!isZero(column)) return true;
    notes.push(`Column ${String(column.index + 1)} is zero throughout and was left out.`);
    return false;
  });
  const named = useful.filter(namesLevel);
  const choice = named.length > 0 ? named : useful;
  const hinted = candidates.find((column) => column.index === hints.levelColumn);
  if (hinted !== undefined) return { column: hinted, questions: [], notes };
  const column = choice[0];
  if (column === undefined) return null;
  const questions =
    choice.length === 1
      ? []
      : [`The file has ${String(choice.length)} traces; “${column.name}” was taken. Is it the right one?`];
  return { column, questions, notes };
}

/** Frequencies of each row in Hz; a unit glued to a number counts before that of the column. */
function frequenciesOf(column: Column, preamble: Preamble, table: Table, hints: SweepHints) {
  const named =
    hints.freqUnit ?? freqUnitIn(column.name) ?? preamble.freqUnit ?? freqUnitIn(table.headingLine ?? '');
  const glued = freqUnitOf(column.units[0] ?? '');
  const guess = guessFreqUnit(column.values[column.values.length - 1] ?? 0);
  const unit = glued ?? named ?? guess.unit;
  const freqHz = column.values.map(
    (value, row) => value * freqFactor(freqUnitOf(column.units[row] ?? '') ?? unit),
  );
  return { unit, freqHz, question: glued === null && named === null ? guess.question : null };
}

/** Reads columns of frequency and level, with any others beside them. */
export function readColumnFile(table: Table, preamble: Preamble, hints: SweepHints): DraftResult {
  const columns = readColumns(table);
  const freq = frequencyColumn(columns);
  if (freq === null) return readStartStop(table, columns, preamble, hints);
  const level = chooseLevel(
    columns.filter((column) => column !== freq && !(column.index < freq.index && isIndex(column))),
    hints,
  );
  if (level === null) return { ok: false, reason: 'The file has a frequency but no level.' };
  const glued = gluedLevelUnit(level.column);
  if (!glued.ok) return glued;
  const { unit, freqHz, question } = frequenciesOf(freq, preamble, table, hints);
  const repeats =
    table.heading !== null &&
    columns.some((column) => column !== level.column && column.name === level.column.name);
  const notes = [...level.notes];
  if (repeats)
    notes.push(
      `More than one column is called “${level.column.name}”; column ${String(level.column.index + 1)} was taken.`,
    );
  return {
    ok: true,
    draft: {
      form: 'columns',
      columns: columns.map((column) => column.name),
      freqColumn: freq.index,
      levelColumn: level.column.index,
      freqHz,
      level: level.column.values,
      freqUnit: unit,
      levelUnit:
        glued.unit ??
        levelUnitIn(level.column.name) ??
        preamble.levelUnit ??
        levelUnitIn(table.headingLine ?? ''),
      calibratedForm: true,
      questions: [...(question === null ? [] : [question]), ...level.questions],
      notes,
    },
  };
}

/** Rebuilds the frequencies of a file that only names where they start and stop. */
function readStartStop(
  table: Table,
  columns: readonly Column[],
  preamble: Preamble,
  hints: SweepHints,
): DraftResult {
  const { startHz, stopHz, bins } = preamble;
  const points = table.rows.length;
  if (startHz === null || stopHz === null || !(stopHz > startHz)) {
    return {
      ok: false,
      reason: 'No column rises as a frequency does, and the file does not say where it starts and stops.',
    };
  }
  if (bins !== null && bins !== points) {
    return { ok: false, reason: `The file announces ${String(bins)} points and holds ${String(points)}.` };
  }
  // Level and phase alternate where the file has twice as many columns as traces.
  const pairs = preamble.traces > 0 && table.width === 2 * preamble.traces;
  const level = chooseLevel(pairs ? columns.filter((column) => column.index % 2 === 0) : columns, hints);
  if (level === null) return { ok: false, reason: 'The file has no level.' };
  const glued = gluedLevelUnit(level.column);
  if (!glued.ok) return glued;
  const step = (stopHz - startHz) / (points - 1);
  return {
    ok: true,
    draft: {
      form: 'start and stop',
      columns: columns.map((column) => column.name),
      freqColumn: null,
      levelColumn: level.column.index,
      freqHz: Float64Array.from({ length: points }, (_, index) => startHz + index * step),
      level: level.column.values,
      freqUnit: 'Hz',
      levelUnit: glued.unit ?? levelUnitIn(level.column.name) ?? preamble.levelUnit,
      calibratedForm: true,
      questions: level.questions,
      notes: [
        ...level.notes,
        'The file has no frequency column; the frequencies were rebuilt from its start, stop and number of points.',
        ...(pairs ? ['Each trace has a level and a phase; the phases were left out.'] : []),
      ],
    },
  };
}
