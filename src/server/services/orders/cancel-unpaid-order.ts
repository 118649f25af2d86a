import { and, eq, inArray } from 'drizzle-orm';
import { orderCan } from '~/domain/orders/status';
import { checkouts, orders } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';
import { lockPlaces, releasePlaces } from './places';

/**
 * Cancels an order that was not paid, and gives its places back. A payment that comes all the same is sent
 * back.
 *
 * @throws DomainError `conflict` where it is paid or cancelled already
 */
export async function cancelUnpaidOrder(
  input: { orderId: number; reason: string },
  ctx: Ctx,
): Promise<{ orderId: number }> {
  const { orderId, reason } = input;
  return write(ctx, async (w) => {
    const [order] = await w.tx.select().from(orders).where(eq(orders.id, orderId)).for('update');
    if (order === undefined) throw new DomainError('not_found', 'There is no such order.');
    const answer = orderCan.pay(order.state);
    if (!answer.ok) throw new DomainError('conflict', answer.reason);
    const released = await releasePlaces(w.tx, await lockPlaces(w.tx, orderId));
    await w.tx
      .update(checkouts)
      .set({ state: 'expired' })
      .where(and(eq(checkouts.orderId, orderId), inArray(checkouts.state, ['wanted', 'open'])));
    await w.tx.update(orders).set({ state: 'cancelled', cancelledAt: w.now }).where(eq(orders.id, orderId));
    await w.record({
      action: 'order.cancel',
      subjects: [{ type: 'order', id: orderId }],
      details: { reason, placesReleased: released, state: { from: order.state, to: 'cancelled' } },
    });
    return { orderId };
  });
}
