import { randomBytes } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { CODE_RANDOM_BYTES, codeFromRandom } from '~/domain/certificates/code';
import { formatSerial } from '~/lib/serials';
import type { Tx } from '~/server/db/client';
import { batches, models, orderLines, unitAllocations, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { nextNumber, write } from '~/server/write';

/**
 * Spawns exactly one unit for each rig of a paid order line, in its batch, with serial numbers in order and
 * the batch's frozen revisions.
 *
 * @throws DomainError `conflict` where the line has its units already
 */
export async function spawnUnits(
  input: { orderLineId: number },
  ctx: Ctx,
): Promise<{ unitIds: number[]; serials: string[] }> {
  return write(ctx, async (w) => {
    const [line] = await w.tx
      .select()
      .from(orderLines)
      .where(eq(orderLines.id, input.orderLineId))
      .for('update');
    if (line === undefined || line.batchId === null)
      throw new DomainError('not_found', 'There is no such rig line.');
    const [existing] = await w.tx
      .select({ count: sql<string>`count(*)` })
      .from(units)
      .where(eq(units.orderLineId, line.id));
    if (Number(existing?.count ?? 0) > 0)
      throw new DomainError('conflict', 'This line has its units already.');
    const [found] = await w.tx
      .select({ batch: batches, prefix: models.serialPrefix })
      .from(batches)
      .innerJoin(models, eq(models.id, batches.modelId))
      .where(eq(batches.id, line.batchId));
    if (found === undefined) throw new Error(`Batch ${line.batchId} is gone.`);
    const { batch, prefix } = found;
    const spawned: { id: number; serial: string }[] = [];
    for (let lineIndex = 1; lineIndex <= line.quantity; lineIndex += 1) {
      const serial = await nextSerial(w.tx, prefix);
      const [{ insertId: id }] = await w.tx.insert(units).values({
        serial,
        modelId: batch.modelId,
        batchId: batch.id,
        orderLineId: line.id,
        lineIndex,
        options: line.options.map(({ key }) => key),
        stage: 'kit',
        bomRevisionId: batch.bomRevisionId,
        buildSheetRevisionId: batch.buildSheetRevisionId,
        testPlanRevisionId: batch.testPlanRevisionId,
        alignment: {},
        pageCode: codeFromRandom(randomBytes(CODE_RANDOM_BYTES)),
        createdAt: w.now,
      });
      spawned.push({ id, serial });
    }
    await w.tx
      .insert(unitAllocations)
      .values(
        spawned.map(({ id }) => ({ unitId: id, orderLineId: line.id, reason: 'Ordered', fromAt: w.now })),
      );
    await w.record({
      action: 'unit.spawn',
      subjects: [
        ...spawned.map(({ id }) => ({ type: 'unit' as const, id })),
        { type: 'order', id: line.orderId },
        { type: 'batch', id: batch.id },
      ],
      details: { serials: spawned.map(({ serial }) => serial) },
    });
    return { unitIds: spawned.map(({ id }) => id), serials: spawned.map(({ serial }) => serial) };
  });
}

/** The next of the model's series that nobody has typed for a unit at the bench. */
async function nextSerial(tx: Tx, prefix: string): Promise<string> {
  for (;;) {
    const serial = formatSerial(prefix, await nextNumber(tx, `serial:${prefix}`));
    const [taken] = await tx.select({ id: units.id }).from(units).where(eq(units.serial, serial));
    if (taken === undefined) return serial;
  }
}
