import { eq } from 'drizzle-orm';
import { orders } from '~/server/db/schema';
import { spawnUnits } from '~/server/services/production/spawn-units';
import type { WriteContext } from '~/server/write';
import { findOrMakeBuyer } from './find-or-make-buyer';
import { lockPlaces, takePlaces } from './places';

type Order = typeof orders.$inferSelect;

/**
 * Makes a locked order paid: takes its places, spawns its units, finds or makes its buyer's account and asks
 * for the letter that says so. Part of a service call.
 *
 * @returns null, with nothing changed, where a place is no longer to be had
 */
export async function confirmOrder(w: WriteContext, order: Order): Promise<{ unitIds: number[] } | null> {
  const lineIds = await takePlaces(w.tx, await lockPlaces(w.tx, order.id));
  if (lineIds === null) return null;
  const buyerUserId = order.buyerUserId ?? (await findOrMakeBuyer(w, order.contactId));
  await w.tx.update(orders).set({ state: 'paid', paidAt: w.now, buyerUserId }).where(eq(orders.id, order.id));
  const unitIds: number[] = [];
  for (const orderLineId of lineIds) {
    const spawned = await spawnUnits({ orderLineId }, w);
    unitIds.push(...spawned.unitIds);
  }
  await w.post({
    kind: 'mail',
    key: `order-received:${order.id}`,
    payload: { letter: 'order_received', orderId: order.id },
  });
  return { unitIds };
}
