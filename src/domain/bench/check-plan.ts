import { parseFormula } from '~/domain/formula/formula';
import { choicesOf, groupsThatMatter } from '~/domain/planning/choices';
import { keysOf, parseCondition } from '~/domain/planning/condition';
import { checkConfiguration } from '~/domain/planning/configuration';
import type { OptionGroup } from '~/domain/planning/configuration';
import { listed } from '~/lib/listed';
import { bandLabel, bandOf } from './bands';
import type { PlanPoint } from './plan-lines';
import { FORMULA_CONSTANTS } from './quantities';
import type { QuantityBook } from './quantities';
import { resolvePoints } from './resolve-points';
import type { OutputStage, Region } from './types';

export interface PlanToCheck {
  points: readonly (PlanPoint & { position: number })[];
  outputStage: OutputStage | null;
}

/** How many configurations are looked at; a model of more has the rest found at the bench. */
const mostConfigurations = 5000;

/**
 * What is wrong with a test plan beyond its single points: a test frequency outside its band where the rig goes, and for
 * some configuration no point at all, a point that is there twice, a limit by rule without the power that it follows
 * from, or a computed quantity without what it is computed from. Conditions have to be readable.
 *
 * @param regions ITU Regions into which the model goes
 */
export function planFaults(
  plan: PlanToCheck,
  quantities: QuantityBook,
  regions: readonly Region[],
  groups: readonly OptionGroup[],
): string[] {
  const faults = new Set(plan.points.flatMap((point) => frequencyFaults(point, quantities, regions)));
  for (const chosen of configurations(plan.points, groups)) {
    const resolved = resolvePoints(plan.points, chosen);
    if (!resolved.ok) return [...faults, resolved.reason];
    const options = chosen.size === 0 ? '' : ` (with ${listed([...chosen])})`;
    if (resolved.points.every(({ required }) => !required)) {
      faults.add(`No point is required of a rig${options}`);
    }
    const told = new Set([...faults].map(withoutOptions));
    for (const fault of faultsTogether(resolved.points, plan.outputStage, quantities)) {
      if (!told.has(fault)) faults.add(`${fault}${options}`);
    }
  }
  return [...faults].map((fault) => (fault.endsWith('.') ? fault : `${fault}.`));
}

const withoutOptions = (fault: string): string => fault.replace(/ \(with [^()]*\)$/, '');

function* configurations(
  points: PlanToCheck['points'],
  groups: readonly OptionGroup[],
): Generator<Set<string>> {
  const used = new Set(
    points.flatMap(({ condition }) => {
      const parsed = condition === null ? null : parseCondition(condition);
      return parsed?.ok === true ? [...keysOf(parsed.ast)] : [];
    }),
  );
  const relevant = groupsThatMatter(groups, used);
  let tried = 0;
  for (const chosen of choicesOf(relevant)) {
    tried += 1;
    if (tried > mostConfigurations) return;
    if (checkConfiguration(relevant, chosen).ok) yield chosen;
  }
}

type Point = PlanToCheck['points'][number];

function frequencyFaults(point: Point, quantities: QuantityBook, regions: readonly Region[]): string[] {
  const { band, freqHz, position } = point;
  if (band === null) return [];
  if (freqHz === null) {
    const quantity = quantities.get(point.quantityKey);
    const goesByIt =
      quantity !== undefined && (quantity.path !== 'none' || quantity.format === 'frequency_error');
    return goesByIt ? [`Point ${position}: a band needs its test frequency.`] : [];
  }
  const outside = regions.filter((region) => bandOf(freqHz, region) !== band);
  if (outside.length === 0) return [];
  const where = outside.length === 1 ? 'Region' : 'Regions';
  return [
    `Point ${position}: the test frequency is outside ${bandLabel(band)} in ${where} ${listed(outside.map(String))}.`,
  ];
}

function faultsTogether(
  points: readonly Point[],
  outputStage: OutputStage | null,
  quantities: QuantityBook,
): string[] {
  return points.flatMap((point, index) => {
    const quantity = quantities.get(point.quantityKey);
    const name = `Point ${point.position}`;
    const sameBand = points.filter(({ band }) => band === point.band);
    const has = (key: string) => sameBand.some(({ quantityKey }) => quantityKey === key);
    const twin = points.slice(0, index).find((other) => isSame(other, point));
    const missing =
      quantity === undefined || quantity.formula === null
        ? []
        : namesOf(quantity.formula).filter((key) => !has(key) && !isGiven(key, outputStage));
    const labels = missing.map((key) => quantities.get(key)?.label ?? constantWords[key] ?? key);
    return [
      ...(twin === undefined ? [] : [`${name} asks the same as point ${twin.position}`]),
      ...(point.limitRule === 'spurious' && !has('rf_power')
        ? [`${name}: a limit by rule follows from the power of its band; add that power`]
        : []),
      ...(missing.length === 0
        ? []
        : [`${name}: ${quantity?.label ?? ''} is computed, and lacks ${listed(labels)} on its band`]),
    ];
  });
}

const constantWords: Readonly<Record<string, string>> = {
  devices: 'the number of output devices',
  theta: 'the thermal resistance of the output devices',
  duty: 'the duty of the output stage',
};

/** Facts of the run are there when it is measured: the supply and the ambient temperature. */
function isGiven(key: string, outputStage: OutputStage | null): boolean {
  if (key === 'ambient' || key === 'supply_voltage') return true;
  const constants: readonly string[] = FORMULA_CONSTANTS;
  if (!constants.includes(key)) return false;
  if (outputStage === null) return false;
  return key !== 'theta' || outputStage.thetaKPerW !== null;
}

function namesOf(formula: string): readonly string[] {
  const parsed = parseFormula(formula);
  return parsed.ok ? parsed.formula.names : [];
}

/** Two points of the same quantity and band may differ in frequency, supply or method. */
function isSame(a: Point, b: Point): boolean {
  return (
    a.quantityKey === b.quantityKey &&
    a.band === b.band &&
    a.freqHz === b.freqHz &&
    a.supplyV === b.supplyV &&
    a.method === b.method
  );
}
