import { eq } from 'drizzle-orm';
import { orderCan } from '~/domain/orders/status';
import { checkouts, placeHolds } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';
import { lockCheckout } from './lock-checkout';
import type { Effect, EndedFact, LateFact } from './payment-fact';
import { waits } from './payment-fact';
import { lockPlaces, releasePlaces } from './places';

/** Bank debits and transfers through the provider take some days. */
const lateMs = 10 * 24 * 3600_000;

/** The provider's page was ended unpaid, by time or by a refusal: the places go back at once. */
export async function applyEnded(w: WriteContext, fact: EndedFact): Promise<Effect> {
  const locked = await lockCheckout(w.tx, fact.checkoutId);
  if (locked === null) return waits('The checkout');
  const { order, checkout } = locked;
  // A payment may have been told before its page's end: it stands.
  if (checkout.state !== 'paid') {
    await w.tx.update(checkouts).set({ state: 'expired' }).where(eq(checkouts.id, checkout.id));
  }
  const released =
    orderCan.pay(order.state).ok && checkout.purpose === 'order' && checkout.state !== 'paid'
      ? await releasePlaces(w.tx, await lockPlaces(w.tx, order.id))
      : 0;
  return {
    state: 'applied',
    action: 'checkout.end',
    orderId: order.id,
    note: fact.kind === 'checkout_expired' ? 'The payment page ran out' : 'The payment was refused',
    details: { checkoutId: checkout.id, placesReleased: released },
  };
}

/** The buyer has gone through the page, but the money takes days: the places are kept for it meanwhile. */
export async function applyLatePayment(w: WriteContext, fact: LateFact): Promise<Effect> {
  const locked = await lockCheckout(w.tx, fact.checkoutId);
  if (locked === null) return waits('The checkout');
  const { order, checkout } = locked;
  const until = new Date(w.now.getTime() + lateMs);
  if (checkout.state === 'wanted' || checkout.state === 'open') {
    await w.tx
      .update(checkouts)
      .set({ state: 'open', providerSessionId: fact.sessionId, expiresAt: until })
      .where(eq(checkouts.id, checkout.id));
    const { holds } = await lockPlaces(w.tx, order.id);
    for (const hold of holds) {
      if (hold.state !== 'held') continue;
      await w.tx.update(placeHolds).set({ heldUntil: until }).where(eq(placeHolds.id, hold.id));
    }
  }
  return {
    state: 'applied',
    action: 'checkout.await_money',
    orderId: order.id,
    note: 'The money takes some days',
    details: { checkoutId: checkout.id, heldUntil: until.toISOString() },
  };
}
