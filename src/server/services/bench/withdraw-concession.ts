import { and, eq, isNull } from 'drizzle-orm';
import { pointLabel } from '~/domain/bench/judge-run';
import { runConcessions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockOpenRun } from './lock-run';

/**
 * Takes back a concession of an open run: the point counts as it was read.
 *
 * @throws DomainError `not_found`; `conflict` where the run is closed
 */
export async function withdrawConcession(
  input: { runId: number; testPointId: number },
  ctx: Ctx,
): Promise<{ testPointId: number }> {
  return write(ctx, async (w) => {
    const { row: run } = await lockOpenRun(w, input.runId);
    const { points, concessions } = await readRunSheet(w.tx, run.id);
    const point = points.find(({ id }) => id === input.testPointId);
    const granted = concessions.find(({ testPointId }) => testPointId === input.testPointId);
    if (point === undefined || granted === undefined) {
      throw new DomainError('not_found', 'This test point is not let go by concession.');
    }
    await w.tx
      .update(runConcessions)
      .set({ withdrawnAt: w.now, withdrawnBy: actingPerson(w) })
      .where(
        and(
          eq(runConcessions.testRunId, run.id),
          eq(runConcessions.testPointId, point.id),
          isNull(runConcessions.withdrawnAt),
        ),
      );
    await w.record({
      action: 'concession.withdraw',
      subjects: [
        { type: 'run', id: run.id },
        { type: 'unit', id: run.unitId },
      ],
      details: { runNo: run.runNo, point: pointLabel(point), reason: granted.reason },
    });
    return { testPointId: point.id };
  });
}
