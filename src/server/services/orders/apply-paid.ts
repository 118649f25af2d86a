import { eq } from 'drizzle-orm';
import { balanceDueMinor, orderCan } from '~/domain/orders/status';
import { checkouts, orders, payments } from '~/server/db/schema';
import { sumPayments } from '~/server/queries/orders/sum-payments';
import type { WriteContext } from '~/server/write';
import { confirmOrder } from './confirm-order';
import { lockCheckout } from './lock-checkout';
import type { Effect, PaidFact } from './payment-fact';
import { waits } from './payment-fact';
import { lockPlaces, releasePlaces } from './places';
import { wantRefund } from './want-refund';

type Order = typeof orders.$inferSelect;

/**
 * A payment has come by card: it is written down once by the provider's reference, whatever becomes of the
 * order, and then either makes the order paid, reduces its balance, or is to go back.
 */
export async function applyPaid(w: WriteContext, fact: PaidFact): Promise<Effect> {
  const locked = await lockCheckout(w.tx, fact.checkoutId);
  if (locked === null) return waits('The checkout');
  const { order, checkout } = locked;
  const [known] = await w.tx
    .select({ id: payments.id })
    .from(payments)
    .where(eq(payments.providerReference, fact.paymentIntentId));
  if (known !== undefined) {
    return {
      ...applied(order.id, 'payment.known', 'This payment was written down before'),
      details: { paymentId: known.id },
    };
  }
  const before = balanceDueMinor({ ...order, ...(await sumPayments(w.tx, order.id)) });
  const [{ insertId: paymentId }] = await w.tx.insert(payments).values({
    orderId: order.id,
    kind: 'card',
    checkoutId: checkout.id,
    providerReference: fact.paymentIntentId,
    amountMinor: fact.amountMinor,
    currency: fact.currency,
    paidAt: w.now,
  });
  await w.tx
    .update(checkouts)
    .set({ state: 'paid', providerSessionId: fact.sessionId })
    .where(eq(checkouts.id, checkout.id));
  const details = { paymentId, amountMinor: fact.amountMinor, currency: fact.currency };
  const payment = { paymentId, amountMinor: fact.amountMinor, currency: fact.currency };

  if (fact.currency !== order.currency)
    return sendBack(w, order, payment, 'It came in another currency than the order.');
  if (orderCan.pay(order.state).ok) {
    if (fact.amountMinor < order.dueNowMinor) {
      return {
        ...applied(order.id, 'payment.too_little', 'Less came than was due; the order waits'),
        details,
      };
    }
    const confirmed = await confirmOrder(w, order);
    if (confirmed === null) return cancelWithoutPlace(w, order, payment);
    return { ...applied(order.id, 'order.pay', ''), details: { ...details, unitIds: confirmed.unitIds } };
  }
  if (orderCan.payBalance(order.state).ok && before > 0) {
    if (fact.amountMinor > before) {
      const reason = 'More came than was due.';
      await wantRefund(w, { ...payment, amountMinor: fact.amountMinor - before, reason });
    }
    return {
      ...applied(order.id, 'order.pay_balance', ''),
      details: { ...details, balanceMinor: { from: before } },
    };
  }
  return sendBack(w, order, payment, 'The order had nothing to pay when this came.');
}

/** The hold had run out and somebody else has the place: nobody stays charged without one. */
async function cancelWithoutPlace(w: WriteContext, order: Order, payment: Payment): Promise<Effect> {
  await releasePlaces(w.tx, await lockPlaces(w.tx, order.id));
  await w.tx.update(orders).set({ state: 'cancelled', cancelledAt: w.now }).where(eq(orders.id, order.id));
  await w.post({
    kind: 'mail',
    key: `order-without-place:${order.id}`,
    payload: { letter: 'order_without_place', orderId: order.id },
  });
  return sendBack(w, order, payment, 'The payment came after the hold had run out, and no place was left.');
}

interface Payment {
  paymentId: number;
  amountMinor: number;
  currency: string;
}

async function sendBack(w: WriteContext, order: Order, payment: Payment, reason: string): Promise<Effect> {
  const refundId = await wantRefund(w, { ...payment, reason });
  return { ...applied(order.id, 'payment.send_back', reason), details: { ...payment, refundId } };
}

function applied(orderId: number, action: string, note: string): Effect {
  return { state: 'applied', action, orderId, note, details: {} };
}
