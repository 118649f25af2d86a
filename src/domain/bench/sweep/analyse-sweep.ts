import { formatDbm, formatFrequency, formatNumber } from '~/domain/bench/format';
import { pathLoss } from '~/domain/bench/paths';
import { MAX_HARMONIC } from '~/domain/bench/quantities';
import type { PathSpec } from '~/domain/bench/types';
import { medianAbove } from './medians';
import { findPeaks, strongestIn } from './peaks';
import type { Peak } from './peaks';
import type { Sweep, SweepQuestion } from './types';

/** A carrier stands at least this far over the noise floor, dB. */
const CARRIER_OVER_FLOOR_DB = 20;
/** Peaks within this of the strongest one may be the carrier, dB. */
const STRONG_DB = 20;
/** Another line within this of the carrier may be a second carrier, dB. */
const SECOND_CARRIER_DB = 10;
/** A carrier further from the test frequency than this part of it belongs to another test. */
const CARRIER_NEAR = 0.03;
/** A harmonic within this of the median floor cannot be told from the noise, dB. */
const HIDDEN_DB = 6;
/** Other peaks count from here over the floor, and within this of their limit, dB. */
const OTHER_OVER_FLOOR_DB = 12;
export const NEAR_LIMIT_DB = 20;
/** Left out around the carrier, Hz. */
export const CARRIER_SKIRT_HZ = 10e3;

/** What the analysis needs besides the sweep. */
export interface SweepTest {
  testFreqHz: number;
  path: PathSpec | null;
  /** Limit of a product, dBc; null where no rule says one. Absent: every peak over the floor is listed. */
  limitDbcAt?: (productFreqHz: number) => number | null;
  /** Only to be looked at: a sweep on which no verdict can rest is analysed all the same. */
  lookOnly?: boolean;
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
  questions: SweepQuestion[];
  notes: string[];
}

/** An analysis, or a sentence why nothing is to be stored. */
export type SweepAnalysisResult = ({ ok: true } & SweepAnalysis) | { ok: false; reason: string };

type Refusal = { ok: false; reason: string };

const refuse = (reason: string): Refusal => ({ ok: false, reason });

/** Half-width of what belongs to one line, wherever it lies, Hz. */
export function lineSpacing({ rbwHz, stepHz }: Sweep['understood']): number {
  return Math.max(3 * (rbwHz ?? 0), 1.5 * stepHz);
}

/** Why no verdict can rest on a sweep; null where one can. */
export function whyNoVerdict({ understood }: Sweep): string | null {
  const { levelCalibrated, units, detector, rbwHz, stepHz, form } = understood;
  if (units.level === null && !levelCalibrated && form !== 'row blocks') {
    return 'The unit of the level is not known: say whether it is dBm before the sweep is used.';
  }
  if (!levelCalibrated) {
    return 'The level of this sweep is not calibrated: no verdict can rest on it. It can be looked at; sweep with a calibrated instrument.';
  }
  const isPeak = detector !== null && /peak|pos|max/i.test(detector) && !/neg|min/i.test(detector);
  if (detector !== null && rbwHz !== null && stepHz > rbwHz && !isPeak) {
    return (
      `Points lie ${formatFrequency(stepHz)} apart, wider than the resolution bandwidth, and the detector was ` +
      `“${detector}”: lines may fall between them. Sweep again with a peak detector.`
    );
  }
  return null;
}

/** Whether a carrier may be the one of a test, or belongs to another band. */
export function sameCarrier(freqHz: number, testFreqHz: number, toleranceHz: number): boolean {
  return Math.abs(freqHz - testFreqHz) <= Math.max(CARRIER_NEAR * testFreqHz, toleranceHz);
}

