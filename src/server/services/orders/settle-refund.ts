import { eq } from 'drizzle-orm';
import { orders, payments, refunds } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { CallContext, Ctx } from '~/server/write';
import { write } from '~/server/write';

/** What the payment provider is to be told of a refund; null where it is done or refused already. */
export async function prepareRefund(refundId: number, ctx: CallContext) {
  const [row] = await ctx.db
    .select({
      state: refunds.state,
      createdAt: refunds.createdAt,
      amountMinor: refunds.amountMinor,
      paymentIntentId: payments.providerReference,
      orderNumber: orders.number,
    })
    .from(refunds)
    .innerJoin(payments, eq(payments.id, refunds.paymentId))
    .innerJoin(orders, eq(orders.id, payments.orderId))
    .where(eq(refunds.id, refundId));
  if (row === undefined) throw new DomainError('not_found', 'There is no such refund.');
  if (row.state !== 'wanted' || row.paymentIntentId === null) return null;
  return {
    /** The idempotency key of the call. */
    reference: `refund-${refundId}-${row.createdAt.getTime()}`,
    amountMinor: row.amountMinor,
    paymentIntentId: row.paymentIntentId,
    orderNumber: row.orderNumber,
  };
}

/** Keeps the provider's answer to a refund that we asked for. Repeating it changes nothing. */
export async function settleRefund(
  input: { refundId: number; outcome: 'done' | 'refused'; providerReference: string | null },
  ctx: Ctx,
): Promise<{ refundId: number }> {
  const { refundId, outcome, providerReference } = input;
  return write(ctx, async (w) => {
    const [row] = await w.tx
      .select({ state: refunds.state, paymentId: refunds.paymentId, amountMinor: refunds.amountMinor })
      .from(refunds)
      .where(eq(refunds.id, refundId))
      .for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such refund.');
    const [payment] = await w.tx
      .select({ orderId: payments.orderId })
      .from(payments)
      .where(eq(payments.id, row.paymentId));
    if (row.state === 'wanted') {
      await w.tx
        .update(refunds)
        .set({ state: outcome, providerReference, doneAt: outcome === 'done' ? w.now : null })
        .where(eq(refunds.id, refundId));
    }
    await w.record({
      action: `refund.${outcome}`,
      subjects: payment === undefined ? [] : [{ type: 'order', id: payment.orderId }],
      details: { refundId, amountMinor: row.amountMinor, from: row.state },
    });
    return { refundId };
  });
}
