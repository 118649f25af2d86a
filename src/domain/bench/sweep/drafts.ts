import type { FreqUnit, LevelUnit, SweepQuestion, Understood } from './types';

/** A sweep before its frequencies are checked and its level is turned into dBm. */
export interface Draft {
  form: Understood['form'];
  columns: string[];
  freqColumn: number | null;
  levelColumn: number | null;
  freqHz: Float64Array;
  /** The step in which the frequencies are written, Hz. */
  resolutionHz: number;
  /** As in the file. */
  level: Float64Array;
  freqUnit: FreqUnit;
  levelUnit: LevelUnit | null;
  /** False where the kind of file says that its level is not to be trusted. */
  calibratedForm: boolean;
  questions: SweepQuestion[];
  notes: string[];
}

/** A draft, or a sentence why there is none. */
export type DraftResult = { ok: true; draft: Draft } | { ok: false; reason: string };

/**
 * Frequency unit where the file names none: a value in the millions can only be Hz at the bench; anything else
 * is a guess that the person is asked to confirm.
 */
export function guessFreqUnit(highest: number): { unit: FreqUnit; question: string | null } {
  if (highest > 3e6) return { unit: 'Hz', question: null };
  const unit: FreqUnit = highest <= 3000 ? 'MHz' : 'kHz';
  return {
    unit,
    question: `The file does not name the unit of the frequency. Is ${String(highest)} meant as ${unit}?`,
  };
}
