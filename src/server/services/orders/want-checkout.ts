import { and, eq, gt, inArray } from 'drizzle-orm';
import { holdEnd } from '~/domain/orders/checkout';
import { balanceDueMinor, orderCan } from '~/domain/orders/status';
import { checkouts, orders, placeHolds } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { sumPayments } from '~/server/queries/orders/sum-payments';
import type { Ctx, WriteContext } from '~/server/write';
import { write } from '~/server/write';
import { addCheckout } from './add-checkout';
import { lockPlaces } from './places';

type Checkout = typeof checkouts.$inferSelect;

/** The provider's page must end 30 minutes ahead at least; a checkout lives 31. */
const openableMs = 60_000;

/**
 * Wants a payment page for what an order has to pay now: the one that is open already, or a new one for the
 * balance.
 *
 * @throws DomainError `conflict` where nothing is to be paid, or the place has been given back
 */
export async function wantCheckout(input: { orderId: number }, ctx: Ctx): Promise<{ checkoutId: number }> {
  return write(ctx, async (w) => {
    const [order] = await w.tx.select().from(orders).where(eq(orders.id, input.orderId)).for('update');
    if (order === undefined) throw new DomainError('not_found', 'There is no such order.');
    const [open] = await w.tx
      .select()
      .from(checkouts)
      .where(
        and(
          eq(checkouts.orderId, order.id),
          inArray(checkouts.state, ['wanted', 'open']),
          gt(checkouts.expiresAt, w.now),
        ),
      );
    const balanceMinor = balanceDueMinor({ ...order, ...(await sumPayments(w.tx, order.id)) });
    const subjects = [{ type: 'order' as const, id: order.id }];
    if (open !== undefined && isStuck(open, w.now)) {
      const checkoutId = await replaceCheckout(w, open);
      await w.record({ action: 'checkout.replace', subjects, details: { from: open.id, to: checkoutId } });
      return { checkoutId };
    }
    if (open !== undefined && (orderCan.pay(order.state).ok || open.amountMinor === balanceMinor)) {
      await w.record({ action: 'checkout.want_again', subjects, details: { checkoutId: open.id } });
      return { checkoutId: open.id };
    }
    if (orderCan.pay(order.state).ok) {
      throw new DomainError(
        'conflict',
        'This order was not paid in time, and its place has been given back. Take a place again.',
      );
    }
    const answer = orderCan.payBalance(order.state);
    if (!answer.ok) throw new DomainError('conflict', answer.reason);
    if (balanceMinor === 0) throw new DomainError('conflict', 'This order is paid in full.');
    const checkoutId = await addCheckout(w, {
      orderId: order.id,
      amountMinor: balanceMinor,
      purpose: 'balance',
    });
    await w.record({ action: 'checkout.want', subjects, details: { checkoutId, amountMinor: balanceMinor } });
    return { checkoutId };
  });
}

/** Written, but not opened while the provider would still have taken its end. */
function isStuck({ state, createdAt }: Checkout, now: Date): boolean {
  return state === 'wanted' && now.getTime() - createdAt.getTime() > openableMs;
}

/** Nobody ever saw the page of the old one; the places are held anew with the new one. */
async function replaceCheckout(w: WriteContext, old: Checkout): Promise<number> {
  await w.tx.update(checkouts).set({ state: 'expired' }).where(eq(checkouts.id, old.id));
  const { holds } = await lockPlaces(w.tx, old.orderId);
  const held = holds.filter(({ state }) => state === 'held').map(({ id }) => id);
  if (held.length > 0) {
    await w.tx
      .update(placeHolds)
      .set({ heldUntil: holdEnd(w.now) })
      .where(inArray(placeHolds.id, held));
  }
  return addCheckout(w, { orderId: old.orderId, amountMinor: old.amountMinor, purpose: old.purpose });
}
