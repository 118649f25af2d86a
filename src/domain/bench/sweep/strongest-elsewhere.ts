import { MAX_HARMONIC } from '~/domain/bench/quantities';
import { CARRIER_SKIRT_HZ, lineSpacing } from './analyse-sweep';
import { strongestIn } from './peaks';
import type { Peak } from './peaks';
import type { Sweep } from './types';

/** Left out around each harmonic, as a part of its frequency. */
const HARMONIC_WINDOW = 0.01;

/**
 * The strongest point of a sweep away from 0 Hz, the carrier and its harmonics: where no line stands over the
 * noise, no product is stronger than this. Null where the sweep has no such point.
 */
export function strongestElsewhere({ points, understood }: Sweep, carrierHz: number): Peak | null {
  const { freqHz, level } = points;
  const spacing = lineSpacing(understood);
  const skirtHz = Math.max(CARRIER_SKIRT_HZ, spacing);
  const [, highestHz] = understood.spanHz;
  let fromHz = Math.min(skirtHz, carrierHz / 2);
  let best: Peak | null = null;
  for (let order = 1; order <= MAX_HARMONIC + 1; order += 1) {
    const centreHz = order * carrierHz;
    const half = order === 1 ? skirtHz : Math.max(spacing, HARMONIC_WINDOW * centreHz);
    const toHz = order > MAX_HARMONIC ? highestHz : Math.min(highestHz, centreHz - half);
    const peak = toHz > fromHz ? strongestIn(freqHz, level, fromHz, toHz) : null;
    if (peak !== null && (best === null || peak.level > best.level)) best = peak;
    fromHz = centreHz + half;
  }
  return best;
}
