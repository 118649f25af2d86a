import { and, eq, sql } from 'drizzle-orm';
import { readings } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockOwnRun } from './lock-run';

/**
 * Leaves one reading of an open run out of its verdict, with a cause that the run's page prints.
 *
 * @throws DomainError `not_found`, `conflict` (closed, or voided already), `taken`
 */
export async function voidReading(
  input: { runId: number; readingId: number; reason: string },
  ctx: Ctx,
): Promise<{ readingId: number }> {
  return write(ctx, async (w) => {
    const run = await lockOwnRun(w, input.runId);
    const [reading] = await w.tx
      .select()
      .from(readings)
      .where(and(eq(readings.id, input.readingId), eq(readings.testRunId, run.row.id)));
    if (reading === undefined) throw new DomainError('not_found', 'The run has no such reading.');
    if (reading.voidedAt !== null) throw new DomainError('conflict', 'This reading is void already.');
    await w.tx
      .update(readings)
      .set({ voidedAt: w.now, voidReason: input.reason, version: sql`${readings.version} + 1` })
      .where(eq(readings.id, reading.id));
    await w.record({
      action: 'reading.void',
      subjects: [
        { type: 'run', id: run.row.id },
        { type: 'unit', id: run.row.unitId },
      ],
      details: {
        quantity: reading.quantityKey,
        band: reading.band,
        readingNo: reading.readingNo,
        text: reading.enteredText,
        unit: reading.enteredUnit,
        reason: input.reason,
      },
    });
    return { readingId: reading.id };
  });
}
