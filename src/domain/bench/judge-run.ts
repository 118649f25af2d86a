import { bandLabel } from './bands';
import { NOTHING_READ, carrierOf, judgePoint } from './judge-point';
import type { CarrierPower, JudgeContext, PointJudgement } from './judge-point';
import type { LimitRuleKey } from './limit-rules';
import { quantityOf } from './quantities';
import { runResult } from './run-result';
import type { RunResult } from './run-result';
import type { InstrumentSpec, PathSpec, Reading, RunContext, TestPoint } from './types';

/** The version of this computation, kept with every closed run and printed on its certificate. */
export const COMPUTATION_VERSION = '1.0';

/** A reading of a run with what it was read with. */
export interface RunReading extends Reading {
  testPointId: number;
  instrument: InstrumentSpec | null;
  path: PathSpec | null;
}

/** All that a run's verdicts rest on. */
export interface RunSheet {
  /** Resolved for the unit's options. */
  points: readonly TestPoint[];
  readings: readonly RunReading[];
  context: RunContext;
  ruleKey: LimitRuleKey;
}

/** How a person names a point: `20 m, 2nd harmonic`. */
export function pointLabel(point: Pick<TestPoint, 'band' | 'quantityKey'>): string {
  const quantity = quantityOf(point.quantityKey)?.label ?? point.quantityKey;
  return point.band === null
    ? quantity
    : `${bandLabel(point.band)}, ${quantity.charAt(0).toLowerCase()}${quantity.slice(1)}`;
}

/**
 * Judges every point of a run and its result. Powers come first: the limits of a band's products depend on
 * the power measured there.
 *
 * @returns judgements by test point id, and the result that the program computes
 */
export function judgeRun(sheet: RunSheet): { judgements: Map<number, PointJudgement>; result: RunResult } {
  const judgements = new Map<number, PointJudgement>();
  const carriers = new Map<string, CarrierPower | null>();
  const isPower = (point: TestPoint) => point.quantityKey === 'rf_power';
  for (const point of [...sheet.points].sort((a, b) => Number(isPower(b)) - Number(isPower(a)))) {
    const readings = sheet.readings.filter(({ testPointId }) => testPointId === point.id);
    const counted = readings.filter(({ voided }) => !voided);
    const used = counted[0] ?? readings[0];
    const context: JudgeContext = {
      ...sheet.context,
      instrument: used?.instrument ?? null,
      path: used?.path ?? null,
      carrier: point.band === null ? null : (carriers.get(point.band) ?? null),
      ruleKey: sheet.ruleKey,
    };
    const judgement = mixed(counted) ?? judgePoint(point, readings, context);
    judgements.set(point.id, judgement);
    if (isPower(point) && point.band !== null) carriers.set(point.band, carrierOf(judgement));
  }
  const result = runResult(
    sheet.points.map((point) => {
      const judgement = judgements.get(point.id);
      return {
        label: pointLabel(point),
        required: point.required,
        verdict: judgement?.verdict ?? 'not_run',
        stopped: judgement?.stopped ?? null,
      };
    }),
  );
  return { judgements, result };
}

/** One budget cannot stand for readings of two instruments, or over two paths. */
function mixed(readings: readonly RunReading[]): PointJudgement | null {
  const ways = new Set(readings.map(({ instrument, path }) => JSON.stringify([instrument, path])));
  if (ways.size <= 1) return null;
  const stopped = 'Its readings were taken with different instruments or paths: void those of one.';
  return { ...NOTHING_READ, n: readings.length, marginText: 'no verdict', stopped };
}
