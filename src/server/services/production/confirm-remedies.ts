import { and, eq, inArray, isNotNull, isNull } from 'drizzle-orm';
import { remedyHeld } from '~/domain/bench/remedy-held';
import { reworks, runPoints, testPoints, testRuns } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';

/**
 * Closes the loop of a unit's reworks once a run has passed: names it in each whose remedy has held since. Part of the
 * service call that closes the run, which makes the ledger entry.
 *
 * @returns ids of the reworks that the run confirms
 */
export async function confirmRemedies(
  w: WriteContext,
  passed: { runId: number; unitId: number },
): Promise<number[]> {
  const waiting = await w.tx
    .select({ id: reworks.id, closedAt: reworks.closedAt, testRunId: reworks.testRunId })
    .from(reworks)
    .where(
      and(eq(reworks.unitId, passed.unitId), isNotNull(reworks.closedAt), isNull(reworks.confirmedByRunId)),
    );
  if (waiting.length === 0) return [];
  const runs = await w.tx
    .select({ id: testRuns.id, openedAt: testRuns.openedAt })
    .from(testRuns)
    .where(and(eq(testRuns.unitId, passed.unitId), eq(testRuns.state, 'closed')));
  const failed = await w.tx
    .select({ runId: runPoints.testRunId, quantityKey: testPoints.quantityKey, band: testPoints.band })
    .from(runPoints)
    .innerJoin(testRuns, eq(testRuns.id, runPoints.testRunId))
    .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
    .where(
      and(eq(testRuns.unitId, passed.unitId), eq(runPoints.verdict, 'fail'), isNull(runPoints.concession)),
    );
  const failedIn = (runId: number | null) => failed.filter((point) => point.runId === runId);
  const between = runs
    .filter(({ id }) => id !== passed.runId)
    .map(({ id, openedAt }) => ({ openedAt, failed: failedIn(id) }));
  const held = waiting.flatMap(({ id, closedAt, testRunId }) =>
    closedAt !== null && remedyHeld({ closedAt, seen: failedIn(testRunId) }, between) ? [id] : [],
  );
  if (held.length > 0) {
    await w.tx.update(reworks).set({ confirmedByRunId: passed.runId }).where(inArray(reworks.id, held));
  }
  return held;
}
