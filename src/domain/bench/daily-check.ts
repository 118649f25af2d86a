import { listed } from '~/lib/listed';
import { formatNumber, formatValue } from './format';
import { judgePoint } from './judge-point';
import type { Quantity } from './quantities';
import type { PathSpec, Reading } from './types';

/** A kept unit or source, and what it has to read. */
export interface Reference {
  quantity: Quantity;
  freqHz: number | null;
  /** At the unit, in the unit of the quantity inside. */
  nominal: number;
  /** Half-width of the band: dB for powers and levels, else in the unit of the quantity inside. */
  tolerance: number;
}

const LEVEL_UNITS: ReadonlySet<Quantity['unit']> = new Set(['W', 'dBc', 'dBm', 'dB']);

/** Whether a reference may be kept for the quantity: it is read by an instrument, and its product is known. */
export function mayBeChecked({ formula, format, key }: Quantity): boolean {
  return formula === null && format !== 'yes_no' && key !== 'spurious';
}

/**
 * What follows at the unit from what the meter shows, by the same correction as in a run.
 * @param atMeter in the unit of the quantity
 */
export function checkValue(
  { quantity, freqHz }: Pick<Reference, 'quantity' | 'freqHz'>,
  atMeter: number,
  path: PathSpec | null,
): { ok: true; value: number } | { ok: false; reason: string } {
  const reading: Reading = {
    ...{ quantityKey: quantity.key, band: null, freqHz, enteredText: '', enteredUnit: '' },
    ...{ value: atMeter, voided: false },
  };
  // A point without limits: the correction alone is asked for, and no verdict comes of it.
  const { value, stopped } = judgePoint(
    {
      ...{ id: 0, position: 0, quantity, band: null, freqHz, lower: null, upper: null },
      ...{
        limitRule: 'fixed',
        decision: 'simple',
        required: true,
        condition: null,
        supplyV: null,
        method: '',
      },
    },
    [reading],
    {
      ...{ destinationCountry: null, region: null, supplyV: null, ambientC: null, outputStage: null },
      ...{ testedOn: '', instrument: null, path, carrier: null, rule: null },
    },
  );
  return value === null || !Number.isFinite(value)
    ? { ok: false, reason: stopped ?? 'The reading is not a usable number.' }
    : { ok: true, value };
}

/** How far a value lies from the nominal one: dB for powers and levels, else in the unit of the quantity. */
export function deviationOf({ quantity, nominal }: Reference, value: number): number {
  return quantity.unit === 'W' ? 10 * Math.log10(value / nominal) : value - nominal;
}

/** Inside its band, the edges included. */
export function isGood({ tolerance }: Reference, deviation: number): boolean {
  return Math.abs(deviation) <= tolerance;
}

/** `+0.12 dB`, `−3 Hz`: a deviation, or with `±` a tolerance, as it is said. */
export function deviationText({ quantity }: Pick<Reference, 'quantity'>, deviation: number): string {
  const size = Math.abs(deviation);
  const text = LEVEL_UNITS.has(quantity.unit)
    ? `${formatNumber(size, 2)} dB`
    : quantity.unit === 'K'
      ? `${formatNumber(size, 1)} K`
      : formatValue(size, quantity).replace('+', '');
  // What is nothing in the digits shown has no sign.
  if (!/[1-9]/.test(text)) return text;
  return `${deviation > 0 ? '+' : '\u2212'}${text}`;
}

const FAR_OFF = 10;

/** Asks about a value that is rather a slip of the hand than a drift of the bench; null where it is neither. */
export function checkQuestion(reference: Reference, deviation: number): string | null {
  if (Math.abs(deviation) <= FAR_OFF * reference.tolerance) return null;
  return `That is off by ${deviationText(reference, deviation)}, more than ten times its band. Is it meant as typed?`;
}

/** A reference in use with its newest check, as the closing of a run asks for it. */
export interface CheckedReference {
  number: string;
  name: string;
  newest: { id: number; day: string; isGood: boolean; explained: boolean; deviation: string } | null;
}

/** What the daily checks say on a day. */
export interface CheckState<R extends CheckedReference = CheckedReference> {
  /** Not measured on the day; said, and nothing more. */
  missingToday: R[];
  /** The newest check is outside its band and nobody has said why: nothing can be closed. */
  bad: R[];
}

/** Sorts the references in use. A works without any is never asked. @param day ISO day, in the zone of the works */
export function checkState<R extends CheckedReference>(references: readonly R[], day: string): CheckState<R> {
  return {
    missingToday: references.filter(({ newest }) => newest === null || newest.day < day),
    bad: references.filter(({ newest }) => newest !== null && !newest.isGood && !newest.explained),
  };
}

/** Why no run can be closed, naming the references; null where nothing stands against it. */
export function closingProblem({ bad }: CheckState): string | null {
  if (bad.length === 0) return null;
  const names = listed(
    bad.map(({ number, name, newest }) => `${number} (${name}, off by ${newest?.deviation ?? ''})`),
  );
  return `The check of ${names} is outside its band. Find out why and explain it on the page of daily checks; until then no run can be closed.`;
}

/** A closed run that an instrument was used in. */
interface ClosedRun {
  id: number;
  closedAt: Date;
}

/**
 * Which runs a bad check casts doubt on: every one closed since the reference was last found good (or, where it
 * never was, since it is kept), but for those that are flagged already since then.
 *
 * @param runs closed runs with a reading by the reference's instrument that counts
 */
export function runsInDoubt<R extends ClosedRun>(
  runs: readonly R[],
  {
    lastGoodAt,
    keptSince,
    flagged,
  }: { lastGoodAt: Date | null; keptSince: Date; flagged: ReadonlySet<number> },
): R[] {
  const since = (lastGoodAt ?? keptSince).getTime();
  return runs.filter(({ id, closedAt }) => closedAt.getTime() > since && !flagged.has(id));
}
