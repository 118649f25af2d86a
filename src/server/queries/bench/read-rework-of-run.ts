import { desc, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { reworks, testRuns } from '~/server/db/schema';

export type ReworkOfRun = NonNullable<Awaited<ReturnType<typeof readReworkOfRun>>>;

/** The rework that a run sent its unit into, with the run that showed that the remedy held; null where it sent it to none. */
export async function readReworkOfRun(reader: Reader, runId: number) {
  const [row] = await reader
    .select({
      id: reworks.id,
      cause: reworks.cause,
      foundCause: reworks.foundCause,
      remedy: reworks.remedy,
      minutes: reworks.minutes,
      closedAt: reworks.closedAt,
      confirmedByRunNo: testRuns.runNo,
    })
    .from(reworks)
    .leftJoin(testRuns, eq(testRuns.id, reworks.confirmedByRunId))
    .where(eq(reworks.testRunId, runId))
    .orderBy(desc(reworks.id))
    .limit(1);
  return row ?? null;
}
