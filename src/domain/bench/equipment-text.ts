import { formatFrequency, formatNumber } from './format';
import type { InstrumentSpec, PathSpec } from './types';

/** `checked against the works' reference, 1 March 2027`: the grade as a certificate words it. */
export function gradeText({ grade, checkedAgainst }: InstrumentSpec): string {
  if (grade === 'accredited') return 'accredited';
  if (grade === 'checked') return `checked against ${checkedAgainst ?? 'another'}`;
  return 'unchecked: specification alone';
}

/** When the calibration is due, and whether it is overdue. @param today ISO day */
export function calibrationText({ calibration }: InstrumentSpec, today: string): string {
  if (calibration === null) return 'none';
  return calibration.dueOn < today ? `overdue since ${calibration.dueOn}` : `due ${calibration.dueOn}`;
}

/** The parts in order. */
export function partsText({ parts }: PathSpec): string {
  return parts.length === 0 ? 'straight in' : parts.map(({ name }) => name).join(', ');
}

/** The loss of the whole path where its tables begin, as an idea of it. */
export function lossText({ parts }: PathSpec): string {
  const first = Math.max(0, ...parts.map(({ loss }) => loss[0]?.[0] ?? 0));
  const lossDb = parts.reduce((sum, { loss }) => sum + (loss[0]?.[1] ?? 0), 0);
  return parts.length === 0 ? '0 dB' : `${formatNumber(lossDb, 1)} dB from ${formatFrequency(first)}`;
}
