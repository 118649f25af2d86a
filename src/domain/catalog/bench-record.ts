/** One closed, passed reading of a unit: at the unit, in SI units or dBc. */
export interface BenchPoint {
  unitId: number;
  band: string;
  quantityKey: string;
  value: number;
}

/** What the last units of a model left the bench with on one band. */
export interface BandRecord {
  band: string;
  medianPowerW: number | null;
  /** Between these lie the middle 80 %. */
  powerFromW: number | null;
  powerToW: number | null;
  /** The highest of all harmonics of all units, dBc. */
  worstHarmonicDbc: number | null;
  medianCurrentA: number | null;
}

/** Fewer units than this say nothing about the next one. */
export const FEWEST_UNITS = 5;

/**
 * A quantile of a sample, linear between its ordered values (Hyndman and Fan, The American Statistician 50
 * (1996) 361, definition 7). Null for an empty one.
 *
 * @param p between 0 and 1
 */
export function quantile(values: readonly number[], p: number): number | null {
  const ordered = [...values].sort((a, b) => a - b);
  const at = (ordered.length - 1) * p;
  const low = ordered[Math.floor(at)];
  const high = ordered[Math.ceil(at)];
  if (low === undefined || high === undefined) return null;
  return low + (high - low) * (at - Math.floor(at));
}

/** Sums up the readings of the last units by band, in the order in which the bands come. */
export function benchRecord(points: readonly BenchPoint[]): BandRecord[] {
  const bands = [...new Set(points.map(({ band }) => band))];
  return bands.map((band) => {
    const valuesOf = (is: (key: string) => boolean) =>
      points.filter((point) => point.band === band && is(point.quantityKey)).map(({ value }) => value);
    const powers = valuesOf((key) => key === 'rf_power');
    const harmonics = valuesOf((key) => key.startsWith('harmonic_'));
    return {
      band,
      medianPowerW: quantile(powers, 0.5),
      powerFromW: quantile(powers, 0.1),
      powerToW: quantile(powers, 0.9),
      worstHarmonicDbc: quantile(harmonics, 1),
      medianCurrentA: quantile(
        valuesOf((key) => key === 'current_key_down'),
        0.5,
      ),
    };
  });
}
