import { eq } from 'drizzle-orm';
import type { RunConditions } from '~/schemas/bench-runs';
import { testRuns } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockOwnRun } from './lock-run';

/**
 * Writes down the conditions of an open run, and the firmware and alignment of the unit.
 *
 * @throws DomainError `not_found`, `conflict` (closed, or changed meanwhile), `taken`
 */
export async function setConditions(
  input: RunConditions & { runId: number },
  ctx: Ctx,
): Promise<{ runId: number; version: number }> {
  const { supplyV, ambientC, firmwareVersion, alignment } = input;
  return write(ctx, async (w) => {
    const { row: run } = await lockOwnRun(w, input.runId);
    if (input.version !== undefined && input.version !== run.version) {
      throw new DomainError('conflict', 'Another window has changed the conditions meanwhile. Look again.');
    }
    const to = { supplyV, ambientC, firmwareVersion, alignment };
    const version = run.version + 1;
    await w.tx
      .update(testRuns)
      .set({ ...to, version })
      .where(eq(testRuns.id, run.id));
    await w.record({
      action: 'run.conditions',
      subjects: [
        { type: 'run', id: run.id },
        { type: 'unit', id: run.unitId },
      ],
      details: {
        from: {
          supplyV: run.supplyV,
          ambientC: run.ambientC,
          firmwareVersion: run.firmwareVersion,
          alignment: run.alignment,
        },
        to,
      },
    });
    return { runId: run.id, version };
  });
}