function findFundamental(
  peaks: readonly Peak[],
  floorDbm: number,
  testFreqHz: number,
  toleranceHz: number,
): { ok: true; peak: Peak } | Refusal {
  const strongest = peaks.reduce<Peak | null>(
    (best, peak) => (best === null || peak.level > best.level ? peak : best),
    null,
  );
  if (strongest === null || strongest.level < floorDbm + CARRIER_OVER_FLOOR_DB) {
    return refuse(
      'The sweep holds no carrier: nothing stands 20 dB over its noise. Was the key down, and the path connected?',
    );
  }
  const least = Math.max(strongest.level - STRONG_DB, floorDbm + CARRIER_OVER_FLOOR_DB);
  let nearest = strongest;
  for (const peak of peaks) {
    if (peak.level < least) continue;
    if (Math.abs(peak.freqHz - testFreqHz) < Math.abs(nearest.freqHz - testFreqHz)) nearest = peak;
  }
  if (!sameCarrier(nearest.freqHz, testFreqHz, toleranceHz)) {
    return refuse(
      `No carrier near ${formatFrequency(testFreqHz)}: the nearest strong signal is at ${formatFrequency(nearest.freqHz)}. ` +
        'Does the sweep belong to another band?',
    );
  }
  return { ok: true, peak: nearest };
}

/** A second line about as strong as the carrier, which a person has to explain. */
function secondCarrier(carrier: Peak, others: readonly Peak[]): SweepQuestion[] {
  const second = others.reduce<Peak | null>(
    (best, peak) => (best === null || peak.level > best.level ? peak : best),
    null,
  );
  if (second === null || second.level < carrier.level - SECOND_CARRIER_DB) return [];
  const apartDb = formatNumber(Math.abs(second.level - carrier.level), 1);
  const text =
    `Two strong signals: ${formatFrequency(carrier.freqHz)} and ${formatFrequency(second.freqHz)}, ${apartDb} dB apart. ` +
    'The first was taken as the carrier. Is the second one the unit’s own?';
  return [{ about: 'carriers', text, needsValue: false }];
}

function offsetNote(carrierHz: number, testFreqHz: number, toleranceHz: number): string[] {
  const offHz = carrierHz - testFreqHz;
  if (Math.abs(offHz) <= toleranceHz) return [];
  return [
    `The carrier lies ${formatFrequency(Math.abs(offHz))} ${offHz > 0 ? 'above' : 'below'} the test frequency of ${formatFrequency(testFreqHz)}.`,
  ];
}

/** Corrects what stands at the meter to what stands at the unit, below a carrier. */
class Products {
  readonly #carrierLossDb: number;

  constructor(
    private readonly carrier: Peak,
    private readonly path: PathSpec | null,
    carrierLossDb: number,
  ) {
    this.#carrierLossDb = carrierLossDb;
  }

  of(peak: Peak): { ok: true; product: SweepProduct } | Refusal {
    const loss = pathLoss(this.path, peak.freqHz);
    if (!loss.ok) return loss;
    const meterDbc = peak.level - this.carrier.level;
    const unitDbc = meterDbc + loss.lossDb - this.#carrierLossDb;
    return { ok: true, product: { freqHz: peak.freqHz, levelDbm: peak.level, meterDbc, unitDbc } };
  }

  /** Outside the path's table a peak is still shown, as it stands at the meter. */
  shown(peak: Peak): SweepProduct {
    const corrected = this.of(peak);
    if (corrected.ok) return corrected.product;
    const meterDbc = peak.level - this.carrier.level;
    return { freqHz: peak.freqHz, levelDbm: peak.level, meterDbc, unitDbc: meterDbc };
  }
}

/** What stands in the way before a carrier is looked for. */
function problemBefore(sweep: Sweep, test: SweepTest, fromHz: number): string | null {
  const { points, understood } = sweep;
  if (test.lookOnly !== true) {
    const reason = whyNoVerdict(sweep);
    if (reason !== null) return reason;
  }
  const [lowestHz, highestHz] = understood.spanHz;
  if (test.testFreqHz < lowestHz || test.testFreqHz > highestHz) {
    return `The sweep does not cover the test frequency ${formatFrequency(test.testFreqHz)}: it runs from ${formatFrequency(lowestHz)} to ${formatFrequency(highestHz)}.`;
  }
  const { referenceDbm } = understood;
  const strongest = strongestIn(points.freqHz, points.level, fromHz, Infinity);
  if (referenceDbm !== null && strongest !== null && strongest.level >= referenceDbm) {
    return (
      `The analyser was overloaded: ${formatFrequency(strongest.freqHz)} reaches its reference level of ` +
      `${formatDbm(referenceDbm)}. Put in more attenuation and sweep again.`
    );
  }
  return null;
}

