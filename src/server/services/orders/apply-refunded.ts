import { eq, ne, and, sql } from 'drizzle-orm';
import { payments, refunds } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';
import type { DisputedFact, Effect, RefundedFact } from './payment-fact';
import { waits } from './payment-fact';

async function lockPayment(w: WriteContext, providerReference: string) {
  const [payment] = await w.tx
    .select()
    .from(payments)
    .where(eq(payments.providerReference, providerReference))
    .for('update');
  return payment;
}

/**
 * Money went back. What we asked for is known already; more than that was refunded at the provider itself
 * and is written down, so that our sums stay theirs.
 */
export async function applyRefunded(w: WriteContext, fact: RefundedFact): Promise<Effect> {
  const payment = await lockPayment(w, fact.paymentIntentId);
  if (payment === undefined) return waits('The payment');
  const [known] = await w.tx
    .select({ sum: sql<string>`coalesce(sum(${refunds.amountMinor}), 0)` })
    .from(refunds)
    .where(and(eq(refunds.paymentId, payment.id), ne(refunds.state, 'refused')));
  const moreMinor = fact.refundedMinor - Number(known?.sum ?? 0);
  if (moreMinor > 0) {
    await w.tx.insert(refunds).values({
      paymentId: payment.id,
      amountMinor: moreMinor,
      currency: payment.currency,
      reason: 'Refunded at the payment provider.',
      state: 'done',
      createdAt: w.now,
      doneAt: w.now,
    });
  }
  return {
    state: 'applied',
    action: 'payment.refunded',
    orderId: payment.orderId,
    note: '',
    details: {
      paymentId: payment.id,
      refundedMinor: fact.refundedMinor,
      notAskedByUsMinor: Math.max(0, moreMinor),
    },
  };
}

/** The buyer's bank disputes a payment: it is written into the order's ledger for the owner to answer. */
export async function applyDisputed(w: WriteContext, fact: DisputedFact): Promise<Effect> {
  const payment = await lockPayment(w, fact.paymentIntentId);
  if (payment === undefined) return waits('The payment');
  return {
    state: 'applied',
    action: 'payment.dispute',
    orderId: payment.orderId,
    note: `Disputed: ${fact.cause}`.slice(0, 300),
    details: { paymentId: payment.id, disputeId: fact.disputeId, amountMinor: fact.amountMinor },
  };
}
