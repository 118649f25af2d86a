import { formatFrequency } from '~/domain/bench/format';
import { medianStep } from './medians';

/** Part of the steps that must be alike for a sweep to count as evenly spaced. */
const EVENLY = 0.9;
/** Steps that differ by no more than this part of the median are alike. */
const ALIKE = 0.05;
/** A step this much over its neighbours, in a sweep whose steps grow, is a hole. */
const HOLE = 2.5;

type Checked = { ok: true; stepHz: number } | { ok: false; reason: string };

function missing(freqHz: Float64Array, index: number): string {
  const from = formatFrequency(freqHz[index] ?? 0);
  const to = formatFrequency(freqHz[index + 1] ?? 0);
  return `Points are missing between ${from} and ${to}. Export the trace again, all of it.`;
}

/**
 * Whether frequencies rise without holes. Between even steps one missing point is a hole, unless the rounding of
 * the written numbers explains it; where the steps grow (a logarithmic sweep) each is held against its neighbours.
 * @param resolutionHz the step in which the numbers are written
 */
export function checkFrequencies(freqHz: Float64Array, resolutionHz: number): Checked {
  if (freqHz.length < 3) return { ok: false, reason: 'The file has fewer than three points.' };
  for (let index = 0; index < freqHz.length; index += 1) {
    const here = freqHz[index] ?? NaN;
    if (!Number.isFinite(here) || here < 0) {
      return { ok: false, reason: `Point ${String(index + 1)} has no usable frequency.` };
    }
    const before = index === 0 ? -1 : (freqHz[index - 1] ?? NaN);
    if (here <= before) {
      return {
        ok: false,
        reason:
          `The frequencies are not in order: point ${String(index + 1)} (${formatFrequency(here)}) does not lie above ` +
          `the one before it (${formatFrequency(before)}). Export one sweep, lowest frequency first.`,
      };
    }
  }
  const stepHz = medianStep(freqHz);
  const steps = freqHz.length - 1;
  const stepAt = (index: number): number => (freqHz[index + 1] ?? NaN) - (freqHz[index] ?? NaN);
  const margin = Math.max(ALIKE * stepHz, 1.01 * resolutionHz);
  let alike = 0;
  for (let index = 0; index < steps; index += 1) if (Math.abs(stepAt(index) - stepHz) <= margin) alike += 1;
  const isEven = steps >= 10 && alike >= EVENLY * steps;
  const widest = Math.max(1.5 * stepHz, stepHz + 1.5 * resolutionHz);
  for (let index = 0; index < steps; index += 1) {
    const here = stepAt(index);
    const around = Math.max(index === 0 ? 0 : stepAt(index - 1), index === steps - 1 ? 0 : stepAt(index + 1));
    const isHole = isEven ? here > widest : steps > 2 && here > HOLE * around;
    if (isHole) return { ok: false, reason: missing(freqHz, index) };
  }
  return { ok: true, stepHz };
}
