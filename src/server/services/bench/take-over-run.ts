import { eq, sql } from 'drizzle-orm';
import { testRuns } from '~/server/db/schema';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockOpenRun } from './lock-run';
import { mustBeAllowedToTest } from './may-test';

/**
 * Takes an open run over from the tester who has it, in the open: the ledger names both.
 *
 * @throws DomainError `not_found`, `conflict` (closed), or `forbidden` as in opening a run
 */
export async function takeOverRun(
  input: { runId: number },
  ctx: Ctx,
): Promise<{ runId: number; runNo: number }> {
  return write(ctx, async (w) => {
    const person = actingPerson(w);
    const { row: run, serial } = await lockOpenRun(w, input.runId);
    await mustBeAllowedToTest(w, { id: run.unitId, serial });
    await w.tx
      .update(testRuns)
      .set({ testerUserId: person, version: sql`${testRuns.version} + 1` })
      .where(eq(testRuns.id, run.id));
    await w.record({
      action: 'run.take_over',
      subjects: [
        { type: 'run', id: run.id },
        { type: 'unit', id: run.unitId },
        { type: 'user', id: run.testerUserId },
        { type: 'user', id: person },
      ],
      details: { fromUserId: run.testerUserId, toUserId: person },
    });
    return { runId: run.id, runNo: run.runNo };
  });
}
