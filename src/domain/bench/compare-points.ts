import { formatNumber, formatValue } from './format';
import type { Quantity } from './quantities';
import type { BandKey, Verdict } from './types';

/** A point of one run, as it stands or as a closed run keeps it. */
export interface ComparedPoint {
  quantity: Quantity;
  band: BandKey | null;
  freqHz: number | null;
  verdict: Verdict;
  /** At the unit, in the unit of the quantity. */
  value: number | null;
  /** Readings that counted. */
  n: number;
  lower: number | null;
  upper: number | null;
}

/** The same point in two runs; null where a run's plan has not got it. */
export interface PointPair {
  quantity: Quantity;
  band: BandKey | null;
  freqHz: number | null;
  before: ComparedPoint | null;
  after: ComparedPoint | null;
  /** From before to after, in words: `+0.42 dB`; null where one of them has no value. */
  change: string | null;
}

/**
 * Puts the points of two runs beside each other by quantity, band and test frequency, in the order of the later run;
 * what only the earlier run had comes last.
 */
export function comparePoints(
  before: readonly ComparedPoint[],
  after: readonly ComparedPoint[],
): PointPair[] {
  const earlier = new Map(before.map((point) => [keyOf(point), point]));
  const later = new Set(after.map(keyOf));
  return [
    ...after.map((point) => pairOf(earlier.get(keyOf(point)) ?? null, point)),
    ...before.filter((point) => !later.has(keyOf(point))).map((point) => pairOf(point, null)),
  ];
}

function keyOf({ quantity, band, freqHz }: ComparedPoint): string {
  return JSON.stringify([quantity.key, band, freqHz]);
}

function pairOf(before: ComparedPoint | null, after: ComparedPoint): PointPair;
function pairOf(before: ComparedPoint, after: null): PointPair;
function pairOf(before: ComparedPoint | null, after: ComparedPoint | null): PointPair {
  const either = after ?? before;
  if (either === null) throw new Error('A pair of no points.');
  const { quantity, band, freqHz } = either;
  const [from, to] = [before?.value ?? null, after?.value ?? null];
  return {
    ...{ quantity, band, freqHz, before, after },
    change: from === null || to === null ? null : changeInWords(quantity, from, to),
  };
}

/** How a value changed: powers in dB, as the trade compares them, the rest in their own unit. */
export function changeInWords(quantity: Quantity, from: number, to: number): string {
  if (quantity.unit === '') return from === to ? 'no change' : `now ${formatValue(to, quantity)}`;
  if (quantity.unit === 'W') {
    if (!(from > 0 && to > 0)) return signed(to - from, formatValue(Math.abs(to - from), quantity));
    const changeDb = 10 * Math.log10(to / from);
    return signed(changeDb, `${formatNumber(Math.abs(changeDb), 2)} dB`);
  }
  if (quantity.unit === 'dBc' || quantity.unit === 'dBm' || quantity.unit === 'dB') {
    return signed(to - from, `${formatNumber(Math.abs(to - from), 1)} dB`);
  }
  if (quantity.unit === 'K') return signed(to - from, `${formatNumber(Math.abs(to - from), 1)} K`);
  return signed(to - from, formatValue(Math.abs(to - from), quantity).replace(/^\+/, ''));
}

function signed(change: number, size: string): string {
  if (Number(/[\d.]+/.exec(size)?.[0] ?? '0') === 0) return 'no change';
  return `${change < 0 ? '\u2212' : '+'}${size}`;
}
