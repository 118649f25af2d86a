import { formatDbm, formatFrequency } from '~/domain/bench/format';
import { pathLoss } from '~/domain/bench/paths';
import { MAX_HARMONIC } from '~/domain/bench/quantities';
import type { PathSpec } from '~/domain/bench/types';
import { findPeaks, medianOf, medianStep, strongestIn } from './peaks';
import type { Peak } from './peaks';
import type { Sweep } from './types';

/** A carrier stands at least this far over the noise floor, dB. */
const CARRIER_OVER_FLOOR_DB = 20;
/** Peaks within this of the strongest one may be the carrier, dB. */
const STRONG_DB = 20;
/** A carrier further from the test frequency than this part of it belongs to another test. */
const CARRIER_NEAR = 0.03;
/** A harmonic within this of the median floor cannot be told from the noise, dB. */
const HIDDEN_DB = 6;
/** Other peaks count from here over the floor, and within this of their limit, dB. */
const OTHER_OVER_FLOOR_DB = 12;
const OTHER_NEAR_LIMIT_DB = 20;
/** Left out around the carrier, Hz. */
const CARRIER_SKIRT_HZ = 10e3;

/** What the analysis needs besides the sweep. */
export interface SweepTest {
  testFreqHz: number;
  path: PathSpec | null;
  /** Limit of a product, dBc; null where no rule says one. Absent: every peak over the floor is listed. */
  limitDbcAt?: (productFreqHz: number) => number | null;
}

/** A product of the carrier. */
export interface SweepProduct {
  freqHz: number;
  /** At the meter, dBm. */
  levelDbm: number;
  /** Below the carrier at the meter, dBc. */
  meterDbc: number;
  /** Below the carrier at the unit, dBc: corrected by the path at both frequencies. */
  unitDbc: number;
}

/** A harmonic; `atMost` where it is hidden in the noise and counts with that value. */
export interface SweepHarmonic extends SweepProduct {
  order: number;
  atMost: boolean;
}

/** What a sweep says about a unit. */
export interface SweepAnalysis {
  fundamental: { freqHz: number; levelDbm: number; unitDbm: number };
  harmonics: SweepHarmonic[];
  /** Orders that the sweep or the path's table does not reach. */
  notCovered: { order: number; reason: string }[];
  noiseFloorDbm: number;
  /** Strongest first. */
  others: SweepProduct[];
}

/** An analysis, or a sentence why nothing is to be stored. */
export type SweepAnalysisResult = ({ ok: true } & SweepAnalysis) | { ok: false; reason: string };

function unusable(sweep: Sweep, stepHz: number): string | null {
  const { levelCalibrated, units, detector, rbwHz } = sweep.understood;
  if (units.level === null && !levelCalibrated && sweep.understood.form !== 'row blocks') {
    return 'The unit of the level is not known: say whether it is dBm before the sweep is used.';
  }
  if (!levelCalibrated) return 'The level of this sweep is not calibrated: no verdict can rest on it.';
  const isPeak = detector !== null && /peak|pos|max/i.test(detector) && !/neg|min/i.test(detector);
  const missesPeaks = detector !== null && rbwHz !== null && stepHz > rbwHz && !isPeak;
  if (missesPeaks) {
    return (
      `Points lie ${formatFrequency(stepHz)} apart, wider than the resolution bandwidth, and the detector was ` +
      `“${detector}”: lines may fall between them. Sweep again with a peak detector.`
    );
  }
  return null;
}

function findFundamental(
  peaks: readonly Peak[],
  floorDbm: number,
  testFreqHz: number,
  toleranceHz: number,
): { ok: true; peak: Peak } | { ok: false; reason: string } {
  const strongest = peaks.reduce<Peak | null>(
    (best, peak) => (best === null || peak.level > best.level ? peak : best),
    null,
  );
  if (strongest === null || strongest.level < floorDbm + CARRIER_OVER_FLOOR_DB) {
    return { ok: false, reason: 'The sweep holds no carrier: nothing stands 20 dB over its noise.' };
  }
  let nearest = strongest;
  for (const peak of peaks) {
    if (peak.level < Math.max(strongest.level - STRONG_DB, floorDbm + CARRIER_OVER_FLOOR_DB)) continue;
    if (Math.abs(peak.freqHz - testFreqHz) < Math.abs(nearest.freqHz - testFreqHz)) nearest = peak;
  }
  if (Math.abs(nearest.freqHz - testFreqHz) > Math.max(CARRIER_NEAR * testFreqHz, toleranceHz)) {
    return {
      ok: false,
      reason:
        `No carrier near ${formatFrequency(testFreqHz)}: the nearest strong signal is at ${formatFrequency(nearest.freqHz)}. ` +
        'Does the sweep belong to another band?',
    };
  }
  return { ok: true, peak: nearest };
}

/**
 * Finds the fundamental (nearest strong peak to the test frequency), harmonics 2 to 10 (strongest point within
 * ±max(3 RBW, 1.5 point spacings, 0.2 %) of n·f), the noise floor (median) and other peaks. The spike at 0 Hz
 * is ignored. Refuses with a sentence a sweep that does not reach the third harmonic, holds no carrier, was
 * overloaded, is uncalibrated or belongs to another band.
 */
