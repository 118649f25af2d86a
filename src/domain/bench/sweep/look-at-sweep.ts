import { bandLabel } from '~/domain/bench/bands';
import { formatFrequency } from '~/domain/bench/format';
import { planForBand } from '~/domain/bench/frequency-plan';
import type { BandPlan, FrequencyPlan } from '~/domain/bench/frequency-plan';
import { carrierOf } from '~/domain/bench/judge-point';
import { judgeRun, pointLabel } from '~/domain/bench/judge-run';
import type { RunSheet } from '~/domain/bench/judge-run';
import { limitDbc } from '~/domain/bench/limit-rules';
import { carrierOffPlan, productNamer } from '~/domain/bench/name-products';
import type { ProductName } from '~/domain/bench/name-products';
import { ordinal } from '~/domain/bench/plan-products';
import type { BandKey, PathSpec, TestPoint } from '~/domain/bench/types';
import {
  analyseSweep,
  CARRIER_SKIRT_HZ,
  lineSpacing,
  NEAR_LIMIT_DB,
  sameCarrier,
  whyNoVerdict,
} from './analyse-sweep';
import type { SweepAnalysis, SweepHarmonic, SweepProduct } from './analyse-sweep';
import { strongestIn } from './peaks';
import { readSweep } from './read-sweep';
import { strongestElsewhere } from './strongest-elsewhere';
import { thinTrace } from './thin-trace';
import type { ThinTrace } from './thin-trace';
import type { Sweep, SweepHints, SweepQuestion, Understood } from './types';

/** Points that are drawn. */
const DRAWN_POINTS = 800;
/** More products than this are no list that anybody reads: the strongest are kept, and it is said. */
const MOST_PRODUCTS = 40;

/** What a sweep is read against. */
export interface RunForSweep {
  sheet: RunSheet;
  /** Of the model, W: what limits go by until the power of the band is measured. */
  ratedPowerW: number;
  frequencyPlan: FrequencyPlan | null;
  path: PathSpec | null;
}

/** A product with its name and its limit. */
export interface NamedProduct extends SweepProduct, ProductName {
  /** dBc; null where no rule says one. */
  limitDbc: number | null;
}

/** A harmonic with its limit. */
export interface LimitedHarmonic extends SweepHarmonic {
  limitDbc: number | null;
}

/** A sweep's analysis with names and limits. */
export interface NamedAnalysis extends Omit<SweepAnalysis, 'harmonics' | 'others' | 'questions' | 'notes'> {
  harmonics: LimitedHarmonic[];
  others: NamedProduct[];
}

/** What would be written at a test point. */
export interface SweepReading {
  testPointId: number;
  label: string;
  /** At the meter, dBc. */
  meterDbc: number;
  unitDbc: number;
  /** The test frequency; of a spurious product its own. */
  freqHz: number | null;
  atMost: boolean;
  /** What the product is; null for a harmonic at its own point. */
  name: string | null;
}

/** A sweep as it was understood and what it would come to, before anything is kept. */
export interface SweepLook {
  understood: Understood;
  notes: string[];
  questions: SweepQuestion[];
  /** Told by its carrier, or said by the person; null where it fits no band of the plan. */
  band: BandKey | null;
  /** Why nothing can rest on it, as a sentence; null where it can be accepted once the questions are answered. */
  refusal: string | null;
  /** [freqHz, dB below the carrier, or below the strongest point where there is no carrier]. */
  trace: ThinTrace;
  analysis: NamedAnalysis | null;
  readings: SweepReading[];
}

/** A look, or a sentence why the file is no sweep at all. */
export type SweepLookResult = ({ ok: true; sweep: Sweep } & SweepLook) | { ok: false; reason: string };

/** The test frequency of a band; null where the plan states none. */
export function testFrequencyOf({ points }: RunSheet, band: BandKey): number | null {
  const own = points.filter((point) => point.band === band && point.freqHz !== null);
  return (own.find(({ quantity }) => quantity.order !== null) ?? own[0])?.freqHz ?? null;
}

