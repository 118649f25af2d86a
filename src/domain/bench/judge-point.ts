import { bandLabel, bandOf } from './bands';
import { buildBudget } from './budget';
import { guardBand, judge, marginOf, probabilityOfConformance } from './decision';
import { formatNumber, formatValue } from './format';
import type { UncertaintyUnit } from './format';
import { limitDbc, limitSlope } from './limit-rules';
import type { ChosenRule } from './limit-rules';
import { pathLoss } from './paths';
import type { Quantity } from './quantities';
import type {
  InstrumentSpec,
  PathSpec,
  Reading,
  RunContext,
  TestPoint,
  UncertaintyComponent,
  Verdict,
} from './types';
import { component, dbIntervalToW, repeatability } from './uncertainty';
import { wToDbm } from './units';

/** Power of the fundamental at the unit on the band of a point, with its standard uncertainty. */
export interface CarrierPower {
  powerW: number;
  uDb: number;
}

/** Everything besides point and readings that a verdict rests on. */
export interface JudgeContext extends RunContext {
  instrument: InstrumentSpec | null;
  path: PathSpec | null;
  /** See {@link carrierOf}; null where the power of the band has not been measured. */
  carrier: CarrierPower | null;
  rule: ChosenRule | null;
}

/** A point with what was found, ready to be stored, printed and drawn. */
export interface PointJudgement {
  verdict: Verdict;
  /** At the unit, in the unit of the limit; the mean of n readings. */
  value: number | null;
  /** At the meter, in the unit of the quantity; the mean of n readings. */
  atMeter: number | null;
  /** Expanded uncertainty in `uUnit`; null where there is none to state. */
  U: number | null;
  uUnit: UncertaintyUnit | null;
  k: number | null;
  /** Effective degrees of freedom; null is infinitely many. */
  nuEff: number | null;
  uComponents: UncertaintyComponent[];
  /** value − U and value + U in the unit of the value; not symmetric for a power. */
  low: number | null;
  high: number | null;
  /** Limits in the unit of the value. */
  lower: number | null;
  upper: number | null;
  /** Guard band w in `uUnit`; 0 for a simple decision. */
  guard: number;
  ruleKey: string | null;
  ruleText: string | null;
  n: number;
  /** True where the product was hidden in the noise. */
  atMost: boolean;
  marginText: string;
  pConform: number | null;
  /** Why there is a reading but no verdict. */
  stopped: string | null;
}

/** The judgement of a point at which nothing was read. */
export const NOTHING_READ: PointJudgement = {
  verdict: 'not_run',
  value: null,
  atMeter: null,
  U: null,
  uUnit: null,
  k: null,
  nuEff: null,
  uComponents: [],
  low: null,
  high: null,
  lower: null,
  upper: null,
  guard: 0,
  ruleKey: null,
  ruleText: null,
  n: 0,
  atMost: false,
  marginText: 'not run',
  pConform: null,
  stopped: null,
};

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

type AtUnit = { ok: true; values: number[] } | { ok: false; reason: string };

/** Readings corrected by the path: what follows from the meter *at the unit*. */
function atUnit(
  quantity: Quantity,
  readings: readonly Reading[],
  txFreqHz: number | null,
  productFreqHz: number | null,
  path: PathSpec | null,
): AtUnit {
  const values = readings.map((reading) => reading.value);
  if (quantity.path === 'none' || path === null || path.parts.length === 0) return { ok: true, values };
  const wanted = quantity.path === 'adds' ? 'to_instrument' : 'from_generator';
  if (path.direction !== wanted) {
    const reason =
      wanted === 'to_instrument'
        ? 'This path leads from a generator to the unit: choose one that leads to the instrument.'
        : 'This path leads to an instrument: choose one that leads from the generator to the unit.';
    return { ok: false, reason };
  }
  if (txFreqHz === null)
    return { ok: false, reason: 'State the test frequency: the path loses more at some than at others.' };
  const carrier = pathLoss(path, txFreqHz);
  if (!carrier.ok) return carrier;
  if (quantity.unit === 'W') {
    return { ok: true, values: values.map((value) => value * 10 ** (carrier.lossDb / 10)) };
  }
  if (quantity.unit !== 'dBc') {
    const sign = quantity.path === 'adds' ? 1 : -1;
    return { ok: true, values: values.map((value) => value + sign * carrier.lossDb) };
  }
  if (productFreqHz === null)
    return { ok: false, reason: "State the product's frequency: the path is corrected there." };
  const product = pathLoss(path, productFreqHz);
  if (!product.ok) return product;
  return { ok: true, values: values.map((value) => value + product.lossDb - carrier.lossDb) };
}

