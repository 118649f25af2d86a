import { describe, expect, it } from 'vitest';
import { openProviderCheckout } from '~/server/payments/checkout-session';
import { buildCheckout, pay, post, stripeAtWork } from './stripe-at-work';

const provider = stripeAtWork();

describe('a payment afterwards', () => {
  it('is refunded in part, then in full, and never beyond', async () => {
    const session = await provider.paidSession();
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    const refund = (amount?: number) => provider.stripe.refunds.create({ payment_intent: intent.id, amount });

    expect(await refund(10_000)).toMatchObject({ status: 'succeeded', amount: 10_000, currency: 'eur' });
    await provider.receiver.waitFor(2);
    expect(provider.factOf(1)).toMatchObject({
      type: 'charge.refunded',
      fact: {
        kind: 'payment_refunded',
        paymentIntentId: intent.id,
        amountMinor: 44_850,
        refundedMinor: 10_000,
      },
    });
    await expect(refund(34_851)).rejects.toMatchObject({ statusCode: 400, param: 'amount' });
    expect(await refund()).toMatchObject({ amount: 34_850 });
    await provider.receiver.waitFor(3);
    expect(provider.factOf(2).fact).toMatchObject({ refundedMinor: 44_850 });
    await expect(refund(1)).rejects.toMatchObject({ code: 'charge_already_refunded' });
    await expect(provider.stripe.refunds.create({ payment_intent: 'pi_none' })).rejects.toMatchObject({
      statusCode: 404,
    });
  });

  it('is refunded once when the call is repeated under one key', async () => {
    const session = await provider.paidSession();
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    const refund = () =>
      provider.stripe.refunds.create(
        { payment_intent: intent.id, amount: 500 },
        { idempotencyKey: 'refund-1' },
      );
    expect((await refund()).id).toBe((await refund()).id);
    const again = await provider.stripe.paymentIntents.retrieve(intent.id, { expand: ['latest_charge'] });
    expect(again.latest_charge).toMatchObject({ amount_refunded: 500 });
  });

  it('is disputed', async () => {
    const session = await provider.paidSession();
    await provider.control({ action: 'dispute', session: session.id });
    expect(provider.factOf(1)).toMatchObject({
      type: 'charge.dispute.created',
      fact: { kind: 'payment_disputed', amountMinor: 44_850, currency: 'EUR', cause: 'fraudulent' },
    });
    expect((await provider.control({ action: 'dispute', session: session.id })).status).toBe(400);
  });
});

describe('an open session', () => {
  it('is expired by the application, and cannot be paid then', async () => {
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    expect((await provider.stripe.checkout.sessions.expire(opened.sessionId)).status).toBe('expired');
    await provider.receiver.waitFor(1);
    expect(provider.factOf(0).fact).toMatchObject({ kind: 'checkout_expired', checkoutId: 'chk-1' });
    expect((await pay(opened.url, '4242424242424242')).status).toBe(410);
    await expect(provider.stripe.checkout.sessions.expire(opened.sessionId)).rejects.toMatchObject({
      statusCode: 400,
    });
  });
});

describe('events', () => {
  it('come again until the application takes them, and then stop', async () => {
    provider.receiver.answers.push(500, 404);
    await provider.paidSession();
    await provider.receiver.waitFor(3);
    expect(new Set([0, 1, 2].map((index) => provider.factOf(index).id)).size).toBe(1);
  });

  it('that are given up come after the next start', async () => {
    provider.receiver.answers.push(500, 500, 500);
    const session = await provider.paidSession();
    await provider.receiver.waitFor(3);
    await provider.restart();
    await provider.receiver.waitFor(4);
    expect(provider.factOf(3).id).toBe(provider.factOf(0).id);
    expect((await provider.stripe.checkout.sessions.retrieve(session.id)).payment_status).toBe('paid');
  });

  it('are sent five times at once on request, the same event each time', async () => {
    await provider.paidSession();
    const { id } = provider.factOf(0);
    await provider.control({ action: 'resend', event: id, times: '5' });
    expect(provider.receiver.received).toHaveLength(6);
    expect(new Set(provider.receiver.received.map(({ body }) => body)).size).toBe(1);
    expect(provider.factOf(5).id).toBe(id);
  });

  it('are held back and sent newest first on request', async () => {
    await provider.control({ action: 'hold' });
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    await pay(opened.url, '4242424242424242');
    await provider.control({ action: 'refund', session: opened.sessionId, amount: '100' });
    expect(provider.receiver.received).toHaveLength(0);
    await provider.control({ action: 'release', order: 'newest' });
    expect([provider.factOf(0).type, provider.factOf(1).type]).toEqual([
      'charge.refunded',
      'checkout.session.completed',
    ]);
  });

  it('of a type without use are read as unknown', async () => {
    const session = await provider.paidSession();
    await provider.control({ action: 'unknown', session: session.id });
    expect(provider.factOf(1).fact).toEqual({ kind: 'unknown', reason: 'type_not_used' });
  });
});

describe('the control page', () => {
  it('lists sessions with their events, and answers forms with a redirect', async () => {
    const session = await provider.paidSession();
    const html = await (await fetch(`${provider.url}/control`)).text();
    expect(html).toContain('R-1042');
    expect(html).toContain('checkout.session.completed');
    expect(html).toContain('delivered');
    const response = await post(`${provider.url}/control`, {
      action: 'refund',
      session: session.id,
      amount: '',
    });
    expect([response.status, response.headers.get('location')]).toEqual([303, '/control']);
  });

  it('takes nothing from another site', async () => {
    const response = await post(
      `${provider.url}/control`,
      { action: 'hold' },
      { origin: 'http://evil.example' },
    );
    expect(response.status).toBe(403);
  });
});
