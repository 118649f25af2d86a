import Stripe from 'stripe';
import { prepareRefund, settleRefund } from '~/server/services/orders/settle-refund';
import type { CallContext } from '~/server/write';
import { provider } from './shared-client';

/**
 * Has the provider make a refund that is wanted, and keeps its answer. Safe to repeat: the refund's own
 * reference is the idempotency key.
 *
 * @throws the SDK's error where it may be tried again
 */
export async function sendRefund(
  refundId: number,
  ctx: CallContext,
): Promise<{ outcome: 'done' | 'refused' | 'nothing' }> {
  const refund = await prepareRefund(refundId, ctx);
  if (refund === null) return { outcome: 'nothing' };
  try {
    const made = await provider().refunds.create(
      {
        payment_intent: refund.paymentIntentId,
        amount: refund.amountMinor,
        metadata: { order_number: String(refund.orderNumber) },
      },
      { idempotencyKey: refund.reference },
    );
    await settleRefund({ refundId, outcome: 'done', providerReference: made.id }, ctx);
    return { outcome: 'done' };
  } catch (error) {
    if (!(error instanceof Stripe.errors.StripeInvalidRequestError)) throw error;
    await settleRefund({ refundId, outcome: 'refused', providerReference: null }, ctx);
    return { outcome: 'refused' };
  }
}
