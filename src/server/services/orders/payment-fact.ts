interface AboutCheckout {
  /** As `checkoutReference` wrote it. */
  checkoutId: string;
  sessionId: string;
}

interface Sum {
  /** Whole minor units of `currency`. */
  amountMinor: number;
  /** ISO 4217, upper case. */
  currency: string;
}

export type PaidFact = { kind: 'checkout_paid'; paymentIntentId: string } & AboutCheckout & Sum;
export type LateFact = { kind: 'checkout_awaits_payment' } & AboutCheckout;
export type EndedFact = { kind: 'checkout_payment_failed' | 'checkout_expired' } & AboutCheckout;
export type RefundedFact = {
  kind: 'payment_refunded';
  paymentIntentId: string;
  /** All that went back of this payment so far. */
  refundedMinor: number;
  currency: string;
};
export type DisputedFact = {
  kind: 'payment_disputed';
  disputeId: string;
  paymentIntentId: string;
  cause: string;
} & Sum;

/** What an event of the payment provider says, in our own words. */
export type PaymentFact =
  PaidFact | LateFact | EndedFact | RefundedFact | DisputedFact | { kind: 'unknown'; reason: string };

/** What an event did; for the event's row and the ledger of changes. */
export interface Effect {
  state: 'kept' | 'applied' | 'unknown';
  action: string;
  orderId: number | null;
  note: string;
  details: Record<string, unknown>;
}

/** An event about something that is not known yet: it waits. */
export function waits(what: string): Effect {
  return {
    state: 'kept',
    action: 'event.wait',
    orderId: null,
    note: `${what} is not known yet`,
    details: {},
  };
}