/** The band whose test frequency is nearest to the strongest line of a sweep; a sentence where it fits none. */
function tellBand(
  { points, understood }: Sweep,
  sheet: RunSheet,
): { ok: true; band: BandKey } | { ok: false; reason: string } {
  const tested = [...new Set(sheet.points.flatMap(({ band }) => (band === null ? [] : [band])))].flatMap(
    (band) => {
      const freqHz = testFrequencyOf(sheet, band);
      return freqHz === null ? [] : [{ band, freqHz }];
    },
  );
  if (tested.length === 0)
    return { ok: false, reason: 'The test plan states no test frequency on any band.' };
  // Above the analyser's own line at 0 Hz.
  const skirtHz = Math.max(CARRIER_SKIRT_HZ, lineSpacing(understood));
  const fromHz = Math.min(skirtHz, ...tested.map(({ freqHz }) => freqHz / 2));
  const strongest = strongestIn(points.freqHz, points.level, fromHz, Infinity);
  const fitting = tested
    .filter(
      ({ freqHz }) => strongest !== null && sameCarrier(strongest.freqHz, freqHz, lineSpacing(understood)),
    )
    .sort(
      (a, b) => Math.abs(a.freqHz - (strongest?.freqHz ?? 0)) - Math.abs(b.freqHz - (strongest?.freqHz ?? 0)),
    );
  const [nearest] = fitting;
  if (nearest !== undefined) return { ok: true, band: nearest.band };
  const bands = tested
    .map(({ band, freqHz }) => `${bandLabel(band)} at ${formatFrequency(freqHz)}`)
    .join(', ');
  const at = strongest === null ? 'nowhere' : `at ${formatFrequency(strongest.freqHz)}`;
  return {
    ok: false,
    reason: `The sweep fits no band of this run: its strongest signal is ${at}, and the run is tested on ${bands}. Is it of another unit? Otherwise choose the band.`,
  };
}

/** Limits of products on a band: by the power measured on it, or by the rated one until then. */
function limitsOn(band: BandKey, { sheet, ratedPowerW }: RunForSweep) {
  const power = sheet.points.find((point) => point.band === band && point.quantity.key === 'rf_power');
  const judged = power === undefined ? undefined : judgeRun(sheet).judgements.get(power.id);
  const carrier = judged === undefined ? null : carrierOf(judged);
  const txFreqHz = testFrequencyOf(sheet, band) ?? 0;
  return {
    isMeasured: carrier !== null,
    at: (productFreqHz: number): number | null => {
      const args = { powerW: carrier?.powerW ?? ratedPowerW, txFreqHz, productFreqHz };
      const limit = limitDbc(sheet.rule, args);
      return limit.ok ? limit.limitDbc : null;
    },
  };
}

function nameAll(
  analysis: SweepAnalysis,
  sweep: Sweep,
  plan: BandPlan | null,
  limitAt: (freqHz: number) => number | null,
): NamedAnalysis {
  const { fundamental, notCovered, noiseFloorDbm, harmonics, others } = analysis;
  const name = productNamer({
    plan,
    carrierHz: fundamental.freqHz,
    toleranceHz: lineSpacing(sweep.understood),
  });
  return {
    ...{ fundamental, notCovered, noiseFloorDbm },
    harmonics: harmonics.map((each) => ({ ...each, limitDbc: limitAt(each.freqHz) })),
    others: others
      .slice(0, MOST_PRODUCTS)
      .map((each) => ({ ...each, ...name(each.freqHz), limitDbc: limitAt(each.freqHz) })),
  };
}

/**
 * What a sweep comes to at the points of its band: each harmonic at its own; at the point of spurious products
 * every other one, and each harmonic near its limit that has no point. Where no product stands out, none is
 * stronger than the strongest noise.
 */
