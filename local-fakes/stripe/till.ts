import type { Courier } from './deliver';
import { chargeObject, disputeObject, sessionObject } from './objects';
import { Fault, invalid } from './fault';
import { newId, nowSeconds, totalOf, type Payment, type Refund, type Session, type Store } from './state';

/**
 * Test card numbers that the provider publishes (its documentation, "Test card numbers"); every other number
 * is refused as the provider refuses a real card in test mode.
 */
const cards: Record<string, { code: string; declineCode?: string; message: string } | 'succeeds'> = {
  '4242424242424242': 'succeeds',
  '4000000000000002': {
    code: 'card_declined',
    declineCode: 'generic_decline',
    message: 'Your card was declined.',
  },
  '4000000000009995': {
    code: 'card_declined',
    declineCode: 'insufficient_funds',
    message: 'Your card has insufficient funds.',
  },
};

/** What happens to sessions and payments, and which events tell of it. */
export class Till {
  readonly #store: Store;
  readonly #courier: Courier;
  readonly #baseUrl: () => string;

  constructor(store: Store, courier: Courier, baseUrl: () => string) {
    this.#store = store;
    this.#courier = courier;
    this.#baseUrl = baseUrl;
  }

  /** @throws {Fault} 402 for a declined card, 400 for a number that is no test number or a closed session. */
  async payByCard(session: Session, cardNumber: string): Promise<void> {
    this.#mustBeOpen(session);
    const outcome = cards[cardNumber.replace(/[\s-]/g, '')];
    if (outcome === undefined) {
      throw new Fault(402, {
        type: 'card_error',
        code: 'incorrect_number',
        param: 'number',
        message: 'This is not one of the test card numbers below. Do not type a real card number here.',
      });
    }
    if (outcome !== 'succeeds') {
      session.declines += 1;
      this.#store.save();
      throw new Fault(402, {
        type: 'card_error',
        code: outcome.code,
        decline_code: outcome.declineCode,
        message: outcome.message,
      });
    }
    this.#openPayment(session, 'card', 'succeeded');
    session.paymentStatus = 'paid';
    await this.#tell('checkout.session.completed', session);
  }

  /** The buyer is through the page, the money comes later or not at all. */
  async payByDebit(session: Session): Promise<void> {
    this.#mustBeOpen(session);
    this.#openPayment(session, 'sepa_debit', 'processing');
    await this.#tell('checkout.session.completed', session);
  }

  settleDebit(session: Session, succeeds: boolean): Promise<void> {
    const payment = this.#paymentOf(session);
    if (payment.status !== 'processing') throw invalid('This session waits for no bank debit.');
    payment.status = succeeds ? 'succeeded' : 'requires_payment_method';
    if (succeeds) session.paymentStatus = 'paid';
    return this.#tell(
      succeeds ? 'checkout.session.async_payment_succeeded' : 'checkout.session.async_payment_failed',
      session,
    );
  }

  /** Throws at once where it cannot be; the promise is about telling. */
  expire(session: Session): Promise<void> {
    this.#mustBeOpen(session);
    session.status = 'expired';
    return this.#tell('checkout.session.expired', session);
  }

  /** Ends sessions whose time is over; their events follow by themselves. */
  expireDue(): void {
    const due = Object.values(this.#store.state.sessions).filter(
      (session) => session.status === 'open' && session.expiresAt <= nowSeconds(),
    );
    for (const session of due) void this.expire(session);
  }

  /** Refunds `amount`, or all that is left of the payment. */
  refund(
    payment: Payment,
    amount: number | null,
    reason: string | null,
    metadata: Record<string, string>,
  ): { refund: Refund; told: Promise<void> } {
    if (payment.status !== 'succeeded') {
      throw invalid('This PaymentIntent does not have a successful charge to refund.', 'payment_intent');
    }
    const left = payment.amount - this.#store.refundedOf(payment.id);
    if (left === 0) {
      const message = `Charge ${payment.chargeId} has already been refunded.`;
      throw invalid(message, undefined, 'charge_already_refunded');
    }
    const sum = amount ?? left;
    if (sum > left) {
      const unit = payment.currency.toUpperCase();
      throw invalid(
        `Refund amount (${sum} ${unit} in minor units) is greater than unrefunded amount on charge (${left} ${unit})`,
        'amount',
      );
    }
    const refund: Refund = {
      id: newId('re'),
      created: nowSeconds(),
      paymentIntent: payment.id,
      amount: sum,
      reason,
      metadata,
    };
    this.#store.state.refunds[refund.id] = refund;
    this.#store.save();
    const session = this.#sessionOf(payment);
    return {
      refund,
      told: this.#courier.emit('charge.refunded', session, chargeObject(this.#store, payment)),
    };
  }

  async refundSession(session: Session, amount: number | null): Promise<void> {
    await this.refund(this.#paymentOf(session), amount, 'requested_by_customer', {}).told;
  }

  async dispute(session: Session): Promise<void> {
    const payment = this.#paymentOf(session);
    if (payment.status !== 'succeeded' || payment.disputeId !== null) {
      throw invalid('Only a payment that succeeded can be disputed, and only once.');
    }
    payment.disputeId = newId('du');
    this.#store.save();
    await this.#courier.emit('charge.dispute.created', session, disputeObject(payment, nowSeconds()));
  }

  /** A type that the application has no use for. */
  async sendUnknown(session: Session): Promise<void> {
    await this.#courier.emit('payment_method.attached', session, {
      id: newId('pm'),
      object: 'payment_method',
      type: 'card',
    });
  }

  async #tell(type: string, session: Session): Promise<void> {
    this.#store.save();
    await this.#courier.emit(type, session, sessionObject(this.#store, session, this.#baseUrl()));
  }

  #openPayment(session: Session, method: Payment['method'], status: Payment['status']): void {
    const payment: Payment = {
      id: newId('pi'),
      chargeId: newId('ch'),
      sessionId: session.id,
      created: nowSeconds(),
      amount: totalOf(session),
      currency: session.currency,
      method,
      status,
      description: session.description,
      metadata: session.paymentMetadata,
      disputeId: null,
    };
    this.#store.state.payments[payment.id] = payment;
    session.paymentIntent = payment.id;
    session.status = 'complete';
  }

  #mustBeOpen(session: Session): void {
    if (session.status !== 'open') {
      throw invalid(
        `Only Checkout Sessions with a status in ["open"] can be expired or paid. This Checkout Session has a status of ${session.status}.`,
      );
    }
  }

  #paymentOf(session: Session): Payment {
    const payment =
      session.paymentIntent === null ? undefined : this.#store.state.payments[session.paymentIntent];
    if (!payment) throw invalid('Nothing was paid in this session.');
    return payment;
  }

  #sessionOf(payment: Payment): Session {
    const session = this.#store.state.sessions[payment.sessionId];
    if (!session) throw new Error(`Payment ${payment.id} has no session`);
    return session;
  }
}
