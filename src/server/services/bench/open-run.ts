import { desc, eq } from 'drizzle-orm';
import { COMPUTATION_VERSION } from '~/domain/bench/judge-run';
import { unitCan } from '~/domain/production/unit-status';
import { orderLines, orders, testRuns } from '~/server/db/schema';
import { readSteps } from '~/server/queries/production/read-steps';
import { lockUnit, mustBeAllowed } from '~/server/services/production/lock-unit';
import { actingPerson, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { mustBeAllowedToTest } from './may-test';

/**
 * Opens the next final test of a unit, to its own test plan revision and for where it goes: where its order goes, or
 * without one where it was said to go when it was entered.
 *
 * @throws DomainError `not_found`; `conflict` with everything that stands against it; `forbidden` where the
 * tester built the unit and the works asks for another
 */
export async function openRun(
  input: { serial: string; destination?: string | null },
  ctx: Ctx,
): Promise<{ runId: number; runNo: number; serial: string }> {
  return write(ctx, async (w) => {
    const testerUserId = actingPerson(w);
    const { row: unit, facts } = await lockUnit(w.tx, input.serial);
    const [steps, [newest]] = [
      await readSteps(w.tx, unit),
      await w.tx
        .select({
          runNo: testRuns.runNo,
          state: testRuns.state,
          destinationCountry: testRuns.destinationCountry,
        })
        .from(testRuns)
        .where(eq(testRuns.unitId, unit.id))
        .orderBy(desc(testRuns.runNo))
        .limit(1),
    ];
    const openSteps = steps.filter(({ records }) => records.length === 0).length;
    mustBeAllowed(unit.serial, unitCan.openRun({ ...facts, openSteps, runOpen: newest?.state === 'open' }));
    await mustBeAllowedToTest(w, unit);
    const runNo = (newest?.runNo ?? 0) + 1;
    // One typed at the bench keeps what was said of it; one that was built ahead has no destination yet.
    const known = unit.batchId === null ? (newest?.destinationCountry ?? null) : null;
    const destinationCountry =
      unit.orderLineId === null ? (input.destination ?? known) : await destinationOf(w, unit.orderLineId);
    const [{ insertId: runId }] = await w.tx.insert(testRuns).values({
      unitId: unit.id,
      runNo,
      testPlanRevisionId: unit.testPlanRevisionId,
      state: 'open',
      testerUserId,
      destinationCountry,
      firmwareVersion: unit.firmwareVersion,
      alignment: unit.alignment,
      computationVersion: COMPUTATION_VERSION,
      openedAt: w.now,
    });
    await w.record({
      action: 'run.open',
      subjects: [
        { type: 'run', id: runId },
        { type: 'unit', id: unit.id },
      ],
      details: { runNo, destinationCountry },
    });
    return { runId, runNo, serial: unit.serial };
  });
}

async function destinationOf(w: WriteContext, orderLineId: number): Promise<string | null> {
  const [order] = await w.tx
    .select({ country: orders.destinationCountry })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .where(eq(orderLines.id, orderLineId));
  return order?.country ?? null;
}
