import { formatFrequency } from '~/domain/bench/format';
import { findDialect, splitLine } from './cells';
import type { Dialect } from './cells';
import { readColumnFile } from './columns';
import { decodeText } from './decode';
import type { Draft, DraftResult } from './drafts';
import { ANALYSER_OHM, toDbm } from './level-units';
import { isMatrix, readMatrix } from './matrix';
import { checkFrequencies } from './order-of-points';
import { readPreamble } from './preamble';
import type { Preamble } from './preamble';
import { readRowBlocks, rowBlockDialect } from './row-blocks';
import { findTable } from './table';
import type { Table } from './table';
import { MAX_POINTS } from './types';
import type { LevelUnit, SweepHints, SweepQuestion, SweepResult, Understood } from './types';

const TOO_MANY = 'The file has more than 200,000 points: sweep a smaller span.';
const COMMAS_TWICE =
  'Commas stand both in the numbers and between them: export with semicolons or a decimal point.';
/** Lines that are looked at from the start, the middle and the end, */
const SAMPLE_LINES = 100;
/** fewer where they are long, but never fewer than this. */
const SAMPLE_CHARS = 200_000;
const FEWEST_LINES = 5;

/** Lines of a text from a place on where a line begins. */
function linesFrom(text: string, start: number): string[] {
  const lines: string[] = [];
  for (let at = start; at < text.length && lines.length < SAMPLE_LINES;) {
    if (at - start > SAMPLE_CHARS && lines.length >= FEWEST_LINES) break;
    const newline = text.indexOf('\n', at);
    const end = newline < 0 ? text.length : newline;
    lines.push(text.slice(at, text[end - 1] === '\r' ? end - 1 : end));
    at = end + 1;
  }
  return lines;
}

/** Lines from the start, the middle and the end; enough to see how a file is written. */
function sampleOf(text: string): string[] {
  const nearEnd = text.length - SAMPLE_CHARS / 10;
  const places = [0, text.length >> 1, Math.max(text.length >> 1, nearEnd)];
  const starts = new Set(places.map((place) => (place === 0 ? 0 : text.indexOf('\n', place) + 1)));
  return [...starts].flatMap((start, index) => (index > 0 && start === 0 ? [] : linesFrom(text, start)));
}

type Levels = { ok: true; level: Float64Array } | { ok: false; reason: string };

function levelsInDbm(level: Float64Array, unit: LevelUnit | null): Levels {
  if (unit === null || unit === 'dB' || unit === 'dBm') return { ok: true, level };
  const converted = new Float64Array(level.length);
  for (let index = 0; index < level.length; index += 1) {
    const dbm = toDbm(level[index] ?? NaN, unit);
    if (dbm === null || !Number.isFinite(dbm)) {
      return {
        ok: false,
        reason: `Point ${String(index + 1)} has a level of zero or below in ${unit}. Export the trace in dBm.`,
      };
    }
    converted[index] = dbm;
  }
  return { ok: true, level: converted };
}

function levelQuestions(unit: LevelUnit | null, draft: Draft): SweepQuestion[] {
  if (!draft.calibratedForm || (unit !== null && unit !== 'dB')) return [];
  const text =
    unit === 'dB'
      ? 'The levels are dB, a ratio as a network analyser shows it, not dBm. What is 0 dB?'
      : 'The file does not name the unit of the level. Is it dBm, or dB as a network analyser shows it? No verdict can rest on it until that is said.';
  return [{ about: 'level unit', text, needsValue: true }];
}

/** RBW and detector, where the file does not say them: they tell whether a line can fall between two points. */
function bandwidthQuestions(
  stepHz: number,
  rbwHz: number | null,
  detector: string | null,
  draft: Draft,
): SweepQuestion[] {
  if (!draft.calibratedForm) return [];
  const questions: SweepQuestion[] = [];
  if (rbwHz === null) {
    const text = 'The file does not say its resolution bandwidth. What was it?';
    questions.push({ about: 'bandwidth', text, needsValue: true });
  }
  if (detector === null) {
    const text =
      rbwHz !== null && stepHz > rbwHz
        ? `Points lie ${formatFrequency(stepHz)} apart, wider than the resolution bandwidth of ${formatFrequency(rbwHz)}. Was it a peak detector?`
        : `The file does not say its detector; points lie ${formatFrequency(stepHz)} apart. Was it a peak detector?`;
    questions.push({ about: 'detector', text, needsValue: true });
  }
  return questions;
}

