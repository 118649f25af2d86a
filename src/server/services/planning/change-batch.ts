import { eq, sql } from 'drizzle-orm';
import type { BatchState } from '~/domain/planning/batch-status';
import { batchIsClosed, nextBatchStates } from '~/domain/planning/batch-status';
import { batches } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

export interface BatchChange {
  number: number;
  /** As it was read: a change that somebody else made meanwhile is not written over. */
  version: number;
  places: number;
  priceMinor: number;
  depositMinor: number | null;
  currency: string;
  estimatedOn: string | null;
  state: BatchState;
}

/**
 * Changes a batch's places, price, date or state. Orders keep the price and the date that they were placed
 * with. Places are never fewer than are taken or held.
 *
 * @throws DomainError `not_found`, `conflict` where somebody changed it meanwhile, `invalid` with the field
 */
export async function changeBatch(
  input: BatchChange,
  ctx: Ctx,
): Promise<{ batchId: number; number: number }> {
  return write(ctx, async (w) => {
    const [batch] = await w.tx.select().from(batches).where(eq(batches.number, input.number)).for('update');
    if (batch === undefined) throw new DomainError('not_found', `There is no batch ${input.number}.`);
    if (batch.version !== input.version) {
      throw new DomainError('conflict', 'Somebody changed this batch meanwhile. Look at it again.');
    }
    const used = batch.placesTaken + batch.placesHeld;
    if (input.places < used) {
      const sentence = `${used} places are taken or held; there cannot be fewer.`;
      throw new DomainError('invalid', sentence, { places: sentence });
    }
    if (input.currency !== batch.currency && used > 0) {
      const sentence = `Places were sold in ${batch.currency}; the currency stays.`;
      throw new DomainError('invalid', sentence, { currency: sentence });
    }
    if (!nextBatchStates(batch.state).includes(input.state)) {
      const sentence = 'A batch that was opened does not go back to being planned.';
      throw new DomainError('invalid', sentence, { state: sentence });
    }
    const { places, priceMinor, depositMinor, currency, estimatedOn, state } = input;
    const next = { places, priceMinor, depositMinor, currency, estimatedOn, state };
    const closedAt = batchIsClosed(state) ? (batch.closedAt ?? w.now) : null;
    await w.tx
      .update(batches)
      .set({ ...next, closedAt, version: sql`${batches.version} + 1` })
      .where(eq(batches.id, batch.id));
    await w.record({
      action: 'batch.change',
      subjects: [{ type: 'batch', id: batch.id }],
      details: changesOf(batch, next),
    });
    return { batchId: batch.id, number: batch.number };
  });
}

function changesOf<T extends object>(before: T, after: Partial<T>): Record<string, unknown> {
  const was = new Map<string, unknown>(Object.entries(before));
  return Object.fromEntries(
    Object.entries(after)
      .filter(([name, to]) => was.get(name) !== to)
      .map(([name, to]) => [name, { from: was.get(name), to }]),
  );
}
