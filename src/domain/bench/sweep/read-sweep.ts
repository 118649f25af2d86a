import { formatFrequency } from '~/domain/bench/format';
import { findDialect } from './cells';
import type { Dialect } from './cells';
import { readColumnFile } from './columns';
import { decodeText } from './decode';
import type { Draft, DraftResult } from './drafts';
import { toDbm } from './level-units';
import { isMatrix, readMatrix } from './matrix';
import { readPreamble } from './preamble';
import type { Preamble } from './preamble';
import { readRowBlocks, rowBlockDialect } from './row-blocks';
import { findTable } from './table';
import { MAX_POINTS } from './types';
import type { LevelUnit, SweepHints, SweepResult, Understood } from './types';

/** Lines from the start, the middle and the end; enough to see how a file is written. */
function sampleOf(lines: readonly string[]): string[] {
  const part = 300;
  if (lines.length <= 3 * part) return [...lines];
  const middle = Math.floor(lines.length / 2);
  return [...lines.slice(0, part), ...lines.slice(middle, middle + part), ...lines.slice(-part)];
}

function median(values: Float64Array): number {
  const sorted = values.slice().sort();
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
}

/** Why the frequencies are no sweep; null where they are. */
function frequencyProblem(freqHz: Float64Array): string | null {
  if (freqHz.length < 3) return 'The file has fewer than three points.';
  const steps = new Float64Array(freqHz.length - 1);
  for (let index = 0; index < freqHz.length; index += 1) {
    const here = freqHz[index] ?? NaN;
    if (!Number.isFinite(here) || here < 0) return `Point ${String(index + 1)} has no usable frequency.`;
    if (index === 0) continue;
    const before = freqHz[index - 1] ?? NaN;
    if (here <= before) {
      return (
        `The frequencies are not in order: point ${String(index + 1)} (${formatFrequency(here)}) does not lie above ` +
        `the one before it (${formatFrequency(before)}).`
      );
    }
    steps[index - 1] = here - before;
  }
  for (let index = 0; index < steps.length; index += 1) {
    // A wide step between narrow ones is a hole; steps that grow together are a logarithmic sweep.
    const here = steps[index] ?? 0;
    const around = Math.max(steps[index - 1] ?? 0, steps[index + 1] ?? 0);
    if (steps.length > 2 && here > 2.5 * around) {
      const from = formatFrequency(freqHz[index] ?? 0);
      return `Points are missing between ${from} and ${formatFrequency(freqHz[index + 1] ?? 0)}.`;
    }
  }
  return null;
}

function levelsInDbm(
  level: Float64Array,
  unit: LevelUnit | null,
): { ok: true; level: Float64Array } | { ok: false; reason: string } {
  if (unit === null || unit === 'dB') return { ok: true, level };
  const converted = new Float64Array(level.length);
  for (let index = 0; index < level.length; index += 1) {
    const dbm = toDbm(level[index] ?? NaN, unit);
    if (dbm === null || !Number.isFinite(dbm)) {
      return { ok: false, reason: `Point ${String(index + 1)} has a level of zero or below in ${unit}.` };
    }
    converted[index] = dbm;
  }
  return { ok: true, level: converted };
}

function levelQuestions(unit: LevelUnit | null, draft: Draft): string[] {
  if (!draft.calibratedForm) return [];
  if (unit === 'dB')
    return ['The levels are dB, a ratio as a network analyser shows it, not dBm. What is 0 dB?'];
  if (unit !== null) return [];
  return [
    'The file does not name the unit of the level. Is it dBm, or dB as a network analyser shows it? No verdict can rest on it until that is said.',
  ];
}

/** RBW and detector matter where a line can fall between two points. */
function bandwidthQuestions(stepHz: number, rbwHz: number | null, detector: string | null): string[] {
  const questions: string[] = [];
  if (rbwHz === null) questions.push('The file does not say its resolution bandwidth. What was it?');
  if (detector === null && (rbwHz === null || stepHz > rbwHz)) {
    const wider = rbwHz === null ? '' : `, wider than the resolution bandwidth of ${formatFrequency(rbwHz)}`;
    questions.push(`Points lie ${formatFrequency(stepHz)} apart${wider}. Was it a peak detector?`);
  }
  return questions;
}

