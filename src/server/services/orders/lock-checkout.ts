import { eq } from 'drizzle-orm';
import { checkouts, orders } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';
import { checkoutIdOf, checkoutReference } from './checkout-reference';

/** The checkout that a reference names and its order, both locked, the order first; null where there is none. */
export async function lockCheckout(tx: Tx, reference: string) {
  const id = checkoutIdOf(reference);
  if (id === null) return null;
  const [found] = await tx
    .select({ orderId: checkouts.orderId, createdAt: checkouts.createdAt })
    .from(checkouts)
    .where(eq(checkouts.id, id));
  if (found === undefined || checkoutReference({ id, createdAt: found.createdAt }) !== reference) return null;
  const [order] = await tx.select().from(orders).where(eq(orders.id, found.orderId)).for('update');
  const [checkout] = await tx.select().from(checkouts).where(eq(checkouts.id, id)).for('update');
  return order === undefined || checkout === undefined ? null : { order, checkout };
}
