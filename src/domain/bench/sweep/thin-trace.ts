import type { Sweep } from './types';

/** A trace as it is drawn: [freqHz, level in dBc at the meter] in order. */
export type ThinTrace = [number, number][];

/**
 * Thins a sweep to at most `count` points for a drawing: of neighbours the strongest is kept, so that no line
 * is lost.
 */
export function thinTrace({ points }: Sweep, carrierDbm: number, count: number): ThinTrace {
  const { freqHz, level } = points;
  const size = Math.max(1, Math.ceil(freqHz.length / count));
  const trace: ThinTrace = [];
  for (let from = 0; from < freqHz.length; from += size) {
    let at = from;
    for (let index = from; index < Math.min(from + size, freqHz.length); index += 1) {
      if ((level[index] ?? -Infinity) > (level[at] ?? -Infinity)) at = index;
    }
    const dbc = (level[at] ?? NaN) - carrierDbm;
    trace.push([freqHz[at] ?? NaN, Math.round(dbc * 100) / 100]);
  }
  return trace;
}
