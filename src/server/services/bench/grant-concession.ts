import { judgeRun, isLegal, pointLabel } from '~/domain/bench/judge-run';
import { runConcessions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockOpenRun } from './lock-run';

/**
 * Lets a point of an open run go that misses the works' own limit, or is too close to call, with a reason that
 * the certificate prints. A limit on emissions is the law's, and nobody lets it go.
 *
 * @throws DomainError `not_found`; `conflict` where the run is closed, the point stands under a legal limit,
 * meets its limit or has no verdict, or is let go already
 */
export async function grantConcession(
  input: { runId: number; testPointId: number; reason: string },
  ctx: Ctx,
): Promise<{ testPointId: number }> {
  return write(ctx, async (w) => {
    const { row: run } = await lockOpenRun(w, input.runId);
    const sheet = await readRunSheet(w.tx, run.id);
    const point = sheet.points.find(({ id }) => id === input.testPointId);
    if (point === undefined) throw new DomainError('not_found', 'The run has no such test point.');
    const label = pointLabel(point);
    if (isLegal(point)) {
      throw new DomainError(
        'conflict',
        `${label}: this limit on emissions is the law’s, and nobody can let it go. Mend the unit, or measure better.`,
      );
    }
    if (sheet.concessions.some(({ testPointId }) => testPointId === point.id)) {
      throw new DomainError(
        'conflict',
        `${label} is let go already. Withdraw that first to give another reason.`,
      );
    }
    const verdict = judgeRun(sheet).judgements.get(point.id)?.verdict ?? 'not_run';
    if (verdict === 'pass')
      throw new DomainError('conflict', `${label} meets its limit: there is nothing to let go.`);
    if (verdict === 'not_run') {
      throw new DomainError('conflict', `${label} has no verdict yet. Read it first, then decide.`);
    }
    await w.tx.insert(runConcessions).values({
      testRunId: run.id,
      testPointId: point.id,
      reason: input.reason,
      at: w.now,
      byUserId: actingPerson(w),
    });
    await w.record({
      action: 'concession.grant',
      subjects: [
        { type: 'run', id: run.id },
        { type: 'unit', id: run.unitId },
      ],
      details: { runNo: run.runNo, point: label, reason: input.reason },
    });
    return { testPointId: point.id };
  });
}
