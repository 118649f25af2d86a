/** A point that stands out of its neighbours. */
export interface Peak {
  freqHz: number;
  level: number;
}

/** Median level of the points from a frequency on. */
export function medianOf(freqHz: Float64Array, level: Float64Array, fromHz: number): number {
  const kept = level.filter((_, index) => (freqHz[index] ?? 0) > fromHz).sort();
  return kept[Math.floor(kept.length / 2)] ?? NaN;
}

/** Median distance between neighbouring points, Hz. */
export function medianStep(freqHz: Float64Array): number {
  const steps = freqHz
    .slice(1)
    .map((value, index) => value - (freqHz[index] ?? 0))
    .sort();
  return steps[Math.floor(steps.length / 2)] ?? 0;
}

/** Strongest point between two frequencies, both included; null where there is none. */
export function strongestIn(
  freqHz: Float64Array,
  level: Float64Array,
  lowHz: number,
  highHz: number,
): Peak | null {
  let best: Peak | null = null;
  for (let index = 0; index < freqHz.length; index += 1) {
    const here = freqHz[index] ?? 0;
    if (here < lowHz) continue;
    if (here > highHz) break;
    const value = level[index] ?? -Infinity;
    if (best === null || value > best.level) best = { freqHz: here, level: value };
  }
  return best;
}

/**
 * Local maxima above a frequency, in order. Of maxima closer together than `apartHz` the highest is kept: it is
 * one line as the analyser's filter draws it.
 */
export function findPeaks(
  freqHz: Float64Array,
  level: Float64Array,
  fromHz: number,
  apartHz: number,
): Peak[] {
  const peaks: Peak[] = [];
  for (let index = 0; index < freqHz.length; index += 1) {
    const here = freqHz[index] ?? 0;
    if (here <= fromHz) continue;
    const value = level[index] ?? -Infinity;
    if (value < (level[index - 1] ?? -Infinity) || value < (level[index + 1] ?? -Infinity)) continue;
    const last = peaks[peaks.length - 1];
    if (last === undefined || here - last.freqHz > apartHz) peaks.push({ freqHz: here, level: value });
    else if (value > last.level) peaks[peaks.length - 1] = { freqHz: here, level: value };
  }
  return peaks;
}
