import { eq } from 'drizzle-orm';
import { runFlags, testRuns } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Ends the doubt that a bad check has cast on a closed run, with what was found; the run itself stays as it is.
 *
 * @throws DomainError `not_found`; `conflict` where it is ended already
 */
export async function endRunFlag(
  { runFlagId, note }: { runFlagId: number; note: string },
  ctx: Ctx,
): Promise<{ runFlagId: number }> {
  return write(ctx, async (w) => {
    const [flag] = await w.tx
      .select({ endedAt: runFlags.endedAt, testRunId: runFlags.testRunId, unitId: testRuns.unitId })
      .from(runFlags)
      .innerJoin(testRuns, eq(testRuns.id, runFlags.testRunId))
      .where(eq(runFlags.id, runFlagId))
      .for('update');
    if (flag === undefined) throw new DomainError('not_found', 'There is no such flag.');
    if (flag.endedAt !== null) throw new DomainError('conflict', 'Somebody has ended this flag already.');
    await w.tx
      .update(runFlags)
      .set({ endedAt: w.now, endedBy: actingPerson(w), note })
      .where(eq(runFlags.id, runFlagId));
    await w.record({
      action: 'run.end_flag',
      subjects: [
        { type: 'run', id: flag.testRunId },
        { type: 'unit', id: flag.unitId },
      ],
      details: { note },
    });
    return { runFlagId };
  });
}
