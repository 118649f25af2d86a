import { formatFrequency, formatNumber } from './format';

/** What a loss table says, or why it cannot be used: a sentence that names the line. */
export type LossReading =
  | {
      ok: true;
      /** Rows of [freqHz, lossDb], rising in frequency; empty where the file says nothing of a loss. */
      rows: [number, number][];
      /** Largest standing wave ratio over the file; null where the file says nothing of it. */
      vswr: number | null;
      /** What has to be known about the reading, as a sentence; empty where there is nothing. */
      note: string;
    }
  | { ok: false; reason: string };

export type FreqUnit = 'Hz' | 'kHz' | 'MHz' | 'GHz';

export const FREQ_UNITS: Readonly<Record<FreqUnit, number>> = { Hz: 1, kHz: 1e3, MHz: 1e6, GHz: 1e9 };

/** More rows than any analyser gives for a pad or a cable. */
const MAX_ROWS = 2001;
/** A passive part may seem to gain this much, dB: that is how well a loss near nothing is measured. */
const SEEMING_GAIN_DB = 0.1;
const MAX_LOSS_DB = 200;

/** The unit as the trade spells it, whatever its capitals; undefined for another word. */
export function freqUnitOf(word: string): FreqUnit | undefined {
  const lower = word.toLowerCase();
  return (['Hz', 'kHz', 'MHz', 'GHz'] as const).find((unit) => unit.toLowerCase() === lower);
}

/**
 * What a row of a loss table breaks, as a sentence that names its line; null where it is in order.
 * @param before frequency of the row before it, Hz; 0 for the first
 */
export function rowProblem(
  line: number,
  freqHz: number,
  lossDb: number,
  before: number,
  count: number,
): string | null {
  if (!Number.isFinite(freqHz) || !Number.isFinite(lossDb)) {
    return `Line ${line} has a number that is too large or none at all.`;
  }
  if (freqHz <= 0) return `Line ${line} has a frequency of 0 or below.`;
  if (freqHz === before) {
    return `Line ${line} repeats ${formatFrequency(freqHz)}: keep one row for each frequency.`;
  }
  if (freqHz < before) {
    return `Line ${line} goes back to ${formatFrequency(freqHz)} after ${formatFrequency(before)}: frequencies rise from row to row.`;
  }
  if (lossDb < -SEEMING_GAIN_DB) {
    return `Line ${line} has a loss of ${formatNumber(lossDb, 2)} dB, which is a gain. A loss is written positive; a column of S21 in dB is headed S21.`;
  }
  if (lossDb > MAX_LOSS_DB) {
    return `Line ${line} has a loss of ${formatNumber(lossDb, 0)} dB, more than can be measured.`;
  }
  if (count > MAX_ROWS) return `The table has more than ${MAX_ROWS} rows: export fewer points.`;
  return null;
}
