/** A point that stands out of its neighbours. */
export interface Peak {
  freqHz: number;
  level: number;
}

/** A line rises this far over what lies between it and the next; less is a ripple on a flank or on the noise, dB. */
const RISE_DB = 6;

/** Place of the first point at or above a frequency. */
function firstAt(freqHz: Float64Array, fromHz: number): number {
  let low = 0;
  let high = freqHz.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((freqHz[middle] ?? Infinity) < fromHz) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Strongest point between two frequencies, both included; null where there is none. */
export function strongestIn(
  freqHz: Float64Array,
  level: Float64Array,
  lowHz: number,
  highHz: number,
): Peak | null {
  let best: Peak | null = null;
  for (let index = firstAt(freqHz, lowHz); index < freqHz.length; index += 1) {
    const here = freqHz[index] ?? Infinity;
    if (here > highHz) break;
    const value = level[index] ?? -Infinity;
    if (best === null || value > best.level) best = { freqHz: here, level: value };
  }
  return best;
}

/**
 * Lines above a frequency, in order: maxima of at least a level that rise 6 dB over the lowest point on either
 * side. Of maxima closer together than `apartHz` the highest is kept: it is one line as the analyser's filter
 * draws it.
 */
export function findPeaks(
  { freqHz, level }: { freqHz: Float64Array; level: Float64Array },
  { fromHz, leastLevel, apartHz }: { fromHz: number; leastLevel: number; apartHz: number },
): Peak[] {
  const peaks: Peak[] = [];
  const keep = (at: number): void => {
    const peak = { freqHz: freqHz[at] ?? NaN, level: level[at] ?? -Infinity };
    if (peak.level < leastLevel) return;
    const last = peaks[peaks.length - 1];
    if (last === undefined || peak.freqHz - last.freqHz > apartHz) peaks.push(peak);
    else if (peak.level > last.level) peaks[peaks.length - 1] = peak;
  };
  const start = firstAt(freqHz, fromHz);
  // Where the points begin on the flank of what was left out below them, the first rise comes first.
  let isRising = start === 0;
  let top = start;
  let lowest = level[start] ?? Infinity;
  for (let index = start + 1; index < level.length; index += 1) {
    const value = level[index] ?? NaN;
    if (isRising) {
      if (value > (level[top] ?? -Infinity)) top = index;
      else if (value < (level[top] ?? -Infinity) - RISE_DB) {
        keep(top);
        isRising = false;
        lowest = value;
      }
    } else if (value < lowest) lowest = value;
    else if (value > lowest + RISE_DB) {
      isRising = true;
      top = index;
    }
  }
  if (isRising && start < level.length) keep(top);
  return peaks;
}
