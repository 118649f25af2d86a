import { bandLabel } from './bands';
import { judgeFormula } from './judge-formula';
import type { FormulaInput } from './judge-formula';
import { NOTHING_READ, carrierOf, judgePoint } from './judge-point';
import type { CarrierPower, JudgeContext, PointJudgement } from './judge-point';
import type { ChosenRule } from './limit-rules';
import { runResult } from './run-result';
import type { RunResult } from './run-result';
import type { InstrumentSpec, PathSpec, Reading, RunContext, TestPoint } from './types';

/** The version of this computation, kept with every closed run and printed on its certificate. */
export const COMPUTATION_VERSION = '1.1';

/** A reading of a run with what it was read with. */
export interface RunReading extends Reading {
  testPointId: number;
  instrument: InstrumentSpec | null;
  path: PathSpec | null;
}

/** The owner lets a point go, with a reason that the certificate prints; never on a legal limit. */
export interface Concession {
  testPointId: number;
  reason: string;
}

/** All that a run's verdicts rest on. */
export interface RunSheet {
  /** Resolved for the unit's options. */
  points: readonly TestPoint[];
  readings: readonly RunReading[];
  concessions: readonly Concession[];
  context: RunContext;
  rule: ChosenRule;
}

/** How a person names a point: `20 m, 2nd harmonic`. */
export function pointLabel({
  band,
  quantity: { label },
}: Pick<TestPoint, 'band'> & { quantity: { label: string } }): string {
  return band === null ? label : `${bandLabel(band)}, ${label.charAt(0).toLowerCase()}${label.slice(1)}`;
}

/** Whether the point has a limit by law, which nobody at the works can let go. */
export function isLegal({ limitRule }: Pick<TestPoint, 'limitRule'>): boolean {
  return limitRule === 'spurious';
}

/** Powers first, because the limits of a band's products depend on them; what is computed from others last. */
function turnOf({ quantity }: TestPoint): number {
  if (quantity.formula !== null) return 2;
  return quantity.key === 'rf_power' ? 0 : 1;
}

/**
 * Judges every point of a run and its result.
 *
 * @returns judgements by test point id, and the result that the program computes
 */
export function judgeRun(sheet: RunSheet): { judgements: Map<number, PointJudgement>; result: RunResult } {
  const judgements = new Map<number, PointJudgement>();
  const carriers = new Map<string, CarrierPower | null>();
  const ordered = [...sheet.points].sort((a, b) => turnOf(a) - turnOf(b));
  for (const point of ordered) {
    if (point.quantity.formula !== null) {
      judgements.set(point.id, judgeFormula(point, inputsFor(point, sheet, judgements), sheet.context));
      continue;
    }
    const readings = sheet.readings.filter(({ testPointId }) => testPointId === point.id);
    const counted = readings.filter(({ voided }) => !voided);
    const used = counted[0] ?? readings[0];
    const context: JudgeContext = {
      ...sheet.context,
      instrument: used?.instrument ?? null,
      path: used?.path ?? null,
      carrier: point.band === null ? null : (carriers.get(point.band) ?? null),
      rule: sheet.rule,
    };
    const judgement = mixed(counted) ?? judgePoint(point, readings, context);
    judgements.set(point.id, judgement);
    if (point.quantity.key === 'rf_power' && point.band !== null)
      carriers.set(point.band, carrierOf(judgement));
  }
  const conceded = new Set(sheet.concessions.map(({ testPointId }) => testPointId));
  const result = runResult(
    sheet.points.map((point) => {
      const judgement = judgements.get(point.id);
      return {
        label: pointLabel(point),
        required: point.required,
        verdict: judgement?.verdict ?? 'not_run',
        stopped: judgement?.stopped ?? null,
        isConceded: conceded.has(point.id) && !isLegal(point),
      };
    }),
  );
  return { judgements, result };
}

/** What a computed point may draw on: the other points of its band, and those of the whole unit. */
function inputsFor(
  point: TestPoint,
  { points }: RunSheet,
  judgements: ReadonlyMap<number, PointJudgement>,
): Map<string, FormulaInput> {
  const inputs = new Map<string, FormulaInput>();
  const usable = points.filter(({ band }) => band === null || band === point.band);
  // What is of the band comes last and so stands over what is of the whole unit.
  for (const each of usable.sort((a, b) => Number(a.band !== null) - Number(b.band !== null))) {
    const judgement = judgements.get(each.id) ?? NOTHING_READ;
    const { key, label, unit, formula } = each.quantity;
    if (formula === null && each.id !== point.id) inputs.set(key, { label, unit, judgement });
  }
  return inputs;
}

/** One budget cannot stand for readings of two instruments, or over two paths. */
function mixed(readings: readonly RunReading[]): PointJudgement | null {
  const ways = new Set(readings.map(({ instrument, path }) => JSON.stringify([instrument, path])));
  if (ways.size <= 1) return null;
  const stopped = 'Its readings were taken with different instruments or paths: void those of one.';
  return { ...NOTHING_READ, n: readings.length, marginText: 'no verdict', stopped };
}
