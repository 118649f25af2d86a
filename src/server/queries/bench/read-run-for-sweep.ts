import { eq } from 'drizzle-orm';
import type { RunForSweep } from '~/domain/bench/sweep/look-at-sweep';
import { pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { models, pathRevisions, testRuns, units } from '~/server/db/schema';
import { findFrequencyPlan } from './get-frequency-plan';
import { readRunSheet } from './read-run-sheet';
import type { StoredSheet } from './read-run-sheet';

/** What a sweep is read against in a run; null where there is no such run. */
export async function readRunForSweep(
  reader: Reader,
  runId: number,
  pathRevisionId: number | null,
): Promise<(RunForSweep & { sheet: StoredSheet }) | null> {
  const [model] = await reader
    .select({ id: models.id, ratedPowerW: models.ratedPowerW })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .where(eq(testRuns.id, runId));
  if (model === undefined) return null;
  const [sheet, frequencyPlan, [path]] = await Promise.all([
    readRunSheet(reader, runId),
    findFrequencyPlan(reader, model.id),
    pathRevisionId === null
      ? []
      : reader
          .select({ spec: pathRevisions.spec })
          .from(pathRevisions)
          .where(eq(pathRevisions.id, pathRevisionId)),
  ]);
  return {
    ...{ sheet, frequencyPlan, ratedPowerW: model.ratedPowerW },
    path: path === undefined ? null : pathSpecSchema.parse(path.spec),
  };
}
