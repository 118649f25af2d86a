import { BAND_KEYS, bandLabel } from './bands';
import type { BandKey } from './types';

/** Where an oscillator may run, Hz; on one band, or on all of which nothing else is said. A fixed one has equal ends. */
export interface OscillatorRange {
  band: BandKey | null;
  lowHz: number;
  highHz: number;
}

/** A source of frequency: oscillator, synthesizer, clock that mixes. */
export interface Oscillator {
  /** As expressions and product names call it: `VFO`. */
  symbol: string;
  /** As the trade says it: `local oscillator`. */
  name: string;
  ranges: OscillatorRange[];
}

/** A signal between the oscillators and the carrier: the output of a mixer (`VFO + XO`) or a multiplier (`3 × XO`). */
export interface PlanStage {
  symbol: string;
  name: string;
  /** Null: on every band of which nothing else is said. */
  band: BandKey | null;
  expression: string;
}

/** How the carrier comes about. */
export interface PlanCarrier {
  band: BandKey | null;
  expression: string;
}

/** Lines that stand beside others at a fixed distance: ripple of the supply, a switching converter, a clock. */
export interface PlanSpacing {
  kind: 'supply' | 'clock';
  name: string;
  spacingHz: number;
}

/** What makes a model's frequencies; stored as data with each revision. */
export interface FrequencyPlan {
  oscillators: Oscillator[];
  stages: PlanStage[];
  carriers: PlanCarrier[];
  spacings: PlanSpacing[];
}

/** How often each oscillator enters a frequency, in their order in the plan. */
export type Mix = readonly number[];

/** A mix that has a name, and the one its mixer makes besides. */
interface NamedMix {
  symbol: string;
  name: string;
  mix: Mix;
  image: Mix | null;
}

/** A plan on one band, its expressions worked out. */
export interface BandPlan {
  oscillators: { symbol: string; name: string; lowHz: number; highHz: number }[];
  stages: NamedMix[];
  carrier: { mix: Mix; image: Mix | null };
  spacings: PlanSpacing[];
}

type BandPlanResult = { ok: true; plan: BandPlan } | { ok: false; reason: string };

/** One signed part of an expression. */
interface Term {
  factor: number;
  symbol: string;
}

type TermsResult = { ok: true; terms: Term[] } | { ok: false; reason: string };

/** Letters and digits, a letter first. */
export const PLAN_SYMBOL = /^[A-Za-z][A-Za-z0-9]{0,9}$/;

const TERM = /^([+\-−–]?)\s*(?:(\d{1,2})\s*[×x*·]\s*)?([A-Za-z][A-Za-z0-9]{0,9})(?:\s*[×*·]\s*(\d{1,2}))?\s*/;

/** The parts of an expression such as `VFO + 2 × BFO`. */
export function parseExpression(text: string): TermsResult {
  const terms: Term[] = [];
  let rest = text.trim();
  if (rest === '')
    return { ok: false, reason: 'The expression is empty. Write what makes the frequency: VFO + BFO.' };
  while (rest !== '') {
    const match = TERM.exec(rest);
    const [all = '', sign = '', before = '1', symbol = '', after = '1'] = match ?? [];
    if (match === null || (terms.length > 0 && sign === '')) {
      return {
        ok: false,
        reason: `“${text}” cannot be read at “${rest.slice(0, 12)}”. Write sums and differences of oscillators: VFO + 2 × BFO.`,
      };
    }
    const factor = Number(before) * Number(after);
    if (factor === 0) return { ok: false, reason: `“${text}” takes ${symbol} zero times. Leave it out.` };
    terms.push({ factor: sign === '' || sign === '+' ? factor : -factor, symbol });
    rest = rest.slice(all.length);
  }
  return { ok: true, terms };
}

/** What holds on a band: what is said of it, otherwise what is said of all. */
export function onBand<T extends { band: BandKey | null }>(all: readonly T[], band: BandKey): T | undefined {
  return all.find((each) => each.band === band) ?? all.find((each) => each.band === null);
}

