import { and, asc, desc, eq, inArray, isNotNull } from 'drizzle-orm';
import { benchRecord } from '~/domain/catalog/bench-record';
import type { BandRecord } from '~/domain/catalog/bench-record';
import type { Reader } from '~/server/db/client';
import { runPoints, testPoints, testRuns, units } from '~/server/db/schema';

const lastUnits = 40;

/**
 * What the last units of a model left the bench with: the newest closed run of each, where it passed; the
 * last 40 of them.
 */
export async function readBenchRecord(
  reader: Reader,
  modelId: number,
): Promise<{ unitCount: number; bands: BandRecord[] }> {
  const closed = await reader
    .select({ id: testRuns.id, unitId: testRuns.unitId, result: testRuns.result })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(and(eq(units.modelId, modelId), eq(testRuns.state, 'closed')))
    .orderBy(desc(testRuns.closedAt), desc(testRuns.id))
    .limit(400);
  const newest = new Map<number, (typeof closed)[number]>();
  for (const run of closed) if (!newest.has(run.unitId)) newest.set(run.unitId, run);
  const runIds = [...newest.values()]
    .filter(({ result }) => result === 'passed')
    .slice(0, lastUnits)
    .map(({ id }) => id);
  if (runIds.length === 0) return { unitCount: 0, bands: [] };
  const points = await reader
    .select({
      unitId: testRuns.unitId,
      band: testPoints.band,
      quantityKey: testPoints.quantityKey,
      value: runPoints.value,
    })
    .from(runPoints)
    .innerJoin(testRuns, eq(testRuns.id, runPoints.testRunId))
    .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
    .where(and(inArray(runPoints.testRunId, runIds), isNotNull(runPoints.value), isNotNull(testPoints.band)))
    .orderBy(asc(testPoints.position));
  return {
    unitCount: runIds.length,
    bands: benchRecord(
      points.flatMap(({ unitId, band, quantityKey, value }) =>
        band === null || value === null ? [] : [{ unitId, band, quantityKey, value }],
      ),
    ),
  };
}
