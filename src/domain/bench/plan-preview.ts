import { bandLabel, commonEdges } from './bands';
import { formatFrequency } from './format';
import { bandsOf, parseExpression, planForBand, PLAN_SYMBOL, reachOf } from './frequency-plan';
import type { BandPlan, FrequencyPlan } from './frequency-plan';
import { placer, productsOf } from './plan-products';
import type { BandKey } from './types';

/** Products up to this order are warned of: higher ones are weak in a mixer that is driven rightly; common practice. */
const WARNED_ORDER = 5;

/** A product that falls inside the band on which it comes about, where no filter takes it away. */
export interface ProductInBand {
  name: string;
  order: number;
  lowHz: number;
  highHz: number;
}

/** What a plan says about a band. */
export interface BandPreview {
  band: BandKey;
  /** Where the oscillators put the carrier; null where the plan cannot say. */
  carrier: { lowHz: number; highHz: number } | null;
  /** What the last mixer makes besides; null where the carrier is no sum or difference of two. */
  image: { lowHz: number; highHz: number } | null;
  /** A sentence where something is wrong with the plan there. */
  problem: string | null;
  inBand: ProductInBand[];
}

/** Products of low order that run through a band while the carrier is tuned over it. */
function productsInBand(plan: BandPlan, band: BandKey): ProductInBand[] {
  const edges = commonEdges(band);
  const reach = reachOf(plan.carrier.mix, plan);
  const lowest = placer(plan, Math.max(reach.lowHz, edges.lowHz));
  const highest = placer(plan, Math.min(reach.highHz, edges.highHz));
  return productsOf(plan, WARNED_ORDER).flatMap(({ name, order, mix }) => {
    const ends = [lowest(mix), highest(mix)];
    const lowHz = Math.max(edges.lowHz, Math.min(...ends.map(({ centreHz, halfHz }) => centreHz - halfHz)));
    const highHz = Math.min(edges.highHz, Math.max(...ends.map(({ centreHz, halfHz }) => centreHz + halfHz)));
    return lowHz > highHz ? [] : [{ name, order, lowHz, highHz }];
  });
}

/** What a plan says, band by band. */
export function previewPlan(plan: FrequencyPlan): BandPreview[] {
  return bandsOf(plan).map((band) => {
    const resolved = planForBand(plan, band);
    if (!resolved.ok) return { band, carrier: null, image: null, problem: resolved.reason, inBand: [] };
    const carrier = reachOf(resolved.plan.carrier.mix, resolved.plan);
    const { image: imageMix } = resolved.plan.carrier;
    const image = imageMix === null ? null : reachOf(imageMix, resolved.plan);
    const edges = commonEdges(band);
    if (carrier.highHz < edges.lowHz || carrier.lowHz > edges.highHz) {
      const lies =
        carrier.lowHz === carrier.highHz
          ? `at ${formatFrequency(carrier.lowHz)}`
          : `from ${formatFrequency(carrier.lowHz)} to ${formatFrequency(carrier.highHz)}`;
      const problem = `The oscillators put the carrier ${lies}, outside ${bandLabel(band)}. Look at their frequencies and signs.`;
      return { band, carrier, image, problem, inBand: [] };
    }
    return { band, carrier, image, problem: null, inBand: productsInBand(resolved.plan, band) };
  });
}

/** A sentence for each thing in a plan that makes no sense, with the field it stands in: `carriers.0.expression`. */
export function checkPlan(plan: FrequencyPlan): { field: string; sentence: string }[] {
  const faults: { field: string; sentence: string }[] = [];
  const fault = (field: string, sentence: string): void => void faults.push({ field, sentence });
  const seen = new Map<string, string>();
  for (const [index, { symbol, ranges }] of plan.oscillators.entries()) {
    const field = `oscillators.${String(index)}`;
    if (!PLAN_SYMBOL.test(symbol)) {
      fault(`${field}.symbol`, 'A symbol is up to ten letters and digits, a letter first: VFO, XO2.');
    } else if (seen.has(symbol))
      fault(`${field}.symbol`, `${symbol} stands there twice. Give each its own symbol.`);
    seen.set(symbol, field);
    for (const [row, { band, lowHz, highHz }] of ranges.entries()) {
      const where = `${field}.ranges.${String(row)}`;
      if (!(lowHz > 0 && highHz >= lowHz)) {
        fault(
          `${where}.lowHz`,
          'An oscillator runs above 0 Hz, and its lower end is not above its upper end.',
        );
      }
      if (ranges.findIndex((each) => each.band === band) !== row) {
        fault(
          `${where}.band`,
          `${symbol} has two ranges ${band === null ? 'for all bands' : `on ${bandLabel(band)}`}.`,
        );
      }
    }
  }
  const stageSymbols = new Set(plan.stages.map(({ symbol }) => symbol));
  for (const [index, { symbol, band, expression }] of plan.stages.entries()) {
    const field = `stages.${String(index)}`;
    if (!PLAN_SYMBOL.test(symbol)) {
      fault(`${field}.symbol`, 'A symbol is up to ten letters and digits, a letter first: LO, IF.');
    } else if (seen.has(symbol))
      fault(`${field}.symbol`, `${symbol} is an oscillator already. Give the stage its own symbol.`);
    if (plan.stages.findIndex((each) => each.symbol === symbol && each.band === band) !== index) {
      fault(
        `${field}.band`,
        `${symbol} stands there twice ${band === null ? 'for all bands' : `on ${bandLabel(band)}`}.`,
      );
    }
    faultOfExpression(expression, [...seen.keys(), ...stageSymbols], (sentence) =>
      fault(`${field}.expression`, sentence),
    );
  }
  if (plan.carriers.length === 0) fault('carriers', 'Say how the carrier comes about: VFO + BFO.');
  for (const [index, { band, expression }] of plan.carriers.entries()) {
    const field = `carriers.${String(index)}`;
    if (plan.carriers.findIndex((each) => each.band === band) !== index) {
      fault(
        `${field}.band`,
        `The carrier stands there twice ${band === null ? 'for all bands' : `on ${bandLabel(band)}`}.`,
      );
    }
    faultOfExpression(expression, [...seen.keys(), ...stageSymbols], (sentence) =>
      fault(`${field}.expression`, sentence),
    );
  }
  for (const [index, { spacingHz }] of plan.spacings.entries()) {
    if (!(spacingHz > 0)) fault(`spacings.${String(index)}.spacingHz`, 'A spacing is above 0 Hz.');
  }
  return faults;
}

function faultOfExpression(
  expression: string,
  known: readonly string[],
  fault: (sentence: string) => void,
): void {
  const parsed = parseExpression(expression);
  if (!parsed.ok) {
    fault(parsed.reason);
    return;
  }
  const unknown = parsed.terms.find(({ symbol }) => !known.includes(symbol));
  if (unknown !== undefined) {
    fault(
      `There is no ${unknown.symbol} in the plan; it has ${[...new Set(known)].filter((each) => each !== '').join(', ') || 'no oscillator yet'}.`,
    );
  }
}
