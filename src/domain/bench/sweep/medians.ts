/**
 * The value that has `rank` smaller ones before it, found without sorting the rest. The array is reordered.
 * NaN where there is none.
 */
function select(values: Float64Array, rank: number): number {
  let low = 0;
  let high = values.length - 1;
  while (low < high) {
    const pivot = values[(low + high) >> 1] ?? NaN;
    let left = low;
    let right = high;
    while (left <= right) {
      while ((values[left] ?? NaN) < pivot) left += 1;
      while ((values[right] ?? NaN) > pivot) right -= 1;
      if (left > right) break;
      const kept = values[left] ?? NaN;
      values[left] = values[right] ?? NaN;
      values[right] = kept;
      left += 1;
      right -= 1;
    }
    if (rank <= right) high = right;
    else if (rank >= left) low = left;
    else break;
  }
  return values[rank] ?? NaN;
}

/** Median of finite values, of an even count the upper of the two in the middle; NaN where there are none. */
export function medianOfAll(values: Float64Array): number {
  return select(values.slice(), values.length >> 1);
}

/** Median level of the points above a frequency; NaN where there are none. */
export function medianAbove(freqHz: Float64Array, level: Float64Array, fromHz: number): number {
  let from = 0;
  while (from < freqHz.length && (freqHz[from] ?? 0) <= fromHz) from += 1;
  return medianOfAll(level.subarray(from));
}

/** Median distance between neighbouring points, Hz; 0 where there are fewer than two. */
export function medianStep(freqHz: Float64Array): number {
  if (freqHz.length < 2) return 0;
  const steps = new Float64Array(freqHz.length - 1);
  for (let index = 0; index < steps.length; index += 1) {
    steps[index] = (freqHz[index + 1] ?? NaN) - (freqHz[index] ?? NaN);
  }
  return select(steps, steps.length >> 1);
}