function frequencyProblem(point: TestPoint, context: RunContext): string | null {
  if (point.band === null || point.freqHz === null || context.region === null) return null;
  if (bandOf(point.freqHz, context.region) === point.band) return null;
  return `The test frequency is outside ${bandLabel(point.band)} in Region ${String(context.region)}, where the unit goes.`;
}

interface Limits {
  lower: number | null;
  upper: number | null;
  ruleKey: string | null;
  ruleText: string | null;
  /** The limit's own uncertainty where it moves with the measured power. */
  extra: UncertaintyComponent[];
}

function limitsOf(
  point: TestPoint,
  productFreqHz: number | null,
  context: JudgeContext,
): ({ ok: true } & Limits) | { ok: false; reason: string } {
  if (point.limitRule === 'fixed') {
    return { ok: true, lower: point.lower, upper: point.upper, ruleKey: null, ruleText: null, extra: [] };
  }
  if (context.rule === null) return { ok: false, reason: 'No emission rule is chosen for this run.' };
  if (context.carrier === null) {
    return { ok: false, reason: 'The limit depends on the power of this band: measure the power first.' };
  }
  if (point.freqHz === null)
    return { ok: false, reason: 'The limit depends on the transmit frequency: state it.' };
  const args = { powerW: context.carrier.powerW, txFreqHz: point.freqHz, productFreqHz };
  const limit = limitDbc(context.rule, args);
  if (!limit.ok) return limit;
  // Where the limit is an absolute level, an error of the power is an error of the margin. It is taken as
  // independent of the ratio's errors, which is the safe side.
  const slope = limitSlope(context.rule, args);
  const extra =
    slope > 1e-6 && context.carrier.uDb > 0
      ? [component('Limit, by the measured power', slope * context.carrier.uDb, 'normal', { k: 1 })]
      : [];
  // A works may ask for more than the law does, never for less.
  const upper = point.upper === null ? limit.limitDbc : Math.min(point.upper, limit.limitDbc);
  return { ok: true, lower: point.lower, upper, ruleKey: limit.ruleKey, ruleText: limit.ruleText, extra };
}

/** How far a value is from its limit, in words. */
export function marginText(
  verdict: Verdict,
  margin: number | null,
  isUnder: boolean,
  quantity: Quantity,
): string {
  if (verdict === 'not_run') return 'no verdict';
  if (quantity.format === 'yes_no') return verdict === 'pass' ? 'yes' : 'no';
  if (margin === null) return 'no limit';
  const size = Math.abs(margin);
  const side = isUnder ? 'under' : 'over';
  const amount =
    quantity.format === 'ratio' || quantity.format === 'level'
      ? `${formatNumber(size, 1)} dB`
      : quantity.format === 'temperature'
        ? `${formatNumber(size, 1)} K`
        : formatValue(size, quantity).replace('+', '');
  if (verdict === 'too_close') {
    return `too close to call: ${amount} ${margin >= 0 ? 'in hand' : side}, within the uncertainty`;
  }
  return margin >= 0 ? `${amount} in hand` : `${amount} ${side} the limit`;
}

function judgeCheck(readings: readonly Reading[]): PointJudgement {
  const value = Math.min(...readings.map((reading) => reading.value));
  const verdict = value === 1 ? 'pass' : 'fail';
  return {
    ...NOTHING_READ,
    verdict,
    value,
    atMeter: value,
    n: readings.length,
    marginText: value === 1 ? 'yes' : 'no',
  };
}

