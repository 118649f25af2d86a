import { formatFrequency } from '~/domain/bench/format';
import { numberCell, splitLine } from './cells';
import type { Dialect } from './cells';
import type { DraftResult } from './drafts';
import { MAX_POINTS } from './types';

const START = /^\s*"?\d{4}-\d{2}-\d{2}"?\s*([,;\t])\s*"?\d{2}:\d{2}(:\d{2})?(\.\d+)?"?\s*[,;\t]/;

/** Dialect of a file of row blocks (date, time, low, high, step, samples, levels…); null where it is none. */
export function rowBlockDialect(sample: readonly string[]): Dialect | null {
  const filled = sample.filter((line) => line.trim() !== '' && !line.startsWith('#'));
  const matches = filled.map((line) => START.exec(line)).filter((match) => match !== null);
  if (matches.length === 0 || matches.length < filled.length * 0.9) return null;
  const mark = matches[0]?.[1];
  return { separator: mark === '\t' ? 'tab' : mark === ';' ? ';' : ',', decimal: '.' };
}

/**
 * Reads row blocks as software receivers write them. Blocks are put in order of frequency; of several sweeps
 * the highest level of each bin is kept. Their level is not calibrated.
 */
export function readRowBlocks(lines: readonly string[], dialect: Dialect): DraftResult {
  const bins = new Map<number, number>();
  let sorted = true;
  let seen = 0;
  let passes = 1;
  let lastLow = -Infinity;
  for (const [index, line] of lines.entries()) {
    if (line.trim() === '' || line.startsWith('#')) continue;
    const cells = splitLine(line, dialect);
    const numbers = cells.slice(2).map((cell) => numberCell(cell, dialect.decimal)?.value ?? NaN);
    const [low, high, step, , ...levels] = numbers;
    const where = `Line ${String(index + 1)}`;
    if (low === undefined || high === undefined || step === undefined || levels.length === 0) {
      return { ok: false, reason: `${where} breaks off before its levels.` };
    }
    if (!(step > 0) || !(high > low) || low < 0) {
      return { ok: false, reason: `${where} does not run from a low to a high frequency in steps.` };
    }
    if (levels.some((level) => Number.isNaN(level))) {
      return { ok: false, reason: `${where} has a level that is not a number.` };
    }
    // Such files often repeat the last level of a block; bins at the upper edge belong to the next block.
    const count = Math.min(levels.length, Math.max(1, Math.round((high - low) / step)));
    for (let bin = 0; bin < count; bin += 1) {
      const freqHz = low + bin * step;
      const level = levels[bin] ?? NaN;
      bins.set(freqHz, Math.max(bins.get(freqHz) ?? -Infinity, level));
    }
    if (bins.size > MAX_POINTS)
      return { ok: false, reason: 'The file has more than 200,000 points: sweep a smaller span.' };
    if (low < lastLow) {
      sorted = false;
      passes += 1;
    }
    lastLow = low;
    seen += 1;
  }
  if (seen === 0) return { ok: false, reason: 'The file has no blocks of levels.' };
  const ordered = [...bins].sort(([a], [b]) => a - b);
  const notes = [
    `${String(seen)} row blocks in ${String(passes)} ${passes === 1 ? 'pass' : 'passes'}${sorted ? '' : ', put in order of frequency'}; ` +
      'the highest level of each bin was kept.',
    'The level of such a file is not calibrated: no verdict can rest on it.',
  ];
  const first = ordered[0]?.[0] ?? 0;
  notes.push(`The lowest bin is at ${formatFrequency(first)}.`);
  return {
    ok: true,
    draft: {
      form: 'row blocks',
      columns: ['date', 'time', 'low', 'high', 'step', 'samples', 'levels'],
      freqColumn: null,
      levelColumn: null,
      freqHz: Float64Array.from(ordered, ([freqHz]) => freqHz),
      resolutionHz: 0,
      level: Float64Array.from(ordered, ([, level]) => level),
      freqUnit: 'Hz',
      levelUnit: null,
      calibratedForm: false,
      questions: [],
      notes,
    },
  };
}