export function analyseSweep(sweep: Sweep, test: SweepTest): SweepAnalysisResult {
  const { freqHz, level } = sweep.points;
  const { rbwHz, referenceDbm } = sweep.understood;
  const stepHz = medianStep(freqHz);
  const blocked = unusable(sweep, stepHz);
  if (blocked !== null) return { ok: false, reason: blocked };

  const spacing = Math.max(3 * (rbwHz ?? 0), 1.5 * stepHz);
  const windowAt = (productHz: number): number => Math.max(spacing, 0.002 * productHz);
  const [lowestHz, highestHz] = sweep.understood.spanHz;
  if (test.testFreqHz < lowestHz || test.testFreqHz > highestHz) {
    return {
      ok: false,
      reason: `The sweep does not cover the test frequency ${formatFrequency(test.testFreqHz)}.`,
    };
  }
  // The analyser's own line at 0 Hz and its skirt; never as far up as the carrier.
  const fromHz = Math.min(Math.max(spacing, CARRIER_SKIRT_HZ), test.testFreqHz / 2);
  const floorDbm = medianOf(freqHz, level, fromHz);
  const peaks = findPeaks(freqHz, level, fromHz, spacing);

  const found = findFundamental(peaks, floorDbm, test.testFreqHz, spacing);
  if (!found.ok) return found;
  const carrier = found.peak;
  const overloaded = referenceDbm === null ? undefined : peaks.find((peak) => peak.level >= referenceDbm);
  if (overloaded !== undefined) {
    return {
      ok: false,
      reason:
        `The analyser was overloaded: ${formatFrequency(overloaded.freqHz)} reaches its reference level of ` +
        `${formatDbm(referenceDbm ?? 0)}. Put in more attenuation and sweep again.`,
    };
  }
  if (3 * carrier.freqHz > highestHz) {
    return {
      ok: false,
      reason: `The sweep ends at ${formatFrequency(highestHz)}, below the third harmonic.`,
    };
  }
  const carrierLoss = pathLoss(test.path, carrier.freqHz);
  if (!carrierLoss.ok) return carrierLoss;

  const productOf = (peak: Peak): { ok: true; product: SweepProduct } | { ok: false; reason: string } => {
    const loss = pathLoss(test.path, peak.freqHz);
    if (!loss.ok) return loss;
    const meterDbc = peak.level - carrier.level;
    const unitDbc = meterDbc + loss.lossDb - carrierLoss.lossDb;
    return { ok: true, product: { freqHz: peak.freqHz, levelDbm: peak.level, meterDbc, unitDbc } };
  };

  const harmonics: SweepHarmonic[] = [];
  const notCovered: SweepAnalysis['notCovered'] = [];
  for (let order = 2; order <= MAX_HARMONIC; order += 1) {
    const centreHz = order * carrier.freqHz;
    const peak =
      centreHz > highestHz
        ? null
        : strongestIn(freqHz, level, centreHz - windowAt(centreHz), centreHz + windowAt(centreHz));
    if (peak === null) {
      notCovered.push({ order, reason: `The sweep ends at ${formatFrequency(highestHz)}.` });
      continue;
    }
    const product = productOf(peak);
    if (product.ok) harmonics.push({ order, ...product.product, atMost: peak.level < floorDbm + HIDDEN_DB });
    else if (order <= 3) return product;
    else notCovered.push({ order, reason: product.reason });
  }

  const skirtHz = Math.max(CARRIER_SKIRT_HZ, spacing);
  const isHarmonic = (peakHz: number): boolean => {
    const order = Math.round(peakHz / carrier.freqHz);
    const centreHz = order * carrier.freqHz;
    return order >= 2 && order <= MAX_HARMONIC && Math.abs(peakHz - centreHz) <= windowAt(centreHz);
  };
  const others: SweepProduct[] = [];
  for (const peak of peaks) {
    if (peak.level < floorDbm + OTHER_OVER_FLOOR_DB || isHarmonic(peak.freqHz)) continue;
    if (Math.abs(peak.freqHz - carrier.freqHz) <= skirtHz) continue;
    const corrected = productOf(peak);
    const meterDbc = peak.level - carrier.level;
    // Outside the path's table a peak is still shown, as it stands at the meter.
    const product = corrected.ok
      ? corrected.product
      : { freqHz: peak.freqHz, levelDbm: peak.level, meterDbc, unitDbc: meterDbc };
    const limit = test.limitDbcAt?.(peak.freqHz) ?? null;
    if (limit === null || product.unitDbc >= limit - OTHER_NEAR_LIMIT_DB) others.push(product);
  }
  others.sort((a, b) => b.unitDbc - a.unitDbc);
  return {
    ok: true,
    fundamental: {
      freqHz: carrier.freqHz,
      levelDbm: carrier.level,
      unitDbm: carrier.level + carrierLoss.lossDb,
    },
    harmonics,
    notCovered,
    noiseFloorDbm: floorDbm,
    others,
  };
}