/** Judges readings that are all of one product (or of no product at all). */
function judgeOne(point: TestPoint, readings: readonly Reading[], context: JudgeContext): PointJudgement {
  const { quantity } = point;
  const first = readings[0];
  if (first === undefined) return NOTHING_READ;
  if (quantity.format === 'yes_no') return judgeCheck(readings);

  const isRatio = quantity.unit === 'dBc';
  const isPower = quantity.unit === 'W';
  const harmonicHz = quantity.order === null || point.freqHz === null ? null : quantity.order * point.freqHz;
  const productFreqHz = isRatio ? (harmonicHz ?? first.freqHz) : null;
  const atMost = readings.some((reading) => reading.atMost === true);
  const base = {
    ...NOTHING_READ,
    n: readings.length,
    atMeter: mean(readings.map((reading) => reading.value)),
    atMost,
  };
  const stop = (reason: string, rest: Partial<PointJudgement> = {}): PointJudgement => ({
    ...base,
    ...rest,
    verdict: 'not_run',
    marginText: 'no verdict',
    stopped: reason,
  });

  const corrected = atUnit(quantity, readings, point.freqHz, productFreqHz, context.path);
  if (!corrected.ok) return stop(corrected.reason);
  const value = mean(corrected.values);
  if (!Number.isFinite(value) || (isPower && value <= 0))
    return stop('The reading is not a usable number.', { value });

  const limits = limitsOf(point, productFreqHz, context);
  if (!limits.ok) return stop(limits.reason, { value });
  const { lower, upper, ruleKey, ruleText } = limits;
  const known = { value, lower, upper, ruleKey, ruleText };
  if (lower === null && upper === null) return stop('The point has no limit to be judged by.', known);
  if (context.instrument === null)
    return stop('Choose the instrument: without it there is no uncertainty.', known);

  const scaled = corrected.values.map((each) => (isPower ? wToDbm(each) : each));
  const typeA = repeatability(scaled);
  const budget = buildBudget({
    quantity,
    value: mean(readings.map((reading) => reading.value)),
    freqHz: point.freqHz,
    productFreqHz,
    instrument: context.instrument,
    path: context.path,
    unitVswr: context.unitVswr ?? null,
    attenuationHeld: readings.every((reading) => reading.attenuationHeld === true),
    extra: [...limits.extra, ...(typeA === null ? [] : [typeA])],
  });
  if (!budget.ok) return stop(budget.reason, known);

  const { U, k, uc, nuEff } = budget;
  const interval = isPower ? dbIntervalToW(value, U) : { lowW: value - U, highW: value + U };
  const legal = point.limitRule === 'spurious';
  const decision = legal ? 'guarded' : point.decision;
  const stated = {
    ...known,
    U,
    uUnit: budget.unit,
    k,
    nuEff,
    uComponents: budget.components,
    low: interval.lowW,
    high: interval.highW,
    guard: guardBand(U, decision),
  };

  const problem = frequencyProblem(point, context);
  if (problem !== null) return stop(problem, stated);
  const dueOn = context.instrument.calibration?.dueOn;
  if (legal && dueOn !== undefined && dueOn < context.testedOn) {
    return stop(
      `The calibration of the instrument was due on ${dueOn}; no verdict on a legal limit rests on it.`,
      stated,
    );
  }

  // Powers are judged in dBm, where their uncertainty is symmetric.
  const toScale = (limit: number | null): number | null =>
    limit === null || !isPower ? limit : wToDbm(limit);
  const scale = { value: isPower ? wToDbm(value) : value, lower: toScale(lower), upper: toScale(upper) };
  const verdict = judge({ ...scale, U, decision });
  return {
    ...base,
    ...stated,
    verdict,
    marginText: marginText(verdict, marginOf(value, lower, upper), lower !== null && value < lower, quantity),
    pConform: probabilityOfConformance(scale.value, uc, scale.lower, scale.upper),
  };
}

/** Worse comes first: a product that fails decides over one that passes. */
const SEVERITY: Record<Verdict, number> = { fail: 0, not_run: 1, too_close: 2, pass: 3 };

/**
 * Verdict of a test point from its readings. Voided readings are left out; several readings count with their
 * mean in the unit of the limit. Readings of different spurious products are judged each, and the worst
 * decides. A reading on which no verdict can rest (no carrier power, instrument overdue on a legal limit,
 * path without a loss there) gives `not_run` with the reason in `stopped`.
 * @param readings all readings of this point, in the unit of the quantity, at the meter
 */
export function judgePoint(
  point: TestPoint,
  readings: readonly Reading[],
  context: JudgeContext,
): PointJudgement {
  const counted = readings.filter((reading) => !reading.voided && reading.quantityKey === point.quantity.key);
  if (point.quantity.key !== 'spurious') return judgeOne(point, counted, context);
  const products = new Map<number | null, Reading[]>();
  for (const reading of counted) {
    products.set(reading.freqHz, [...(products.get(reading.freqHz) ?? []), reading]);
  }
  let worst: PointJudgement | null = null;
  for (const group of products.values()) {
    const each = judgeOne(point, group, context);
    if (
      worst === null ||
      SEVERITY[each.verdict] < SEVERITY[worst.verdict] ||
      (each.verdict === worst.verdict && (each.pConform ?? 1) < (worst.pConform ?? 1))
    ) {
      worst = each;
    }
  }
  return worst ?? NOTHING_READ;
}

/** Carrier power of a band from the judgement of its power point; null where that has no value or no uncertainty. */
export function carrierOf(power: PointJudgement): CarrierPower | null {
  if (power.value === null || power.U === null || power.k === null || power.uUnit !== 'dB') return null;
  return { powerW: power.value, uDb: power.U / power.k };
}
