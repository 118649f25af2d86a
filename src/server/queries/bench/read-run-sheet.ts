import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { BAND_KEYS, regionOf } from '~/domain/bench/bands';
import type { Concession, RunReading, RunSheet } from '~/domain/bench/judge-run';
import { ruleForDestination } from '~/domain/bench/limit-rules';
import { resolvePoints } from '~/domain/bench/resolve-points';
import { unknownQuantity } from '~/domain/bench/quantities';
import type { BandKey, TestPoint } from '~/domain/bench/types';
import { invariant } from '~/lib/invariant';
import { dayOf } from '~/lib/dates';
import { instrumentSpecSchema, outputStageSchema, pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import {
  instrumentRevisions,
  instruments,
  pathRevisions,
  paths,
  readings,
  runConcessions,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
} from '~/server/db/schema';
import { listLimitRules } from './list-limit-rules';
import { listQuantities } from './list-quantities';
import { getWorks } from '~/server/queries/office/get-works';

/** A reading as it stands in the database, beside what the computation needs of it. */
export interface StoredReading extends RunReading {
  id: number;
  readingNo: number;
  source: 'typed' | 'sweep' | 'wire' | 'history';
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
  instrumentNumber: string | null;
  pathNumber: string | null;
  at: Date;
  byUserId: number | null;
  voidReason: string | null;
  version: number;
}

export interface StoredSheet extends RunSheet {
  readings: StoredReading[];
}

/** One of our band keys; anything else would be a fault in the plan. */
export function asBand(text: string | null): BandKey | null {
  if (text === null) return null;
  const band = BAND_KEYS.find((key) => key === text);
  invariant(band !== undefined, `"${text}" is a band`);
  return band;
}

/** The points of a test plan revision as the bench computes with them. */
export async function listTestPoints(reader: Reader, testPlanRevisionId: number): Promise<TestPoint[]> {
  const [quantities, rows] = await Promise.all([
    listQuantities(reader),
    reader
      .select()
      .from(testPoints)
      .where(eq(testPoints.testPlanRevisionId, testPlanRevisionId))
      .orderBy(asc(testPoints.position)),
  ]);
  return rows.map(({ lowerLimit: lower, upperLimit: upper, band, quantityKey, ...row }) => ({
    ...row,
    quantity: quantities.get(quantityKey) ?? unknownQuantity(quantityKey),
    band: asBand(band),
    lower,
    upper,
  }));
}

/** Everything that a run's verdicts rest on, for the station, for closing it and for its certificate. */
export async function readRunSheet(reader: Reader, runId: number): Promise<StoredSheet> {
  const [run] = await reader
    .select({
      testPlanRevisionId: testRuns.testPlanRevisionId,
      destinationCountry: testRuns.destinationCountry,
      supplyV: testRuns.supplyV,
      ambientC: testRuns.ambientC,
      outputStage: testPlanRevisions.outputStage,
      openedAt: testRuns.openedAt,
      options: units.options,
    })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, testRuns.testPlanRevisionId))
    .where(eq(testRuns.id, runId));
  invariant(run !== undefined, 'the run is there');
  const [points, stored, concessions, rules, { timeZone }] = await Promise.all([
    listTestPoints(reader, run.testPlanRevisionId),
    listReadings(reader, runId),
    listConcessions(reader, runId),
    listLimitRules(reader),
    getWorks(reader),
  ]);
  const resolved = resolvePoints(points, new Set(run.options));
  invariant(resolved.ok, 'a released test plan resolves');
  const { destinationCountry } = run;
  const testedOn = dayOf(run.openedAt, timeZone);
  return {
    points: resolved.points,
    readings: stored,
    concessions,
    rule: ruleForDestination(destinationCountry, testedOn, rules),
    context: {
      destinationCountry,
      region: destinationCountry === null ? null : regionOf(destinationCountry),
      supplyV: run.supplyV,
      ambientC: run.ambientC,
      outputStage: run.outputStage === null ? null : outputStageSchema.parse(run.outputStage),
      testedOn,
    },
  };
}

/** What the owner lets go of an open run, and has not withdrawn. */
async function listConcessions(reader: Reader, runId: number): Promise<Concession[]> {
  return reader
    .select({ testPointId: runConcessions.testPointId, reason: runConcessions.reason })
    .from(runConcessions)
    .where(and(eq(runConcessions.testRunId, runId), isNull(runConcessions.withdrawnAt)))
    .orderBy(asc(runConcessions.id));
}

async function listReadings(reader: Reader, runId: number): Promise<StoredReading[]> {
  const rows = await reader
    .select({
      reading: readings,
      instrumentSpec: instrumentRevisions.spec,
      instrumentNumber: instruments.number,
      pathSpec: pathRevisions.spec,
      pathNumber: paths.number,
    })
    .from(readings)
    .leftJoin(instrumentRevisions, eq(instrumentRevisions.id, readings.instrumentRevisionId))
    .leftJoin(instruments, eq(instruments.id, instrumentRevisions.instrumentId))
    .leftJoin(pathRevisions, eq(pathRevisions.id, readings.pathRevisionId))
    .leftJoin(paths, eq(paths.id, pathRevisions.pathId))
    .where(eq(readings.testRunId, runId))
    .orderBy(asc(readings.testPointId), asc(readings.readingNo));
  const instrumentOf = onceEach((spec) => instrumentSpecSchema.parse(spec));
  const pathOf = onceEach((spec) => pathSpecSchema.parse(spec));
  return rows.map(({ reading, instrumentSpec, instrumentNumber, pathSpec, pathNumber }) => {
    const { band, voidedAt, ...rest } = reading;
    return {
      ...rest,
      band: asBand(band),
      voided: voidedAt !== null,
      instrument: instrumentOf(rest.instrumentRevisionId, instrumentSpec),
      path: pathOf(rest.pathRevisionId, pathSpec),
      instrumentNumber,
      pathNumber,
    };
  });
}

/** Many readings share a revision; its JSON is checked once. */
function onceEach<T>(parse: (spec: unknown) => T): (revisionId: number | null, spec: unknown) => T | null {
  const known = new Map<number, T>();
  return (revisionId, spec) => {
    if (revisionId === null) return null;
    const parsed = known.get(revisionId) ?? parse(spec);
    known.set(revisionId, parsed);
    return parsed;
  };
}

/** The instruments and paths of these revisions, for a certificate. */
export async function listUsedInstruments(reader: Reader, revisionIds: number[]) {
  if (revisionIds.length === 0) return [];
  const rows = await reader
    .select({ number: instruments.number, name: instruments.name, spec: instrumentRevisions.spec })
    .from(instrumentRevisions)
    .innerJoin(instruments, eq(instruments.id, instrumentRevisions.instrumentId))
    .where(inArray(instrumentRevisions.id, revisionIds))
    .orderBy(asc(instruments.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: instrumentSpecSchema.parse(spec) }));
}