/** Sets checks, units and questions that all forms share on a draft. */
function finish(
  draft: Draft,
  preamble: Preamble | null,
  dialect: Dialect,
  encoding: Understood['encoding'],
  hints: SweepHints,
): SweepResult {
  const points = draft.freqHz.length;
  if (points > MAX_POINTS)
    return { ok: false, reason: 'The file has more than 200,000 points: sweep a smaller span.' };
  const problem = frequencyProblem(draft.freqHz);
  if (problem !== null) return { ok: false, reason: problem };
  const levelUnit = hints.levelUnit ?? draft.levelUnit;
  const levels = levelsInDbm(draft.level, levelUnit);
  if (!levels.ok) return levels;
  const rbwHz = hints.rbwHz ?? preamble?.rbwHz ?? null;
  const detector = hints.detector ?? preamble?.detector ?? null;
  const steps = draft.freqHz.slice(1).map((freqHz, index) => freqHz - (draft.freqHz[index] ?? 0));
  return {
    ok: true,
    understood: {
      form: draft.form,
      columns: draft.columns,
      freqColumn: draft.freqColumn,
      levelColumn: draft.levelColumn,
      units: { freq: draft.freqUnit, level: levelUnit },
      separator: dialect.separator,
      decimal: dialect.decimal,
      encoding,
      points,
      spanHz: [draft.freqHz[0] ?? 0, draft.freqHz[points - 1] ?? 0],
      rbwHz,
      detector,
      referenceDbm: preamble?.referenceDbm ?? null,
      levelCalibrated: draft.calibratedForm && levelUnit !== null && levelUnit !== 'dB',
    },
    questions: [
      ...draft.questions,
      ...levelQuestions(levelUnit, draft),
      ...bandwidthQuestions(median(steps), rbwHz, detector),
    ],
    notes: draft.notes,
    points: { freqHz: draft.freqHz, level: levels.level },
  };
}

/** A heading with half as many cells as its rows: the decimal comma was also used between the cells. */
function commaTwice(heading: string[] | null, width: number, dialect: Dialect): boolean {
  const names = heading?.filter((name) => name !== '').length ?? 0;
  return dialect.separator === ',' && names >= 2 && width === 2 * names;
}

/**
 * Reads a spectrum file of any analyser and says what it understood; what it could not know it asks.
 * Frequencies come out in Hz and rising, levels in dBm where their unit is known. Refuses with a sentence what
 * is no sweep. Never throws, whatever the bytes.
 * @param hints what a person has answered or corrected
 */
export function readSweep(bytes: Uint8Array, hints: SweepHints = {}): SweepResult {
  const decoded = decodeText(bytes);
  if (!decoded.ok) return decoded;
  const lines = decoded.text.replace(/^\ufeff/, '').split(/\r\n|\n|\r/);
  const sample = sampleOf(lines);

  const blocks = rowBlockDialect(sample);
  if (blocks !== null) {
    const read = readRowBlocks(lines, blocks);
    return read.ok ? finish(read.draft, null, blocks, decoded.encoding, hints) : read;
  }

  const dialect = findDialect(sample);
  if (dialect === null) return { ok: false, reason: 'The file has no rows of frequency and level.' };
  const found = findTable(lines, sample, dialect);
  if (!found.ok) return found;
  const { table } = found;
  if (table.rows.length > MAX_POINTS) {
    return { ok: false, reason: 'The file has more than 200,000 points: sweep a smaller span.' };
  }
  // The line above the points may hold names of columns in a separator of its own.
  const headingAbove =
    table.heading ?? table.preamble.findLast((line) => line.trim() !== '')?.split(',') ?? null;
  if (commaTwice(headingAbove, table.width, dialect)) {
    return {
      ok: false,
      reason: 'Commas stand both in the numbers and between them: export with semicolons or a decimal point.',
    };
  }
  const preamble = readPreamble(table.preamble);
  const read: DraftResult = isMatrix(table)
    ? readMatrix(table, hints)
    : readColumnFile(table, preamble, hints);
  if (!read.ok) return read;
  if (table.blocks > 1) {
    read.draft.questions.push(
      `The file holds ${String(table.blocks)} traces below one another; one was taken. Is it the right one?`,
    );
  }
  return finish(read.draft, preamble, dialect, decoded.encoding, hints);
}
