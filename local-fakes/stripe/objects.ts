import { totalOf, type Payment, type Refund, type Session, type Store } from './state';

type Json = Record<string, unknown>;

/** Paths named by `expand`, for example `payment_intent.latest_charge`. */
export type Expansions = ReadonlySet<string>;
const NOTHING: Expansions = new Set();

function below(expansions: Expansions, field: string): Expansions {
  const prefix = `${field}.`;
  return new Set(
    [...expansions].filter((path) => path.startsWith(prefix)).map((path) => path.slice(prefix.length)),
  );
}

export function chargeObject(store: Store, payment: Payment): Json {
  const refunded = store.refundedOf(payment.id);
  return {
    id: payment.chargeId,
    object: 'charge',
    amount: payment.amount,
    amount_captured: payment.status === 'succeeded' ? payment.amount : 0,
    amount_refunded: refunded,
    captured: payment.status === 'succeeded',
    created: payment.created,
    currency: payment.currency,
    description: payment.description,
    disputed: payment.disputeId !== null,
    livemode: false,
    metadata: payment.metadata,
    paid: payment.status === 'succeeded',
    payment_intent: payment.id,
    payment_method_details: { type: payment.method },
    refunded: refunded === payment.amount,
    status: payment.status === 'succeeded' ? 'succeeded' : 'pending',
  };
}

export function paymentIntentObject(store: Store, payment: Payment, expansions = NOTHING): Json {
  const done = payment.status === 'succeeded';
  const charge = payment.status === 'requires_payment_method' ? null : payment.chargeId;
  return {
    id: payment.id,
    object: 'payment_intent',
    amount: payment.amount,
    amount_received: done ? payment.amount : 0,
    canceled_at: null,
    capture_method: 'automatic_async',
    created: payment.created,
    currency: payment.currency,
    description: payment.description,
    latest_charge: charge !== null && expansions.has('latest_charge') ? chargeObject(store, payment) : charge,
    livemode: false,
    metadata: payment.metadata,
    payment_method_types: [payment.method],
    status: payment.status,
  };
}

export function sessionObject(store: Store, session: Session, baseUrl: string, expansions = NOTHING): Json {
  const total = totalOf(session);
  const payment = session.paymentIntent === null ? undefined : store.state.payments[session.paymentIntent];
  return {
    id: session.id,
    object: 'checkout.session',
    amount_subtotal: total,
    amount_total: total,
    cancel_url: session.cancelUrl,
    client_reference_id: session.clientReferenceId,
    created: session.created,
    currency: session.currency,
    customer: null,
    customer_details:
      session.status === 'complete' ? { email: session.customerEmail, name: null, phone: null } : null,
    customer_email: session.customerEmail,
    expires_at: session.expiresAt,
    livemode: false,
    metadata: session.metadata,
    mode: 'payment',
    payment_intent:
      payment && expansions.has('payment_intent')
        ? paymentIntentObject(store, payment, below(expansions, 'payment_intent'))
        : session.paymentIntent,
    payment_method_types: ['card', 'sepa_debit'],
    payment_status: session.paymentStatus,
    status: session.status,
    success_url: session.successUrl,
    ui_mode: 'hosted_page',
    url: session.status === 'open' ? `${baseUrl}/pay/${session.id}` : null,
  };
}

export function refundObject(store: Store, refund: Refund): Json {
  const payment = store.state.payments[refund.paymentIntent];
  return {
    id: refund.id,
    object: 'refund',
    amount: refund.amount,
    charge: payment?.chargeId ?? null,
    created: refund.created,
    currency: payment?.currency ?? null,
    metadata: refund.metadata,
    payment_intent: refund.paymentIntent,
    reason: refund.reason,
    status: 'succeeded',
  };
}

export function disputeObject(payment: Payment, created: number): Json {
  return {
    id: payment.disputeId,
    object: 'dispute',
    amount: payment.amount,
    charge: payment.chargeId,
    created,
    currency: payment.currency,
    is_charge_refundable: false,
    livemode: false,
    metadata: {},
    payment_intent: payment.id,
    reason: 'fraudulent',
    status: 'needs_response',
  };
}