/**
 * Finds the fundamental (nearest strong peak to the test frequency), harmonics 2 to 10 (strongest point within
 * ±max(3 RBW, 1.5 point spacings, 0.2 %) of n·f), the noise floor (median) and every other peak over the floor by
 * 12 dB and within 20 dB of its limit. The spike at 0 Hz and ±10 kHz around the carrier are left out. Refuses with
 * a sentence a sweep that does not reach the third harmonic, holds no carrier, was overloaded, is uncalibrated or
 * belongs to another band.
 */
export function analyseSweep(sweep: Sweep, test: SweepTest): SweepAnalysisResult {
  const { freqHz, level } = sweep.points;
  const spacing = lineSpacing(sweep.understood);
  const windowAt = (productHz: number): number => Math.max(spacing, 0.002 * productHz);
  const { rbwHz, stepHz } = sweep.understood;
  const [, highestHz] = sweep.understood.spanHz;
  // The analyser's own line at 0 Hz and its skirt; never as far up as the carrier.
  const fromHz = Math.min(Math.max(spacing, CARRIER_SKIRT_HZ), test.testFreqHz / 2);
  const problem = problemBefore(sweep, test, fromHz);
  if (problem !== null) return refuse(problem);

  const floorDbm = medianAbove(freqHz, level, fromHz);
  const peaks = findPeaks(sweep.points, {
    fromHz,
    leastLevel: floorDbm + OTHER_OVER_FLOOR_DB,
    apartHz: spacing,
  });
  const found = findFundamental(peaks, floorDbm, test.testFreqHz, spacing);
  if (!found.ok) return found;
  const carrier = found.peak;
  if (3 * carrier.freqHz > highestHz) {
    return refuse(
      `The sweep ends at ${formatFrequency(highestHz)}, below the third harmonic. Sweep up to ${formatFrequency(MAX_HARMONIC * carrier.freqHz)}, or as far as the analyser goes.`,
    );
  }
  const carrierLoss = pathLoss(test.path, carrier.freqHz);
  if (!carrierLoss.ok) return carrierLoss;
  const products = new Products(carrier, test.path, carrierLoss.lossDb);

  const harmonics: SweepHarmonic[] = [];
  const notCovered: SweepAnalysis['notCovered'] = [];
  for (let order = 2; order <= MAX_HARMONIC; order += 1) {
    const centreHz = order * carrier.freqHz;
    const half = windowAt(centreHz);
    const peak = centreHz > highestHz ? null : strongestIn(freqHz, level, centreHz - half, centreHz + half);
    if (peak === null) {
      notCovered.push({ order, reason: `The sweep ends at ${formatFrequency(highestHz)}.` });
      continue;
    }
    const product = products.of(peak);
    if (product.ok) harmonics.push({ order, ...product.product, atMost: peak.level < floorDbm + HIDDEN_DB });
    else if (order <= 3 && test.lookOnly !== true) return product;
    else notCovered.push({ order, reason: product.reason });
  }

  const isHarmonic = (peakHz: number): boolean => {
    const order = Math.round(peakHz / carrier.freqHz);
    const centreHz = order * carrier.freqHz;
    return order >= 2 && order <= MAX_HARMONIC && Math.abs(peakHz - centreHz) <= windowAt(centreHz);
  };
  const unrelated = peaks.filter((peak) => peak !== carrier && !isHarmonic(peak.freqHz));
  const skirtHz = Math.max(CARRIER_SKIRT_HZ, spacing);
  const others = unrelated
    .filter((peak) => Math.abs(peak.freqHz - carrier.freqHz) > skirtHz)
    .map((peak) => products.shown(peak))
    .filter((product) => {
      const limit = test.limitDbcAt?.(product.freqHz) ?? null;
      return limit === null || product.unitDbc >= limit - NEAR_LIMIT_DB;
    })
    .sort((a, b) => b.unitDbc - a.unitDbc);
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
    questions: secondCarrier(carrier, unrelated),
    notes: offsetNote(carrier.freqHz, test.testFreqHz, Math.max(rbwHz ?? 0, stepHz)),
  };
}
