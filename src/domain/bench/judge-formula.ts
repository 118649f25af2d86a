import { evaluateFormula, parseFormula } from '~/domain/formula/formula';
import type { Formula } from '~/domain/formula/formula';
import { listed } from '~/lib/listed';
import { guardBand, judge, marginOf, probabilityOfConformance } from './decision';
import type { UncertaintyUnit } from './format';
import { NOTHING_READ, marginText } from './judge-point';
import type { PointJudgement } from './judge-point';
import type { RunContext, TestPoint, UncertaintyComponent } from './types';
import { combine, component } from './uncertainty';

const ZERO_CELSIUS_K = 273.15;

/** A quantity that a formula names, with what it came to on the same band. */
export interface FormulaInput {
  label: string;
  judgement: PointJudgement;
  /** Of the value. */
  unit: string;
}

interface Known {
  value: number;
  label: string;
  /** Standard uncertainty in `uUnit`; 0 for what is taken as stated. */
  u: number;
  /** A power in W whose uncertainty is in dB is moved by a factor, all else by a sum. */
  isInDb: boolean;
  nu: number | null;
}

/** Facts of the run and the output stage by the names that formulas have for them; null where not stated. */
function constantOf(name: string, point: TestPoint, context: RunContext): number | null | undefined {
  const { outputStage, ambientC } = context;
  switch (name) {
    case 'devices':
      return outputStage?.devices ?? null;
    case 'theta':
      return outputStage?.thetaKPerW ?? null;
    case 'duty':
      return outputStage?.duty ?? null;
    case 'ambient':
      return ambientC === null ? null : ambientC + ZERO_CELSIUS_K;
    case 'supply_voltage':
      return point.supplyV ?? context.supplyV;
    default:
      return undefined;
  }
}

const CONSTANT_WORDS: Record<string, string> = {
  devices: 'the number of output devices (in the test plan)',
  theta: 'the thermal resistance of the output devices (in the test plan)',
  duty: 'the duty of the output stage (in the test plan)',
  ambient: 'the ambient temperature',
  supply_voltage: 'the supply voltage',
};

type Found = { ok: true; known: Map<string, Known> } | { ok: false; missing: string[]; reason: string };

/** Everything that the formula names; a measured supply comes before the one that was set. */
function findInputs(
  formula: Formula,
  point: TestPoint,
  inputs: ReadonlyMap<string, FormulaInput>,
  context: RunContext,
): Found {
  const known = new Map<string, Known>();
  const missing: string[] = [];
  for (const name of formula.names) {
    const input = inputs.get(name);
    const value = input?.judgement.value ?? null;
    if (input !== undefined && value !== null) {
      const { U, k, uUnit, nuEff } = input.judgement;
      if (U === null || k === null) {
        return { ok: false, missing: [], reason: `${input.label} has no uncertainty, so neither has this.` };
      }
      const isInDb = input.unit === 'W' && uUnit === 'dB';
      known.set(name, { value, label: input.label, u: U / k, isInDb, nu: nuEff });
      continue;
    }
    const constant = constantOf(name, point, context);
    if (constant === null || constant === undefined) {
      missing.push(CONSTANT_WORDS[name] ?? input?.label.toLowerCase() ?? name);
    } else {
      const label = CONSTANT_WORDS[name] ?? name;
      known.set(name, { value: constant, label, u: 0, isInDb: false, nu: null });
    }
  }
  return missing.length === 0
    ? { ok: true, known }
    : { ok: false, missing, reason: `It is computed from other readings; still needed: ${listed(missing)}.` };
}

/**
 * What each input's standard uncertainty does to the value: half of the difference between the formula one standard
 * uncertainty up and one down (JCGM 100, 5.1.3, note 2), the inputs taken as uncorrelated.
 */
function propagate(formula: Formula, known: ReadonlyMap<string, Known>): UncertaintyComponent[] {
  const values = Object.fromEntries([...known].map(([name, { value }]) => [name, value]));
  return [...known].flatMap(([name, { value, label, u, isInDb, nu }]) => {
    if (u === 0) return [];
    const moved = (sign: number): number => (isInDb ? value * 10 ** ((sign * u) / 10) : value + sign * u);
    const up = evaluateFormula(formula, { ...values, [name]: moved(1) });
    const down = evaluateFormula(formula, { ...values, [name]: moved(-1) });
    return [component(label, (up - down) / 2, 'normal', { k: 1, ...(nu === null ? {} : { nu }) })];
  });
}

/**
 * Verdict of a point whose quantity is computed from others of its band. A measured input carries its uncertainty
 * over; what was only set or stated (supply, ambient, thermal resistance) is taken as it is, and the budget shows
 * that by leaving it out.
 *
 * @param inputs by quantity key: what the other points of the band came to
 */
export function judgeFormula(
  point: TestPoint,
  inputs: ReadonlyMap<string, FormulaInput>,
  context: RunContext,
): PointJudgement {
  const { quantity } = point;
  const stop = (reason: string, rest: Partial<PointJudgement> = {}): PointJudgement => ({
    ...NOTHING_READ,
    ...rest,
    marginText: 'no verdict',
    stopped: reason,
  });
  const parsed = parseFormula(quantity.formula ?? '');
  if (!parsed.ok) return stop(`Its formula cannot be read: ${parsed.reason}`);
  const { formula } = parsed;
  const found = findInputs(formula, point, inputs, context);
  if (!found.ok) return stop(found.reason);
  const value = evaluateFormula(
    formula,
    Object.fromEntries([...found.known].map(([name, known]) => [name, known.value])),
  );
  if (!Number.isFinite(value)) return stop('Its formula has no value for these readings.');
  const components = propagate(formula, found.known);
  if (components.some(({ u }) => !Number.isFinite(u)))
    return stop('Its formula has no uncertainty for these readings.');
  const { U, k, uc, nuEff } = combine(components);
  const { lower, upper, decision } = point;
  const stated = {
    value,
    U,
    uUnit: unitOf(quantity.unit),
    k,
    nuEff,
    uComponents: components,
    low: value - U,
    high: value + U,
    lower,
    upper,
    guard: guardBand(U, decision),
    n: 1,
  };
  if (lower === null && upper === null) return stop('The point has no limit to be judged by.', stated);
  const verdict = judge({ value, U, lower, upper, decision });
  const isUnder = lower !== null && value < lower;
  return {
    ...NOTHING_READ,
    ...stated,
    verdict,
    marginText: marginText(verdict, marginOf(value, lower, upper), isUnder, quantity),
    pConform: probabilityOfConformance(value, uc, lower, upper),
  };
}

/** A computed power has its uncertainty in W, because heat may be near nothing, where dB say little. */
function unitOf(unit: TestPoint['quantity']['unit']): UncertaintyUnit {
  if (unit === 'dBc' || unit === 'dBm') return 'dB';
  return unit === '' ? '1' : unit;
}
