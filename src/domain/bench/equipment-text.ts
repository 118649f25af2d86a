import { formatFrequency, formatNumber, formatPower } from './format';
import type { InstrumentSpec, PathPart, PathSpec } from './types';

/** `checked against the works' reference, 1 March 2027`: the grade as a certificate words it. */
export function gradeText({ grade, checkedAgainst }: InstrumentSpec): string {
  if (grade === 'accredited') return 'accredited';
  if (grade === 'checked') return `checked against ${checkedAgainst ?? 'another'}`;
  return 'unchecked: specification alone';
}

const unitWords = { dB: 'dB', percent: '%', ppm: 'ppm', Hz: 'Hz', unit: 'of the unit' } as const;

/** `±0.09 dB (k = 2), by Northmoor Laboratory, no. 4711`: what a calibration says, without its days. */
export function calibrationWords({ calibration }: InstrumentSpec): string {
  if (calibration === null) return 'none';
  const { expanded, unit, k, laboratory, certificateNumber } = calibration;
  return [
    `±${String(expanded)} ${unitWords[unit]} (k = ${String(k)})`,
    ...(laboratory === null ? [] : [`by ${laboratory}`]),
    ...(certificateNumber === null ? [] : [`no. ${certificateNumber}`]),
  ].join(', ');
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

/** Which way a path leads. */
export const directionWords: Readonly<Record<PathSpec['direction'], string>> = {
  to_instrument: 'from the unit to the instrument',
  from_generator: 'from a generator to the unit',
};

/** `39.80 to 40.05 dB, 1 MHz to 150 MHz`: what a part's table says, and over which span. */
export function lossSpanText({ loss }: Pick<PathPart, 'loss'>): string {
  const losses = loss.map(([, lossDb]) => lossDb);
  const [least, most] = [Math.min(...losses), Math.max(...losses)].map((lossDb) => formatNumber(lossDb, 2));
  const [first, last] = [loss[0], loss.at(-1)];
  if (first === undefined || last === undefined) return 'no table';
  const span =
    first === last
      ? formatFrequency(first[0])
      : `${formatFrequency(first[0])} to ${formatFrequency(last[0])}`;
  return `${least === most ? String(least) : `${String(least)} to ${String(most)}`} dB, ${span}`;
}

/** What a part stands. */
export function ratingText({ ratingW }: Pick<PathPart, 'ratingW'>): string {
  return ratingW === null ? 'not stated' : formatPower(ratingW);
}
