import type { PointJudgement } from './judge-point';

/** A zone of the bar between two fractions of its length. */
export interface BarZone {
  kind: 'clear' | 'too_close' | 'over';
  from: number;
  to: number;
}

/** The drawn limit bar: everything in fractions 0 to 1 of its length, values rising to the right. */
export interface LimitBar {
  /** Values at the two ends, in the unit of the value. */
  min: number;
  max: number;
  zones: BarZone[];
  limits: { at: number; value: number; side: 'lower' | 'upper' }[];
  dot: number;
  /** Expanded uncertainty; null where it is not known. */
  whisker: { from: number; to: number } | null;
}

type Judged = Pick<PointJudgement, 'value' | 'low' | 'high' | 'lower' | 'upper' | 'guard' | 'uUnit'>;

interface Borders {
  value: number;
  /** Ends of the zone that is too close to call. */
  from: number;
  to: number;
}

/** A power's guard band is in dB and so not symmetric in W; a ratio's is in the dB of its value. */
function bordersOf(limit: number, guard: number, isPowerInW: boolean): Borders {
  if (!isPowerInW) return { value: limit, from: limit - guard, to: limit + guard };
  return { value: limit, from: limit * 10 ** (-guard / 10), to: limit * 10 ** (guard / 10) };
}

/**
 * Model of the limit bar of a judged point; null where there is no value or no limit to draw.
 * @param quantityUnit unit of the value; `W` has its guard band in dB
 */
export function limitBar(judged: Judged, quantityUnit: string): LimitBar | null {
  const { value } = judged;
  if (value === null || (judged.lower === null && judged.upper === null)) return null;
  const isPowerInW = quantityUnit === 'W' && judged.uUnit === 'dB';
  const lower = judged.lower === null ? null : bordersOf(judged.lower, judged.guard, isPowerInW);
  const upper = judged.upper === null ? null : bordersOf(judged.upper, judged.guard, isPowerInW);

  const marks = [value, judged.low ?? value, judged.high ?? value];
  for (const each of [lower, upper]) if (each !== null) marks.push(each.from, each.value, each.to);
  const smallest = Math.min(...marks);
  const largest = Math.max(...marks);
  const room = (largest - smallest || Math.abs(largest) || 1) * 0.25;
  const min = smallest - room;
  const max = largest + room;
  const at = (each: number): number => Math.min(1, Math.max(0, (each - min) / (max - min)));

  // With limits on both sides a wide guard band can leave nothing clear; the two bands then meet in the middle.
  const overlap = lower !== null && upper !== null && lower.to > upper.from;
  const middle = lower !== null && upper !== null ? (lower.value + upper.value) / 2 : 0;
  const lowerTo = lower === null ? min : overlap ? middle : lower.to;
  const upperFrom = upper === null ? max : overlap ? middle : upper.from;

  const zones: BarZone[] = [];
  const add = (kind: BarZone['kind'], from: number, to: number): void => {
    if (to > from) zones.push({ kind, from: at(from), to: at(to) });
  };
  if (lower !== null) {
    add('over', min, lower.from);
    add('too_close', lower.from, lowerTo);
  }
  add('clear', lowerTo, upperFrom);
  if (upper !== null) {
    add('too_close', upperFrom, upper.to);
    add('over', upper.to, max);
  }

  const limits: LimitBar['limits'] = [];
  if (lower !== null) limits.push({ at: at(lower.value), value: lower.value, side: 'lower' });
  if (upper !== null) limits.push({ at: at(upper.value), value: upper.value, side: 'upper' });
  const whisker =
    judged.low === null || judged.high === null ? null : { from: at(judged.low), to: at(judged.high) };
  return { min, max, zones, limits, dot: at(value), whisker };
}