function readingsOf(
  points: readonly TestPoint[],
  sweep: Sweep,
  { harmonics, others, fundamental }: NamedAnalysis,
): { readings: SweepReading[]; notes: string[] } {
  const readings: SweepReading[] = [];
  const withoutPoint: LimitedHarmonic[] = [];
  for (const harmonic of harmonics) {
    const point = points.find(({ quantity }) => quantity.order === harmonic.order);
    if (point !== undefined) {
      const { meterDbc, unitDbc, atMost } = harmonic;
      const { freqHz, id: testPointId } = point;
      readings.push({
        ...{ testPointId, label: pointLabel(point), meterDbc, unitDbc, freqHz, atMost },
        name: null,
      });
      continue;
    }
    const isNear = harmonic.limitDbc === null || harmonic.unitDbc >= harmonic.limitDbc - NEAR_LIMIT_DB;
    if (isNear && !harmonic.atMost) withoutPoint.push(harmonic);
  }
  const products = [
    ...withoutPoint.map((each) => ({ ...each, name: `${ordinal(each.order)} harmonic` })),
    ...others,
  ];
  const spurious = points.find(({ quantity }) => quantity.key === 'spurious');
  if (spurious === undefined) {
    const names = products.map(({ name, freqHz }) => `${name} at ${formatFrequency(freqHz)}`).join(', ');
    const notes =
      names === '' ? [] : [`The test plan has no point for other products; not written down: ${names}.`];
    return { readings, notes };
  }
  const at = { testPointId: spurious.id, label: pointLabel(spurious) };
  for (const { meterDbc, unitDbc, freqHz, name } of products) {
    readings.push({ ...at, meterDbc, unitDbc, freqHz, atMost: false, name });
  }
  const noise = products.length > 0 ? null : strongestElsewhere(sweep, fundamental.freqHz);
  if (noise !== null) {
    const dbc = noise.level - fundamental.levelDbm;
    readings.push({
      ...at,
      meterDbc: dbc,
      unitDbc: dbc,
      freqHz: noise.freqHz,
      atMost: true,
      name: 'strongest noise',
    });
  }
  return { readings, notes: [] };
}

/** The highest level of a sweep, dBm or as in the file. */
function highest({ points }: Sweep): number {
  return strongestIn(points.freqHz, points.level, 0, Infinity)?.level ?? 0;
}

/**
 * Reads a spectrum file for a run and says what it understood, what it would write down and what stands in the
 * way. Nothing is kept. A source that is not calibrated is analysed to be looked at, and refused.
 *
 * @param band as the person says; null tells it by the carrier
 */
export function lookAtSweep(
  bytes: Uint8Array,
  hints: SweepHints,
  band: BandKey | null,
  run: RunForSweep,
): SweepLookResult {
  const sweep = readSweep(bytes, hints);
  if (!sweep.ok) return sweep;
  const { understood, questions, notes } = sweep;
  const told = band === null ? tellBand(sweep, run.sheet) : ({ ok: true, band } as const);
  const bare = {
    ...{ ok: true as const, sweep, understood, questions, notes },
    ...{ trace: thinTrace(sweep, highest(sweep), DRAWN_POINTS), analysis: null, readings: [] },
  };
  const unusable = whyNoVerdict(sweep);
  if (!told.ok) return { ...bare, band: null, refusal: unusable ?? told.reason };
  const testFreqHz = testFrequencyOf(run.sheet, told.band);
  if (testFreqHz === null) {
    const refusal = `The test plan states no test frequency on ${bandLabel(told.band)}.`;
    return { ...bare, band: told.band, refusal };
  }
  const limits = limitsOn(told.band, run);
  const found = analyseSweep(sweep, {
    ...{ testFreqHz, path: run.path, limitDbcAt: limits.at },
    lookOnly: unusable !== null,
  });
  if (!found.ok) return { ...bare, band: told.band, refusal: unusable ?? found.reason };

  const planned = run.frequencyPlan === null ? null : planForBand(run.frequencyPlan, told.band);
  const plan = planned?.ok === true ? planned.plan : null;
  const analysis = nameAll(found, sweep, plan, limits.at);
  const ofBand = run.sheet.points.filter((point) => point.band === told.band);
  const { readings, notes: left } = readingsOf(ofBand, sweep, analysis);
  const offPlan =
    plan === null ? null : carrierOffPlan(plan, found.fundamental.freqHz, lineSpacing(understood));
  return {
    ok: true,
    sweep,
    understood,
    questions: [...questions, ...found.questions],
    notes: [
      ...notes,
      ...found.notes,
      ...(offPlan === null ? [] : [offPlan]),
      ...(limits.isMeasured
        ? []
        : ['The power of this band is not measured yet: limits are drawn for the rated power.']),
      ...(found.others.length > MOST_PRODUCTS
        ? [
            `${String(found.others.length)} products stand out; the strongest ${String(MOST_PRODUCTS)} are listed.`,
          ]
        : []),
      ...left,
    ],
    band: told.band,
    refusal: unusable,
    trace: thinTrace(sweep, found.fundamental.levelDbm, DRAWN_POINTS),
    analysis,
    readings: unusable === null ? readings : [],
  };
}
