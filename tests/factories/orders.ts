import { eq } from 'drizzle-orm';
import type { OrderPlacing } from '~/schemas/order-placing';
import type { Db } from '~/server/db/client';
import { checkouts, orders } from '~/server/db/schema';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { checkoutReference } from '~/server/services/orders/checkout-reference';
import { keepProviderEvent } from '~/server/services/orders/keep-provider-event';
import type { PaidFact } from '~/server/services/orders/payment-fact';
import { placeOrder } from '~/server/services/orders/place-order';
import type { CallContext } from '~/server/write';
import { at } from './catalog';

export function buildContext(db: Db, changes: Partial<Pick<CallContext, 'actor' | 'now'>> = {}): CallContext {
  return { db, actor: { kind: 'visitor' }, now: at, ...changes };
}

/** A call that the payment provider's word brings about. */
export function byProvider(db: Db, now = at): CallContext {
  return buildContext(db, { actor: { kind: 'provider' }, now });
}

export function minutesAfter(from: Date, minutes: number): Date {
  return new Date(from.getTime() + minutes * 60_000);
}

export function buildOrder(changes: Partial<OrderPlacing> = {}): OrderPlacing {
  return {
    batch: 13,
    option: ['band.40m', 'band.30m', 'band.20m'],
    quantity: 1,
    pay: 'full',
    email: 'quirin@buyer.test',
    name: 'Quirin Quell',
    callSign: 'Q0ABC',
    phone: null,
    addressLines: ['7 Heather Row'],
    city: 'Nowhere',
    region: '',
    postcode: '12345',
    country: 'DE',
    ...changes,
  };
}

/** What the provider says when the checkout of an order is paid. */
export async function buildPaid(
  db: Db,
  checkoutId: number,
  changes: Partial<PaidFact> = {},
): Promise<PaidFact> {
  const [row] = await db
    .select({ checkout: checkouts, currency: orders.currency })
    .from(checkouts)
    .innerJoin(orders, eq(orders.id, checkouts.orderId))
    .where(eq(checkouts.id, checkoutId));
  if (row === undefined) throw new Error(`There is no checkout ${checkoutId}.`);
  return {
    kind: 'checkout_paid',
    checkoutId: checkoutReference(row.checkout),
    sessionId: `cs_test_${checkoutId}`,
    paymentIntentId: `pi_test_${checkoutId}`,
    amountMinor: row.checkout.amountMinor,
    currency: row.currency,
    ...changes,
  };
}

/** Keeps an event and gives it its effect, as its door does. */
export async function deliver(ctx: CallContext, fact: PaidFact, eventId = `evt_${fact.paymentIntentId}`) {
  const { providerEventId } = await keepProviderEvent(
    { eventId, type: 'checkout.session.completed', objectId: fact.sessionId, body: '{}' },
    ctx,
  );
  return applyProviderEvent({ providerEventId, fact }, ctx);
}

/** An order that is paid by card, with its units. */
export async function seedPaidOrder(
  db: Db,
  changes: Partial<OrderPlacing> = {},
): Promise<{ orderId: number; number: number; checkoutId: number }> {
  const placed = await placeOrder(buildOrder(changes), buildContext(db));
  await deliver(byProvider(db), await buildPaid(db, placed.checkoutId));
  return placed;
}
