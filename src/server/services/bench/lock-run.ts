import { eq } from 'drizzle-orm';
import { models, testPlanRevisions, testRuns, units, userProfiles } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson } from '~/server/write';
import type { WriteContext } from '~/server/write';

/** An open run under its row lock, with what entries into it are checked against. */
export interface LockedRun {
  row: typeof testRuns.$inferSelect;
  serial: string;
  ratedPowerW: number;
  loadOhm: number;
  supplyV: number;
}

/**
 * Locks a run that is still open.
 *
 * @throws DomainError `not_found`, or `conflict` where it is closed
 */
export async function lockOpenRun(w: WriteContext, runId: number): Promise<LockedRun> {
  const [row] = await w.tx.select().from(testRuns).where(eq(testRuns.id, runId)).for('update');
  if (row === undefined) throw new DomainError('not_found', 'There is no such run.');
  if (row.state === 'closed') {
    throw new DomainError('conflict', `Run ${row.runNo} is closed, and closed is closed. Open a new run.`);
  }
  const [facts] = await w.tx
    .select({
      serial: units.serial,
      ratedPowerW: models.ratedPowerW,
      loadOhm: testPlanRevisions.loadOhm,
      supplyV: testPlanRevisions.supplyV,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, row.testPlanRevisionId))
    .where(eq(units.id, row.unitId));
  if (facts === undefined) throw new Error(`The unit of run ${runId} is gone.`);
  return { row, ...facts };
}

/**
 * Locks an open run that the acting person has. One tester at a time: another has to take it over first.
 *
 * @throws DomainError as {@link lockOpenRun}, or `taken` where another tester has it
 */
export async function lockOwnRun(w: WriteContext, runId: number): Promise<LockedRun> {
  const run = await lockOpenRun(w, runId);
  const person = actingPerson(w);
  if (run.row.testerUserId === person) return run;
  const [tester] = await w.tx
    .select({ name: userProfiles.name })
    .from(userProfiles)
    .where(eq(userProfiles.userId, run.row.testerUserId));
  throw new DomainError('taken', `${tester?.name ?? 'Another tester'} has this run. Take it over first.`);
}
