import { and, asc, desc, eq, inArray, isNotNull, lt, ne } from 'drizzle-orm';
import { invariant } from '~/lib/invariant';
import type { AlikePoint } from '~/schemas/bench-alike';
import type { Reader } from '~/server/db/client';
import { runPoints, testPoints, testRuns, units } from '~/server/db/schema';
import { listHistoryValues } from './read-history';

/** So many values of a point are shown. */
export const MOST_ALIKE = 40;
/** So many runs are looked through at a time; most points of a plan stand in nearly all of them. */
const runsAtATime = 50;
/** A point that only a rare option has is not looked for in all the runs that a works ever made. */
const mostRuns = 500;

/**
 * The last values of each point of a run, as closed runs of the same model kept them: the same quantity on the same
 * band, whichever revision of the test plan asked for it; the newest first. What old sheets say follows, marked.
 *
 * Runs are walked from the newest backwards, some at a time, so that a long history is not read whole.
 *
 * @returns null where there is no such run
 */
export async function listAlike(reader: Reader, runId: number): Promise<AlikePoint[] | null> {
  const [run] = await reader
    .select({ modelId: units.modelId, planId: testRuns.testPlanRevisionId })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(eq(testRuns.id, runId));
  if (run === undefined) return null;
  const points = await reader
    .select({ testPointId: testPoints.id, quantityKey: testPoints.quantityKey, band: testPoints.band })
    .from(testPoints)
    .where(eq(testPoints.testPlanRevisionId, run.planId))
    .orderBy(asc(testPoints.position));
  const found = new Map(points.map((point) => [keyOf(point), [] as AlikePoint['values']]));
  const keys = new Map(points.map((point) => [point.testPointId, keyOf(point)]));
  let before = Number.MAX_SAFE_INTEGER;
  for (let looked = 0; looked < mostRuns; looked += runsAtATime) {
    if ([...found.values()].every((values) => values.length >= MOST_ALIKE)) break;
    const runs = await listClosedRuns(reader, run.modelId, { before, except: runId });
    const oldest = runs.at(-1);
    if (oldest === undefined) break;
    for (const { key, value } of await listValues(reader, runs, keys)) {
      const values = found.get(key);
      if (values !== undefined && values.length < MOST_ALIKE) values.push(value);
    }
    before = oldest.id;
  }
  const old = await listOldValues(reader, run.modelId);
  return points.map((point) => {
    const key = keyOf(point);
    return { ...point, values: [...(found.get(key) ?? []), ...(old.get(key) ?? [])] };
  });
}

/** What old sheets say, by key, each at most {@link MOST_ALIKE}. */
async function listOldValues(reader: Reader, modelId: number): Promise<Map<string, AlikePoint['values']>> {
  const found = new Map<string, AlikePoint['values']>();
  for (const old of await listHistoryValues(reader, modelId)) {
    const { value, serial, testedOn } = old;
    const values = found.get(keyOf(old)) ?? [];
    if (values.length === MOST_ALIKE) continue;
    values.push({ value, serial, verdict: null, runNo: null, closedAt: testedOn, isHistory: true });
    found.set(keyOf(old), values);
  }
  return found;
}

interface ClosedRun {
  id: number;
  runNo: number;
  serial: string;
  closedAt: Date | null;
}

async function listClosedRuns(
  reader: Reader,
  modelId: number,
  { before, except }: { before: number; except: number },
): Promise<ClosedRun[]> {
  return reader
    .select({ id: testRuns.id, runNo: testRuns.runNo, serial: units.serial, closedAt: testRuns.closedAt })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(
      and(
        eq(units.modelId, modelId),
        eq(testRuns.state, 'closed'),
        lt(testRuns.id, before),
        ne(testRuns.id, except),
      ),
    )
    .orderBy(desc(testRuns.id))
    .limit(runsAtATime);
}

/**
 * What these runs kept. Not joined with the test points: MariaDB would begin there, and read every value that a point ever
 * had.
 *
 * @param keys by test point id; those that are met first are added
 */
async function listValues(reader: Reader, runs: readonly ClosedRun[], keys: Map<number, string>) {
  const rows = await reader
    .select({
      runId: runPoints.testRunId,
      testPointId: runPoints.testPointId,
      value: runPoints.value,
      verdict: runPoints.verdict,
    })
    .from(runPoints)
    .where(
      and(
        inArray(
          runPoints.testRunId,
          runs.map(({ id }) => id),
        ),
        ne(runPoints.verdict, 'not_run'),
        isNotNull(runPoints.value),
      ),
    )
    .orderBy(desc(runPoints.testRunId), asc(runPoints.testPointId));
  const unknown = [...new Set(rows.map(({ testPointId }) => testPointId))].filter((id) => !keys.has(id));
  if (unknown.length > 0) {
    const points = await reader
      .select({ id: testPoints.id, quantityKey: testPoints.quantityKey, band: testPoints.band })
      .from(testPoints)
      .where(inArray(testPoints.id, unknown));
    for (const point of points) keys.set(point.id, keyOf(point));
  }
  const runOf = new Map(runs.map((run) => [run.id, run]));
  return rows.map(({ runId, testPointId, value, verdict }) => {
    const run = runOf.get(runId);
    invariant(run !== undefined && value !== null, 'a value of one of the runs');
    const { serial, runNo, closedAt } = run;
    return {
      key: keys.get(testPointId) ?? '',
      value: { value, verdict, serial, runNo, closedAt, isHistory: false },
    };
  });
}

function keyOf({ quantityKey, band }: { quantityKey: string; band: string | null }): string {
  return `${quantityKey} ${band ?? ''}`;
}
