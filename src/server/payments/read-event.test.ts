import { describe, expect, it } from 'vitest';
import { readProviderEvent } from './read-event';

const session = {
  object: 'checkout.session',
  id: 'cs_test_1',
  payment_status: 'paid',
  payment_intent: 'pi_1',
  amount_total: 43_700,
  currency: 'eur',
  metadata: { checkout_id: 'chk-1', order_number: 'R-1042' },
};
const charge = {
  object: 'charge',
  id: 'ch_1',
  payment_intent: 'pi_1',
  amount: 43_700,
  amount_refunded: 500,
  currency: 'eur',
};
const dispute = {
  object: 'dispute',
  id: 'du_1',
  charge: 'ch_1',
  payment_intent: 'pi_1',
  amount: 43_700,
  currency: 'eur',
  reason: 'fraudulent',
};

function read(type: string, object: Record<string, unknown>) {
  return readProviderEvent({
    id: 'evt_1',
    object: 'event',
    type,
    created: 1_700_000_000,
    livemode: false,
    data: { object },
  });
}

describe('an event of a checkout', () => {
  const ref = { checkoutId: 'chk-1', orderNumber: 'R-1042', sessionId: 'cs_test_1' };
  const paid = {
    kind: 'checkout_paid',
    ...ref,
    paymentIntentId: 'pi_1',
    amountMinor: 43_700,
    currency: 'EUR',
  };

  it.each([
    ['completed and paid', 'completed', {}, paid],
    ['paid later', 'async_payment_succeeded', {}, paid],
    ['paid, with the payment as a whole object', 'completed', { payment_intent: { id: 'pi_1' } }, paid],
    [
      'completed, but not paid yet',
      'completed',
      { payment_status: 'unpaid' },
      { ...paid, kind: 'checkout_awaits_payment' },
    ],
    [
      'not paid after all',
      'async_payment_failed',
      { payment_status: 'unpaid' },
      { kind: 'checkout_payment_failed', ...ref },
    ],
    [
      'over',
      'expired',
      { payment_status: 'unpaid', payment_intent: null },
      { kind: 'checkout_expired', ...ref },
    ],
    [
      'of another shop on the same account',
      'completed',
      { metadata: {} },
      { kind: 'unknown', reason: 'not_ours' },
    ],
    ['without metadata', 'completed', { metadata: null }, { kind: 'unknown', reason: 'not_ours' }],
  ])('%s', (_name, type, changes, fact) => {
    expect(read(`checkout.session.${type}`, { ...session, ...changes })).toEqual(fact);
  });

  it.each([
    ['a fraction of a minor unit', { amount_total: 437.5 }],
    ['a negative sum', { amount_total: -1 }],
    ['no sum', { amount_total: null }],
    ['no currency', { currency: '' }],
    ['paid without a payment', { payment_intent: null }],
    ['nothing to pay', { payment_status: 'no_payment_required' }],
    ['a state unknown', { payment_status: 'perhaps' }],
    ['another object', { object: 'charge' }],
  ])('with %s never counts as paid', (_name, changes) => {
    expect(read('checkout.session.completed', { ...session, ...changes })).toEqual({
      kind: 'unknown',
      reason: 'shape_not_understood',
    });
  });
});

describe('an event of a payment', () => {
  it('tells of a refund by what is refunded in all', () => {
    expect(read('charge.refunded', charge)).toEqual({
      kind: 'payment_refunded',
      chargeId: 'ch_1',
      paymentIntentId: 'pi_1',
      amountMinor: 43_700,
      refundedMinor: 500,
      currency: 'EUR',
    });
  });

  it('tells of a dispute', () => {
    expect(read('charge.dispute.created', dispute)).toEqual({
      kind: 'payment_disputed',
      disputeId: 'du_1',
      chargeId: 'ch_1',
      paymentIntentId: 'pi_1',
      amountMinor: 43_700,
      currency: 'EUR',
      cause: 'fraudulent',
    });
  });

  it.each([
    ['charge.refunded', dispute, 'shape_not_understood'],
    ['charge.dispute.created', charge, 'shape_not_understood'],
    ['payment_method.attached', charge, 'type_not_used'],
  ])('%s is kept as unknown where it cannot be read', (type, object, reason) => {
    expect(read(type, object)).toEqual({ kind: 'unknown', reason });
  });
});
