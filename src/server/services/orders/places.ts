import { asc, eq, inArray } from 'drizzle-orm';
import { freePlaces } from '~/domain/orders/checkout';
import { batchTakesOrders } from '~/domain/planning/batch-status';
import { batches, orderLines, placeHolds } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';

type Hold = typeof placeHolds.$inferSelect;
type Batch = typeof batches.$inferSelect;

/** The places of an order and their batches, under their row locks: holds first, then batches by id. */
interface LockedPlaces {
  holds: Hold[];
  batches: Map<number, Batch>;
}

/** Locks what {@link takePlaces} and {@link releasePlaces} change. The order is locked before. */
export async function lockPlaces(tx: Tx, orderId: number): Promise<LockedPlaces> {
  const lines = await tx
    .select({ id: orderLines.id })
    .from(orderLines)
    .where(eq(orderLines.orderId, orderId));
  if (lines.length === 0) return { holds: [], batches: new Map() };
  const holds = await tx
    .select()
    .from(placeHolds)
    .where(
      inArray(
        placeHolds.orderLineId,
        lines.map(({ id }) => id),
      ),
    )
    .orderBy(asc(placeHolds.id))
    .for('update');
  if (holds.length === 0) return { holds, batches: new Map() };
  const locked = await tx
    .select()
    .from(batches)
    .where(
      inArray(
        batches.id,
        holds.map(({ batchId }) => batchId),
      ),
    )
    .orderBy(asc(batches.id))
    .for('update');
  return { holds, batches: new Map(locked.map((batch) => [batch.id, batch])) };
}

/**
 * Turns every hold of an order into taken places. One that had been given back takes a place that is still
 * free; where any has none, nothing is taken.
 *
 * @returns the order lines whose places are taken, or null
 */
export async function takePlaces(tx: Tx, locked: LockedPlaces): Promise<number[] | null> {
  const after = new Map<number, Batch>(locked.batches);
  for (const hold of locked.holds) {
    const batch = after.get(hold.batchId);
    const next = batch === undefined ? null : withTaken(batch, hold);
    if (next === null) return null;
    after.set(hold.batchId, next);
  }
  await writeBatches(tx, after);
  for (const { id } of locked.holds) {
    await tx.update(placeHolds).set({ state: 'taken' }).where(eq(placeHolds.id, id));
  }
  return locked.holds.map(({ orderLineId }) => orderLineId);
}

function withTaken(batch: Batch, hold: Hold): Batch | null {
  const { placesTaken, placesHeld, places } = batch;
  if (hold.state === 'held') {
    return { ...batch, placesHeld: placesHeld - hold.quantity, placesTaken: placesTaken + hold.quantity };
  }
  const free = freePlaces({ places, taken: placesTaken, held: placesHeld });
  if (hold.state === 'taken' || !batchTakesOrders(batch.state) || free < hold.quantity) return null;
  return { ...batch, placesTaken: placesTaken + hold.quantity };
}

/** Gives back what an order still holds. @returns how many places */
export async function releasePlaces(tx: Tx, locked: LockedPlaces): Promise<number> {
  const after = new Map<number, Batch>(locked.batches);
  let released = 0;
  for (const hold of locked.holds) {
    const batch = after.get(hold.batchId);
    if (batch === undefined || hold.state !== 'held') continue;
    after.set(hold.batchId, { ...batch, placesHeld: batch.placesHeld - hold.quantity });
    await tx.update(placeHolds).set({ state: 'released' }).where(eq(placeHolds.id, hold.id));
    released += hold.quantity;
  }
  await writeBatches(tx, after);
  return released;
}

async function writeBatches(tx: Tx, changed: ReadonlyMap<number, Batch>): Promise<void> {
  for (const { id, placesTaken, placesHeld } of changed.values()) {
    await tx.update(batches).set({ placesTaken, placesHeld }).where(eq(batches.id, id));
  }
}