/** Bands of which a plan says how their carrier comes about; every band where it says it of all. */
export function bandsOf({ carriers }: FrequencyPlan): BandKey[] {
  return BAND_KEYS.filter((band) => onBand(carriers, band) !== undefined);
}

const add = (a: Mix, b: Mix, factor: number): number[] =>
  a.map((each, index) => each + factor * (b[index] ?? 0));

/** Oscillators that enter a mix, counted each time: 3 for VFO + 2 × BFO. */
export function orderOf(mix: Mix): number {
  return mix.reduce((sum, each) => sum + Math.abs(each), 0);
}

/** Works out the expressions of a plan for one band. Refuses with a sentence what the plan leaves open there. */
export function planForBand(plan: FrequencyPlan, band: BandKey): BandPlanResult {
  const oscillators = plan.oscillators.flatMap(({ symbol, name, ranges }) => {
    const range = onBand(ranges, band);
    return range === undefined ? [] : [{ symbol, name, lowHz: range.lowHz, highHz: range.highHz }];
  });
  const zero: Mix = oscillators.map(() => 0);
  const known = new Map<string, Mix>(
    oscillators.map(({ symbol }, index) => [symbol, zero.map((_, place) => (place === index ? 1 : 0))]),
  );

  const resolve = (
    expression: string,
  ): { ok: true; mix: Mix; image: Mix | null } | { ok: false; reason: string } => {
    const parsed = parseExpression(expression);
    if (!parsed.ok) return parsed;
    const parts: Mix[] = [];
    for (const { factor, symbol } of parsed.terms) {
      const mix = known.get(symbol);
      if (mix === undefined) {
        return {
          ok: false,
          reason: `“${expression}” names ${symbol}, of which the plan says nothing on ${bandLabel(band)}. Enter it above.`,
        };
      }
      parts.push(add(zero, mix, factor));
    }
    const [first = zero, second, ...more] = parts;
    const sum = parts.reduce((total, part) => add(total, part, 1), zero);
    // A mixer makes the sum and the difference of its two inputs; the one that is not wanted is its image.
    const image = second === undefined || more.length > 0 ? null : add(first, second, -1);
    return { ok: true, mix: sum, image };
  };

  const stages: NamedMix[] = [];
  for (const { symbol, name } of plan.stages) {
    const stage = onBand(
      plan.stages.filter((each) => each.symbol === symbol),
      band,
    );
    if (stage === undefined || known.has(symbol)) continue;
    const resolved = resolve(stage.expression);
    // A stage that this band does not use may name what it does not have; the carrier says so where it needs it.
    if (!resolved.ok) continue;
    known.set(symbol, resolved.mix);
    stages.push({ symbol, name, mix: resolved.mix, image: resolved.image });
  }

  const carrier = onBand(plan.carriers, band);
  if (carrier === undefined) {
    return { ok: false, reason: `The plan does not say how the carrier on ${bandLabel(band)} comes about.` };
  }
  const resolved = resolve(carrier.expression);
  if (!resolved.ok) return resolved;
  if (orderOf(resolved.mix) === 0) {
    return { ok: false, reason: `“${carrier.expression}” is nothing: its oscillators cancel.` };
  }
  return {
    ok: true,
    plan: {
      oscillators,
      stages,
      carrier: { mix: resolved.mix, image: resolved.image },
      spacings: plan.spacings,
    },
  };
}

/** Lowest and highest frequency that a mix reaches, Hz; below zero the difference is the other way round. */
export function reachOf(mix: Mix, { oscillators }: BandPlan): { lowHz: number; highHz: number } {
  let lowHz = 0;
  let highHz = 0;
  for (const [index, times] of mix.entries()) {
    const oscillator = oscillators[index];
    if (oscillator === undefined || times === 0) continue;
    lowHz += times * (times > 0 ? oscillator.lowHz : oscillator.highHz);
    highHz += times * (times > 0 ? oscillator.highHz : oscillator.lowHz);
  }
  if (highHz <= 0) return { lowHz: -highHz, highHz: -lowHz };
  return { lowHz: Math.max(0, lowHz), highHz: Math.max(highHz, -lowHz) };
}
