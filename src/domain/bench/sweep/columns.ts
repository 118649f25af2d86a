import { numberCell, splitLine } from './cells';
import type { DraftResult } from './drafts';
import { guessFreqUnit } from './drafts';
import { freqFactor, freqUnitIn, freqUnitOf, levelUnitIn, levelUnitOf, prefixedUnitOf } from './level-units';
import type { Preamble } from './preamble';
import type { Table } from './table';
import type { LevelUnit, SweepHints, SweepQuestion } from './types';

interface Column {
  index: number;
  name: string;
  values: Float64Array;
  /** Unit glued to the number of the first row; empty where there is none. */
  unit: string;
  /** Whether all rows have that unit. */
  isUniform: boolean;
  unitAt: (row: number) => string;
}

function readColumns(table: Table): Column[] {
  const { rows, width, values, heading, firstUnits, otherUnits } = table;
  const mixed = new Set([...otherUnits.keys()].map((place) => place % width));
  return Array.from({ length: width }, (_, index) => {
    const own = new Float64Array(rows);
    for (let row = 0; row < rows; row += 1) own[row] = values[row * width + index] ?? NaN;
    const unit = firstUnits[index] ?? '';
    return {
      index,
      name: heading?.[index] ?? `column ${String(index + 1)}`,
      values: own,
      unit,
      isUniform: !mixed.has(index),
      unitAt: (row) => otherUnits.get(row * width + index) ?? unit,
    };
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
  freqUnitOf(column.unit) !== null;
const namesPhase = (column: Column): boolean => /phase|\bdeg\b|°/i.test(column.name);
const namesLevel = (column: Column): boolean =>
  /ampl|level|power|magn|trace|pegel/i.test(column.name) ||
  levelUnitIn(column.name) !== null ||
  levelUnitOf(column.unit) !== null;

function frequencyColumn(columns: readonly Column[], hints: SweepHints): Column | null {
  const hinted = columns.find((column) => column.index === hints.freqColumn);
  if (hinted !== undefined) return hinted;
  const named = columns.find(namesFrequency);
  if (named !== undefined) return named;
  const rising = columns.filter(isRising);
  return rising.find((column) => !isIndex(column)) ?? null;
}

type Levels = { ok: true; level: Float64Array; unit: LevelUnit | null } | { ok: false; reason: string };

/** Levels of a column with the unit glued to them; SI prefixes are multiplied out, other mixtures refused. */
function gluedLevels({ values, unit, isUniform, unitAt }: Column): Levels {
  const plain = levelUnitOf(unit);
  const first = prefixedUnitOf(unit);
  if (isUniform && (plain !== null || first === null)) return { ok: true, level: values, unit: plain };
  const mixed = { ok: false, reason: 'The levels are in more than one unit: export them in dBm.' } as const;
  if (first === null) return mixed;
  const level = values.slice();
  for (const [row, value] of values.entries()) {
    const here = prefixedUnitOf(unitAt(row));
    if (here?.unit !== first.unit) return mixed;
    level[row] = value * here.factor;
  }
  return { ok: true, level, unit: first.unit };
}

interface LevelChoice {
  column: Column;
  questions: SweepQuestion[];
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
  const text = `The file has ${String(choice.length)} traces; “${column.name}” was taken. Is it the right one?`;
  const questions = choice.length === 1 ? [] : [{ about: 'trace', text, needsValue: false } as const];
  return { column, questions, notes };
}

/** Frequencies of each row in Hz; a unit glued to a number counts before that of the column. */
function frequenciesOf(column: Column, preamble: Preamble, table: Table, hints: SweepHints) {
  const named =
    hints.freqUnit ?? freqUnitIn(column.name) ?? preamble.freqUnit ?? freqUnitIn(table.headingLine ?? '');
  const glued = freqUnitOf(column.unit);
  const guess = guessFreqUnit(column.values[column.values.length - 1] ?? 0);
  const unit = glued ?? named ?? guess.unit;
  const factor = freqFactor(unit);
  const freqHz = new Float64Array(column.values.length);
  for (let row = 0; row < freqHz.length; row += 1) {
    const own = column.isUniform ? null : freqUnitOf(column.unitAt(row));
    freqHz[row] = (column.values[row] ?? NaN) * (own === null ? factor : freqFactor(own));
  }
  return {
    ...{ unit, freqHz },
    question: glued === null && named === null ? guess.question : null,
    resolutionHz: resolutionOf(column, table) * factor,
  };
}

/** The step in which the numbers of a column are written: 0.001 for three decimals. */
function resolutionOf({ index }: Column, { firstLines, dialect }: Table): number {
  const steps = firstLines.map((line) => {
    const cell = splitLine(line, dialect)[index] ?? '';
    if (numberCell(cell, dialect.decimal) === null) return 1;
    const [, decimals = '', power = '0'] = /^[^.,]*(?:[.,](\d*))?(?:e([+-]?\d+))?/i.exec(cell) ?? [];
    return 10 ** (Number(power) - decimals.length);
  });
  return Math.min(1, ...steps);
}

/** Reads columns of frequency and level, with any others beside them. */
export function readColumnFile(table: Table, preamble: Preamble, hints: SweepHints): DraftResult {
  const columns = readColumns(table);
  const freq = frequencyColumn(columns, hints);
  if (freq === null) return readStartStop(table, columns, preamble, hints);
  const chosen = chooseLevel(
    columns.filter((column) => column !== freq && !(column.index < freq.index && isIndex(column))),
    hints,
  );
  if (chosen === null) {
    return { ok: false, reason: 'The file has a frequency but no level. Export the trace with its levels.' };
  }
  const { column, notes, questions } = chosen;
  const levels = gluedLevels(column);
  if (!levels.ok) return levels;
  const { unit, freqHz, question, resolutionHz } = frequenciesOf(freq, preamble, table, hints);
  const repeats =
    table.heading !== null && columns.some((each) => each !== column && each.name === column.name);
  return {
    ok: true,
    draft: {
      form: 'columns',
      columns: columns.map(({ name }) => name),
      freqColumn: freq.index,
      levelColumn: column.index,
      freqHz,
      resolutionHz,
      level: levels.level,
      freqUnit: unit,
      levelUnit:
        levels.unit ?? levelUnitIn(column.name) ?? preamble.levelUnit ?? levelUnitIn(table.headingLine ?? ''),
      calibratedForm: true,
      questions: [
        ...(question === null
          ? []
          : [{ about: 'frequency unit', text: question, needsValue: false } as const]),
        ...questions,
      ],
      notes: [
        ...notes,
        ...(repeats
          ? [`More than one column is called “${column.name}”; column ${String(column.index + 1)} was taken.`]
          : []),
      ],
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
  const points = table.rows;
  if (startHz === null || stopHz === null || !(stopHz > startHz)) {
    return {
      ok: false,
      reason:
        'No column rises as a frequency does, and the file does not say where it starts and stops. Export the trace with its frequencies, lowest first.',
    };
  }
  if (bins !== null && bins !== points) {
    return {
      ok: false,
      reason: `The file announces ${String(bins)} points and holds ${String(points)}. Export the trace again, all of it.`,
    };
  }
  // Level and phase alternate where the file has twice as many columns as traces.
  const pairs = preamble.traces > 0 && table.width === 2 * preamble.traces;
  const chosen = chooseLevel(pairs ? columns.filter((column) => column.index % 2 === 0) : columns, hints);
  if (chosen === null) {
    return { ok: false, reason: 'The file has no level. Export the trace with its levels.' };
  }
  const { column, notes, questions } = chosen;
  const levels = gluedLevels(column);
  if (!levels.ok) return levels;
  const step = (stopHz - startHz) / (points - 1);
  return {
    ok: true,
    draft: {
      form: 'start and stop',
      columns: columns.map(({ name }) => name),
      freqColumn: null,
      levelColumn: column.index,
      freqHz: Float64Array.from({ length: points }, (_, index) => startHz + index * step),
      resolutionHz: 0,
      level: levels.level,
      freqUnit: 'Hz',
      levelUnit: levels.unit ?? levelUnitIn(column.name) ?? preamble.levelUnit,
      calibratedForm: true,
      questions,
      notes: [
        ...notes,
        'The file has no frequency column; the frequencies were rebuilt from its start, stop and number of points.',
        ...(pairs ? ['Each trace has a level and a phase; the phases were left out.'] : []),
      ],
    },
  };
}
