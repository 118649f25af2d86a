import { asc, eq } from 'drizzle-orm';
import { comparePoints } from '~/domain/bench/compare-points';
import type { ComparedPoint, PointPair } from '~/domain/bench/compare-points';
import { judgeRun } from '~/domain/bench/judge-run';
import { unknownQuantity } from '~/domain/bench/quantities';
import { normaliseScan } from '~/lib/serials';
import type { Reader } from '~/server/db/client';
import { models, reworks, runPoints, testPoints, testRuns, units, userProfiles } from '~/server/db/schema';
import { listQuantities } from './list-quantities';
import { asBand, readRunSheet } from './read-run-sheet';

/** A run as the comparison heads its column. */
export interface ComparedRun {
  id: number;
  runNo: number;
  state: 'open' | 'closed';
  result: string | null;
  openedAt: Date;
  closedAt: Date | null;
  tester: string | null;
}

/** A rework that lay between the two. */
export interface ReworkBetween {
  id: number;
  cause: string;
  foundCause: string | null;
  remedy: string | null;
  minutes: number | null;
  openedAt: Date;
  closedAt: Date | null;
}

export interface RunComparison {
  serial: string;
  modelName: string;
  /** All of the unit's runs, in order. */
  runs: ComparedRun[];
  /** Null where the unit has fewer than two runs. */
  compared: {
    before: ComparedRun;
    after: ComparedRun;
    pairs: PointPair[];
    reworks: ReworkBetween[];
  } | null;
}

/**
 * Two runs of a unit beside each other, the earlier first; the newest and the one before it where none are named.
 *
 * @returns null where there is no such unit or it has not these runs
 */
export async function readRunComparison(
  reader: Reader,
  serial: string,
  named: { a?: number | undefined; b?: number | undefined },
): Promise<RunComparison | null> {
  const [unit] = await reader
    .select({ id: units.id, serial: units.serial, modelName: models.name })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .where(eq(units.serial, normaliseScan(serial)));
  if (unit === undefined) return null;
  const runs = await listRuns(reader, unit.id);
  const shared = { serial: unit.serial, modelName: unit.modelName, runs };
  const newest = runs.at(-1)?.runNo ?? 0;
  const later = named.b ?? newest;
  const earlier = named.a ?? runs.findLast(({ runNo }) => runNo < later)?.runNo;
  const [before, after] = runs.filter(({ runNo }) => runNo === earlier || runNo === later);
  if (before === undefined || after === undefined) {
    const isNamed = named.a !== undefined || named.b !== undefined;
    return isNamed && runs.length > 1 ? null : { ...shared, compared: null };
  }
  const [beforePoints, afterPoints, lying] = await Promise.all([
    listPoints(reader, before),
    listPoints(reader, after),
    listReworks(reader, unit.id),
  ]);
  const between = lying.filter(
    ({ openedAt }) => openedAt >= (before.closedAt ?? before.openedAt) && openedAt < after.openedAt,
  );
  return {
    ...shared,
    compared: { before, after, pairs: comparePoints(beforePoints, afterPoints), reworks: between },
  };
}

function listRuns(reader: Reader, unitId: number): Promise<ComparedRun[]> {
  return reader
    .select({
      id: testRuns.id,
      runNo: testRuns.runNo,
      state: testRuns.state,
      result: testRuns.result,
      openedAt: testRuns.openedAt,
      closedAt: testRuns.closedAt,
      tester: userProfiles.name,
    })
    .from(testRuns)
    .leftJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
    .where(eq(testRuns.unitId, unitId))
    .orderBy(asc(testRuns.runNo));
}

/** A closed run's points as it kept them, an open one's as they stand. */
async function listPoints(reader: Reader, run: ComparedRun): Promise<ComparedPoint[]> {
  if (run.state === 'open') {
    const sheet = await readRunSheet(reader, run.id);
    const { judgements } = judgeRun(sheet);
    return sheet.points.flatMap(({ id, quantity, band, freqHz }) => {
      const judgement = judgements.get(id);
      if (judgement === undefined) return [];
      const { verdict, value, n, lower, upper } = judgement;
      return [{ quantity, band, freqHz, verdict, value, n, lower, upper }];
    });
  }
  const [quantities, rows] = await Promise.all([
    listQuantities(reader),
    reader
      .select({
        quantityKey: testPoints.quantityKey,
        band: testPoints.band,
        freqHz: testPoints.freqHz,
        verdict: runPoints.verdict,
        value: runPoints.value,
        n: runPoints.readingCount,
        lower: runPoints.lowerLimit,
        upper: runPoints.upperLimit,
      })
      .from(runPoints)
      .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
      .where(eq(runPoints.testRunId, run.id))
      .orderBy(asc(testPoints.position)),
  ]);
  return rows.map(({ quantityKey, band, ...row }) => ({
    ...row,
    quantity: quantities.get(quantityKey) ?? unknownQuantity(quantityKey),
    band: asBand(band),
  }));
}

function listReworks(reader: Reader, unitId: number): Promise<ReworkBetween[]> {
  return reader
    .select({
      id: reworks.id,
      cause: reworks.cause,
      foundCause: reworks.foundCause,
      remedy: reworks.remedy,
      minutes: reworks.minutes,
      openedAt: reworks.openedAt,
      closedAt: reworks.closedAt,
    })
    .from(reworks)
    .where(eq(reworks.unitId, unitId))
    .orderBy(asc(reworks.id));
}
