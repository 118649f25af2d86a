import { and, eq, inArray, lte, or } from 'drizzle-orm';
import { orderCan } from '~/domain/orders/status';
import { checkouts, orderLines, orders, placeHolds } from '~/server/db/schema';
import type { CallContext, Ctx } from '~/server/write';
import { write } from '~/server/write';
import { lockPlaces, releasePlaces } from './places';

/** The provider's page ends a little after the hold, and its event takes a moment to arrive. */
const graceMs = 2 * 60_000;

/**
 * Gives back the places whose hold has run out and marks payment pages that have ended, one order at a time.
 *
 * @returns how many places came free
 */
export async function releaseExpiredHolds(ctx: CallContext): Promise<{ released: number }> {
  const ended = new Date(ctx.now.getTime() - graceMs);
  const withHolds = await ctx.db
    .selectDistinct({ orderId: orderLines.orderId })
    .from(placeHolds)
    .innerJoin(orderLines, eq(orderLines.id, placeHolds.orderLineId))
    .where(and(eq(placeHolds.state, 'held'), lte(placeHolds.heldUntil, ended)))
    .limit(200);
  const withCheckouts = await ctx.db
    .selectDistinct({ orderId: checkouts.orderId })
    .from(checkouts)
    .where(and(inArray(checkouts.state, ['wanted', 'open']), lte(checkouts.expiresAt, ended)))
    .limit(200);
  let released = 0;
  for (const orderId of new Set([...withHolds, ...withCheckouts].map((row) => row.orderId))) {
    released += (await releaseOrder({ orderId, ended }, ctx)).released;
  }
  return { released };
}

async function releaseOrder(
  input: { orderId: number; ended: Date },
  ctx: Ctx,
): Promise<{ released: number }> {
  const { orderId, ended } = input;
  return write(ctx, async (w) => {
    const [order] = await w.tx
      .select({ state: orders.state })
      .from(orders)
      .where(eq(orders.id, orderId))
      .for('update');
    const locked = await lockPlaces(w.tx, orderId);
    const isOver = locked.holds.every((hold) => hold.heldUntil <= ended);
    const released =
      order !== undefined && orderCan.pay(order.state).ok && isOver ? await releasePlaces(w.tx, locked) : 0;
    await w.tx
      .update(checkouts)
      .set({ state: 'expired' })
      .where(
        and(
          eq(checkouts.orderId, orderId),
          or(eq(checkouts.state, 'wanted'), eq(checkouts.state, 'open')),
          lte(checkouts.expiresAt, ended),
        ),
      );
    await w.record({
      action: 'order.release_places',
      subjects: [{ type: 'order', id: orderId }],
      details: { placesReleased: released },
    });
    return { released };
  });
}