function notesOf(draft: Draft, unit: LevelUnit | null): string[] {
  const isVoltage = unit !== null && unit !== 'dBm' && unit.endsWith('V');
  if (!isVoltage) return draft.notes;
  return [
    ...draft.notes,
    `The levels are voltages: they were taken as rms across ${String(ANALYSER_OHM)} Ω.`,
  ];
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
  if (points > MAX_POINTS) return { ok: false, reason: TOO_MANY };
  const checked = checkFrequencies(draft.freqHz, draft.resolutionHz);
  if (!checked.ok) return checked;
  const { stepHz } = checked;
  const levelUnit = hints.levelUnit ?? draft.levelUnit;
  const levels = levelsInDbm(draft.level, levelUnit);
  if (!levels.ok) return levels;
  const rbwHz = hints.rbwHz ?? preamble?.rbwHz ?? null;
  const detector = hints.detector ?? preamble?.detector ?? null;
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
      stepHz,
      rbwHz,
      detector,
      referenceDbm: preamble?.referenceDbm ?? null,
      levelCalibrated: draft.calibratedForm && levelUnit !== null && levelUnit !== 'dB',
    },
    questions: [
      ...draft.questions,
      ...levelQuestions(levelUnit, draft),
      ...bandwidthQuestions(stepHz, rbwHz, detector, draft),
    ],
    notes: notesOf(draft, levelUnit),
    points: { freqHz: draft.freqHz, level: levels.level },
  };
}

/**
 * Whether the decimal comma was also used between the cells: a heading with half as many names as the rows have
 * cells, or rows of whole numbers in which only the first part of a number has a sign.
 */
function hasCommasTwice(table: Table): boolean {
  const { dialect, width, firstLines } = table;
  if (dialect.separator !== ',') return false;
  // The line above the points may hold names of columns in a separator of its own.
  const heading = table.heading ?? table.preamble.findLast((line) => line.trim() !== '')?.split(',') ?? null;
  const names = heading?.filter((name) => name !== '').length ?? 0;
  if (names >= 2 && width === 2 * names) return true;
  if (width !== 4 || table.heading !== null) return false;
  return firstLines.every((line) => {
    const cells = splitLine(line, dialect);
    return cells[2]?.startsWith('-') === true && cells.every((cell) => /^-?\d+$/.test(cell));
  });
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
  const text = withPlainLineEnds(decoded.text);
  const sample = sampleOf(text);

  const blocks = rowBlockDialect(sample);
  if (blocks !== null) {
    const read = readRowBlocks(text.split(/\r?\n/), blocks);
    return read.ok ? finish(read.draft, null, blocks, decoded.encoding, hints) : read;
  }

  const dialect = findDialect(sample);
  if (dialect === null) {
    return {
      ok: false,
      reason: 'The file has no rows of frequency and level. Export the trace as CSV, not the screen.',
    };
  }
  const found = findTable(text, sample, dialect);
  if (!found.ok) return found;
  const { table } = found;
  if (table.rows > MAX_POINTS) return { ok: false, reason: TOO_MANY };
  if (hasCommasTwice(table)) return { ok: false, reason: COMMAS_TWICE };
  const preamble = readPreamble(table.preamble);
  const read: DraftResult = isMatrix(table)
    ? readMatrix(table, hints)
    : readColumnFile(table, preamble, hints);
  if (!read.ok) return read;
  if (table.blocks > 1) {
    const text = `The file holds ${String(table.blocks)} traces below one another; one was taken. Is it the right one?`;
    read.draft.questions.push({ about: 'trace', text, needsValue: false });
  }
  return finish(read.draft, preamble, dialect, decoded.encoding, hints);
}

/** The text without byte-order mark; lines that old systems ended by a carriage return alone end by a line feed. */
function withPlainLineEnds(text: string): string {
  const bare = text.startsWith('\ufeff') ? text.slice(1) : text;
  return /\r(?!\n)/.test(bare) ? bare.replace(/\r\n?/g, '\n') : bare;
}
