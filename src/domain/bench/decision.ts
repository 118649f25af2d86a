import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import type { Decision, Verdict } from './types';

/**
 * Two doubles closer than this part of the larger are the same number: −43 − 0.8 need not be the double
 * nearest to −43.8. It is noise of the arithmetic, far below any digit that an instrument shows.
 */
const SAME = 1e-12;

function atMost(a: number, b: number): boolean {
  return a <= b + SAME * Math.max(Math.abs(a), Math.abs(b));
}

/** What is decided on: value, expanded uncertainty and limits in one unit. */
interface DecisionInput {
  value: number;
  /** Expanded uncertainty, 0 or more. */
  U: number;
  lower: number | null;
  upper: number | null;
  decision: Decision;
}

/** Guard band w: U for a guarded decision, 0 for a simple one (ILAC-G8:09/2019, 4.2). */
export function guardBand(U: number, decision: Decision): number {
  return decision === 'guarded' ? Math.abs(U) : 0;
}

/**
 * Verdict with a guard band w on either side of each limit (ILAC-G8:09/2019, 4.2.3, with its two conditional
 * zones joined to *too close to call*).
 *
 * Equality: a value exactly on the acceptance limit (upper − w, lower + w) passes; one exactly on the
 * rejection limit (upper + w, lower − w) is too close to call; with w = 0 a value exactly on the limit passes.
 * A point without a limit, or a value that is not a number, is `not_run`.
 */
export function judge({ value, U, lower, upper, decision }: DecisionInput): Verdict {
  if (!Number.isFinite(value) || !Number.isFinite(U) || (lower === null && upper === null)) return 'not_run';
  const w = guardBand(U, decision);
  const failsUpper = upper !== null && !atMost(value, upper + w);
  const failsLower = lower !== null && !atMost(lower - w, value);
  if (failsUpper || failsLower) return 'fail';
  const passesUpper = upper === null || atMost(value, upper - w);
  const passesLower = lower === null || atMost(lower + w, value);
  return passesUpper && passesLower ? 'pass' : 'too_close';
}

/**
 * Distance to the nearer limit, positive inside, in the unit of the value; null without a limit.
 */
export function marginOf(value: number, lower: number | null, upper: number | null): number | null {
  const margins = [lower === null ? Infinity : value - lower, upper === null ? Infinity : upper - value];
  const margin = Math.min(...margins);
  return margin === Infinity ? null : margin;
}

/**
 * Probability of conformance for a normal distribution around the value (JCGM 106:2012, 7): one-sided
 * Φ((T − y)/u), two-sided the difference. @param u standard uncertainty, U/k
 */
export function probabilityOfConformance(
  value: number,
  u: number,
  lower: number | null,
  upper: number | null,
): number {
  if (u === 0) return (lower === null || value >= lower) && (upper === null || value <= upper) ? 1 : 0;
  const below = upper === null ? 1 : normalCdf((upper - value) / u, 0, 1);
  const under = lower === null ? 0 : normalCdf((lower - value) / u, 0, 1);
  return Math.max(0, below - under);
}
