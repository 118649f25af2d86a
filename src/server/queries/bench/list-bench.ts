import { and, asc, desc, eq, inArray, isNull } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { batches, holds, models, reworks, testRuns, units, userProfiles } from '~/server/db/schema';

/** A unit that the bench has something to do with. */
export interface BenchUnit {
  serial: string;
  modelName: string;
  batchNumber: number | null;
  inRework: boolean;
  onHold: boolean;
  newestRun: {
    id: number;
    runNo: number;
    state: 'open' | 'closed';
    result: string | null;
    openedAt: Date;
    testerUserId: number;
    testerName: string | null;
  } | null;
}

/** Units at their final test, oldest first, each with its newest run. */
export async function listBench(reader: Reader): Promise<BenchUnit[]> {
  const rows = await reader
    .select({
      id: units.id,
      serial: units.serial,
      batchId: units.batchId,
      modelName: models.name,
      batchNumber: batches.number,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .where(eq(units.stage, 'final_test'))
    .orderBy(asc(units.id));
  const elsewhere = await reader
    .select({
      id: units.id,
      serial: units.serial,
      batchId: units.batchId,
      modelName: models.name,
      batchNumber: batches.number,
    })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .where(and(eq(testRuns.state, 'open'), inArray(units.stage, ['pack', 'ship'])));
  const found = [...elsewhere, ...rows];
  if (found.length === 0) return [];
  const ids = found.map(({ id }) => id);
  const [runs, mending, held] = await Promise.all([
    reader
      .select({ run: testRuns, testerName: userProfiles.name })
      .from(testRuns)
      .leftJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
      .where(inArray(testRuns.unitId, ids))
      .orderBy(desc(testRuns.runNo)),
    reader
      .select({ unitId: reworks.unitId })
      .from(reworks)
      .where(and(inArray(reworks.unitId, ids), isNull(reworks.closedAt))),
    reader
      .select({ type: holds.subjectType, id: holds.subjectId })
      .from(holds)
      .where(and(isNull(holds.endedAt), inArray(holds.subjectType, ['unit', 'batch']))),
  ]);
  return found.map(({ id, serial, modelName, batchNumber, batchId }) => {
    const newest = runs.find(({ run }) => run.unitId === id);
    return {
      serial,
      modelName,
      batchNumber,
      inRework: mending.some(({ unitId }) => unitId === id),
      onHold: held.some((hold) => hold.id === (hold.type === 'unit' ? id : batchId)),
      newestRun:
        newest === undefined
          ? null
          : {
              id: newest.run.id,
              runNo: newest.run.runNo,
              state: newest.run.state,
              result: newest.run.result,
              openedAt: newest.run.openedAt,
              testerUserId: newest.run.testerUserId,
              testerName: newest.testerName,
            },
    };
  });
}
