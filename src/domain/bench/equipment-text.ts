import { formatDay, isDay } from '~/lib/dates';
import { formatFrequency, formatNumber, formatPower } from './format';
import { pathLoss } from './paths';
import type { InstrumentSpec, PathPart, PathSpec } from './types';

/** `checked against MM-1, 1 March 2027`: the grade as the pages word it. */
export function gradeText({ grade, checkedAgainst }: InstrumentSpec): string {
  if (grade === 'accredited') return 'accredited';
  if (grade === 'checked') {
    const against = (checkedAgainst ?? 'another').replace(/\d{4}-\d{2}-\d{2}$/, (day) =>
      isDay(day) ? formatDay(day) : day,
    );
    return `checked against ${against}`;
  }
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
  return parts.length === 0 ? 'straight in' : parts.map(({ name }) => name).join('; ');
}

/** The loss of the whole path at the lowest frequency that all its tables have, as an idea of it. */
export function lossText(path: PathSpec): string {
  if (path.parts.length === 0) return '0 dB';
  const first = Math.max(...path.parts.map(({ loss }) => loss[0]?.[0] ?? 0));
  const loss = pathLoss(path, first);
  return loss.ok
    ? `${formatNumber(loss.lossDb, 1)} dB at ${formatFrequency(first)}`
    : 'none: the tables do not meet';
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
