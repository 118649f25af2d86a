import type { Verdict } from './types';

/** What the result of a run is computed from: one for each resolved test point. */
export interface RunPoint {
  /** As a person reads it: `20 m, 2nd harmonic`. */
  label: string;
  required: boolean;
  verdict: Verdict;
  /** Why there is a reading but no verdict. */
  stopped: string | null;
  /** The owner lets it go with a reason: a works' own limit that it does not meet, or not surely. */
  isConceded: boolean;
}

/** The computed result; a person does not choose it. */
export interface RunResult {
  result: 'passed' | 'passed_by_concession' | 'undecided' | 'failed' | 'incomplete';
  canClose: boolean;
  /** Sentences for the person: what failed, what is too close, what is missing. */
  why: string[];
}

/**
 * Result of a run. Any point that was measured and failed fails the run, required or not, and lets it close
 * at once (*failed, stopped here*). Without a failure every required point needs a verdict; one that is too
 * close to call leaves the run undecided. A conceded point counts as met, and makes it *passed by concession*.
 */
export function runResult(points: readonly RunPoint[]): RunResult {
  const failed = points.filter((point) => point.verdict === 'fail' && !point.isConceded);
  if (failed.length > 0) {
    return { result: 'failed', canClose: true, why: failed.map((point) => `${point.label} failed.`) };
  }
  const required = points.filter((point) => point.required);
  if (required.length === 0) {
    return {
      result: 'incomplete',
      canClose: false,
      why: ['The run has no required point to be decided by.'],
    };
  }
  const missing = required.filter((point) => point.verdict === 'not_run');
  if (missing.length > 0) {
    const why = missing.map((point) =>
      point.stopped === null ? `${point.label} has no reading.` : `${point.label}: ${point.stopped}`,
    );
    return { result: 'incomplete', canClose: false, why };
  }
  const close = required.filter((point) => point.verdict === 'too_close' && !point.isConceded);
  if (close.length > 0) {
    return {
      result: 'undecided',
      canClose: true,
      why: close.map((point) => `${point.label} is too close to call.`),
    };
  }
  const conceded = points.filter(
    ({ verdict, isConceded }) => isConceded && (verdict === 'fail' || verdict === 'too_close'),
  );
  if (conceded.length > 0) {
    return {
      result: 'passed_by_concession',
      canClose: true,
      why: conceded.map((point) => `${point.label} is let go by concession.`),
    };
  }
  return { result: 'passed', canClose: true, why: [] };
}

const WORDS: Record<string, string> = {
  passed: 'Passed',
  passed_by_concession: 'Passed by concession',
  undecided: 'Undecided',
  failed: 'Failed',
};

/** A run's result as a person reads it; `Open` while it has none. */
export function resultInWords(result: string | null): string {
  return result === null ? 'Open' : (WORDS[result] ?? result);
}

/** The verdict whose mark a result is shown with. */
export function verdictOfResult(result: string | null): Verdict {
  if (result === 'passed' || result === 'passed_by_concession') return 'pass';
  if (result === 'failed') return 'fail';
  return result === 'undecided' ? 'too_close' : 'not_run';
}
