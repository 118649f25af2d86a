import { z } from 'zod';
import type { ProviderEvent } from './verify-event';

/** Names the checkout an event is about, as `openProviderCheckout` wrote it into the session. */
interface CheckoutRef {
  checkoutId: string;
  orderNumber: string;
  sessionId: string;
}

interface Sum {
  /** Whole minor units of `currency`. */
  amountMinor: number;
  /** ISO 4217, upper case. */
  currency: string;
}

/** What an event says, in our own words. `unknown` is kept and takes no effect. */
type ProviderFact =
  | ({ kind: 'checkout_paid'; paymentIntentId: string } & CheckoutRef & Sum)
  | ({ kind: 'checkout_awaits_payment'; paymentIntentId: string | null } & CheckoutRef & Sum)
  | ({ kind: 'checkout_payment_failed' } & CheckoutRef)
  | ({ kind: 'checkout_expired' } & CheckoutRef)
  | ({
      kind: 'payment_refunded';
      chargeId: string;
      paymentIntentId: string;
      /** All that was refunded of this payment so far, not only by this event. */
      refundedMinor: number;
    } & Sum)
  | ({
      kind: 'payment_disputed';
      disputeId: string;
      chargeId: string;
      paymentIntentId: string;
      /** The provider's word for why, for example `fraudulent`. */
      cause: string;
    } & Sum)
  | { kind: 'unknown'; reason: 'type_not_used' | 'not_ours' | 'shape_not_understood' };

/** The provider gives a reference as an id or, where it was asked to, as the whole object. */
const reference = z.union([
  z.string().min(1),
  z.object({ id: z.string().min(1) }).transform((object) => object.id),
]);
const amount = z.number().int().nonnegative();
const currency = z
  .string()
  .regex(/^[A-Za-z]{3}$/)
  .transform((code) => code.toUpperCase());

const sessionSchema = z.object({
  object: z.literal('checkout.session'),
  id: z.string().min(1),
  payment_status: z.enum(['paid', 'unpaid', 'no_payment_required']),
  payment_intent: reference.nullable(),
  amount_total: amount,
  currency,
  metadata: z.record(z.string()).nullable(),
});

const chargeSchema = z.object({
  object: z.literal('charge'),
  id: z.string().min(1),
  payment_intent: reference,
  amount,
  amount_refunded: amount,
  currency,
});

const disputeSchema = z.object({
  object: z.literal('dispute'),
  id: z.string().min(1),
  charge: reference,
  payment_intent: reference,
  amount,
  currency,
  reason: z.string(),
});

const NOT_UNDERSTOOD = { kind: 'unknown', reason: 'shape_not_understood' } as const;

function readSession(event: ProviderEvent): ProviderFact {
  const parsed = sessionSchema.safeParse(event.data.object);
  if (!parsed.success) return NOT_UNDERSTOOD;
  const session = parsed.data;
  const checkoutId = session.metadata?.['checkout_id'];
  const orderNumber = session.metadata?.['order_number'];
  if (!checkoutId || !orderNumber) return { kind: 'unknown', reason: 'not_ours' };

  const ref = { checkoutId, orderNumber, sessionId: session.id };
  const sum = { amountMinor: session.amount_total, currency: session.currency };
  if (event.type === 'checkout.session.expired') return { kind: 'checkout_expired', ...ref };
  if (event.type === 'checkout.session.async_payment_failed') {
    return { kind: 'checkout_payment_failed', ...ref };
  }
  // "Completed" only says that the buyer went through the page: a bank debit is paid days later.
  if (session.payment_status === 'unpaid') {
    return { kind: 'checkout_awaits_payment', paymentIntentId: session.payment_intent, ...ref, ...sum };
  }
  if (session.payment_status !== 'paid' || session.payment_intent === null) return NOT_UNDERSTOOD;
  return { kind: 'checkout_paid', paymentIntentId: session.payment_intent, ...ref, ...sum };
}

function readRefund(event: ProviderEvent): ProviderFact {
  const parsed = chargeSchema.safeParse(event.data.object);
  if (!parsed.success) return NOT_UNDERSTOOD;
  const charge = parsed.data;
  return {
    kind: 'payment_refunded',
    chargeId: charge.id,
    paymentIntentId: charge.payment_intent,
    amountMinor: charge.amount,
    refundedMinor: charge.amount_refunded,
    currency: charge.currency,
  };
}

function readDispute(event: ProviderEvent): ProviderFact {
  const parsed = disputeSchema.safeParse(event.data.object);
  if (!parsed.success) return NOT_UNDERSTOOD;
  const dispute = parsed.data;
  return {
    kind: 'payment_disputed',
    disputeId: dispute.id,
    chargeId: dispute.charge,
    paymentIntentId: dispute.payment_intent,
    amountMinor: dispute.amount,
    currency: dispute.currency,
    cause: dispute.reason,
  };
}

/** Reads a verified event. Amounts and states are those at the time of the event, not of its arrival. */
export function readProviderEvent(event: ProviderEvent): ProviderFact {
  switch (event.type) {
    case 'checkout.session.completed':
    case 'checkout.session.async_payment_succeeded':
    case 'checkout.session.async_payment_failed':
    case 'checkout.session.expired':
      return readSession(event);
    case 'charge.refunded':
      return readRefund(event);
    case 'charge.dispute.created':
      return readDispute(event);
    default:
      return { kind: 'unknown', reason: 'type_not_used' };
  }
}
