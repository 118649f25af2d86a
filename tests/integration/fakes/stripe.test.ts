import Stripe from 'stripe';
import { describe, expect, it } from 'vitest';
import { openProviderCheckout } from '~/server/payments/checkout-session';
import { paymentsClient } from '~/server/payments/client';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import { apiKey, buildCheckout, pay, post, stripeAtWork, webhookSecret } from './stripe-at-work';

const provider = stripeAtWork();

describe('a checkout session', () => {
  it('is opened with our total, our ids and an end', async () => {
    const input = buildCheckout();
    const { sessionId, url } = await openProviderCheckout(provider.stripe, input);
    const session = await provider.stripe.checkout.sessions.retrieve(sessionId);
    expect(url).toBe(`${provider.url}/pay/${sessionId}`);
    expect(session).toMatchObject({
      amount_total: 44_850,
      currency: 'eur',
      status: 'open',
      payment_status: 'unpaid',
      payment_intent: null,
      customer_email: 'quirin@buyer.test',
      client_reference_id: 'chk-1',
      metadata: { checkout_id: 'chk-1', order_number: 'R-1042' },
      expires_at: Math.floor(input.expiresAt.getTime() / 1000),
    });
  });

  it('is the same one when the call is repeated, and an error when the key is used for another', async () => {
    const input = buildCheckout();
    const first = await openProviderCheckout(provider.stripe, input);
    expect(await openProviderCheckout(provider.stripe, input)).toEqual(first);
    const together = await Promise.all([1, 2, 3].map(() => openProviderCheckout(provider.stripe, input)));
    expect(new Set(together.map(({ sessionId }) => sessionId))).toEqual(new Set([first.sessionId]));
    await expect(
      openProviderCheckout(provider.stripe, { ...input, email: 'other@buyer.test' }),
    ).rejects.toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect(
      (await openProviderCheckout(provider.stripe, buildCheckout({ checkoutId: 'chk-2' }))).sessionId,
    ).not.toBe(first.sessionId);
  });

  it.each([
    ['shorter than 30 minutes', { expiresAt: new Date(Date.now() + 29 * 60_000) }, 'expires_at'],
    ['longer than a day', { expiresAt: new Date(Date.now() + 25 * 3_600_000) }, 'expires_at'],
    ['without lines', { lines: [] }, 'line_items'],
    [
      'of a fraction of a minor unit',
      { lines: [{ name: 'Half', amountMinor: 100.5 }] },
      'line_items[0][price_data][unit_amount]',
    ],
    ['below the smallest charge', { lines: [{ name: 'Screw', amountMinor: 49 }] }, 'line_items'],
    ['that leads to another machine', { successUrl: 'https://shop.example/paid' }, 'success_url'],
  ])('%s is refused', async (_name, changes, param) => {
    await expect(openProviderCheckout(provider.stripe, buildCheckout(changes))).rejects.toMatchObject({
      type: 'StripeInvalidRequestError',
      statusCode: 400,
      param,
    });
  });

  it('may be mended under the same key after a refusal', async () => {
    await expect(openProviderCheckout(provider.stripe, buildCheckout({ lines: [] }))).rejects.toThrow(
      'line_items',
    );
    expect((await openProviderCheckout(provider.stripe, buildCheckout())).sessionId).toMatch(/^cs_test_/);
  });

  it('refuses a parameter that the provider does not know', async () => {
    const response = await post(
      `${provider.url}/v1/checkout/sessions`,
      { mode: 'payment', colour: 'red' },
      {
        authorization: `Bearer ${apiKey}`,
      },
    );
    expect(response.status).toBe(400);
  });

  it('wants the right key', async () => {
    const stranger = paymentsClient({ secretKey: 'sk_test_other', apiUrl: new URL(provider.url) });
    await expect(openProviderCheckout(stranger, buildCheckout())).rejects.toBeInstanceOf(
      Stripe.errors.StripeAuthenticationError,
    );
  });

  it.each(['cs_test_nothing', '__proto__', 'constructor'])('named %s is not there', async (id) => {
    await expect(provider.stripe.checkout.sessions.retrieve(id)).rejects.toMatchObject({
      statusCode: 404,
      code: 'resource_missing',
    });
    expect((await fetch(`${provider.url}/pay/${id}`)).status).toBe(404);
  });
});

describe('paying', () => {
  it('shows lines and total, and escapes what comes from data', async () => {
    const { url } = await openProviderCheckout(provider.stripe, buildCheckout());
    const response = await fetch(url);
    const html = await response.text();
    expect(html).toContain('Holm 3 with narrow filter');
    expect(html).toContain('&quot;straight&quot; &lt;ring&gt;');
    expect(html).toContain('EUR 448.50'.replace(' ', '\u00a0'));
    expect(html).toContain('Stand-in for the payment provider');
    // Under `no-referrer` a browser would send this page's own form as if from another site.
    expect(response.headers.get('referrer-policy')).toBe('same-origin');
    expect(html).not.toMatch(/<script|style=|\son\w+=/);
    expect(response.headers.get('content-security-policy')).toContain("default-src 'none'");
    expect(response.headers.get('content-security-policy')).toContain(
      "form-action 'self' http://127.0.0.1:4321",
    );
  });

  it('completes the session, sends the buyer back and tells the application once, signed', async () => {
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    const response = await pay(opened.url, '4242 4242 4242 4242');
    expect(response.status).toBe(303);
    expect(response.headers.get('location')).toBe(`http://127.0.0.1:4321/paid?session=${opened.sessionId}`);
    await provider.receiver.waitFor(1);

    const session = await provider.stripe.checkout.sessions.retrieve(opened.sessionId, {
      expand: ['payment_intent'],
    });
    expect(session).toMatchObject({ status: 'complete', payment_status: 'paid', url: null });
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    expect(intent).toMatchObject({
      status: 'succeeded',
      amount_received: 44_850,
      metadata: { checkout_id: 'chk-1' },
    });
    expect(await provider.stripe.paymentIntents.retrieve(intent.id)).toMatchObject({
      id: intent.id,
      amount: 44_850,
    });

    const { id, type, fact } = provider.factOf(0);
    expect(type).toBe('checkout.session.completed');
    expect(fact).toEqual({
      kind: 'checkout_paid',
      checkoutId: 'chk-1',
      orderNumber: 'R-1042',
      sessionId: opened.sessionId,
      paymentIntentId: intent.id,
      amountMinor: 44_850,
      currency: 'EUR',
    });
    expect(await provider.stripe.events.retrieve(id)).toMatchObject({ id, type });
    expect((await pay(opened.url, '4242424242424242')).status).toBe(200);
    expect(provider.receiver.received).toHaveLength(1);
  });

  it.each([
    ['4000000000000002', 'Your card was declined.'],
    ['4000000000009995', 'Your card has insufficient funds.'],
    ['4111111111111111', 'not one of the test card numbers'],
    ['', 'not one of the test card numbers'],
  ])('is refused with card %s and may be tried again', async (number, message) => {
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    const refused = await pay(opened.url, number);
    expect(refused.status).toBe(402);
    const html = await refused.text();
    expect(html).toContain(message);
    expect(html).toContain('aria-invalid="true"');
    expect(provider.receiver.received).toHaveLength(0);
    expect((await provider.stripe.checkout.sessions.retrieve(opened.sessionId)).payment_status).toBe(
      'unpaid',
    );
    expect((await pay(opened.url, '4242424242424242')).status).toBe(303);
  });

  it('is left by cancelling, and the session stays open', async () => {
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    const response = await post(opened.url, { action: 'cancel' });
    expect(response.headers.get('location')).toBe('http://127.0.0.1:4321/rigs/holm-3');
    expect((await provider.stripe.checkout.sessions.retrieve(opened.sessionId)).status).toBe('open');
  });

  it.each([
    ['settle', 'checkout_paid'],
    ['fail', 'checkout_payment_failed'],
  ])('by bank debit is not paid until the debit settles (%s)', async (action, kind) => {
    const opened = await openProviderCheckout(provider.stripe, buildCheckout());
    expect((await post(opened.url, { action: 'pay', method: 'debit' })).status).toBe(303);
    expect(provider.factOf(0)).toMatchObject({
      type: 'checkout.session.completed',
      fact: { kind: 'checkout_awaits_payment' },
    });
    expect((await provider.control({ action, session: opened.sessionId })).status).toBe(200);
    expect(provider.factOf(1).fact).toMatchObject({ kind, checkoutId: 'chk-1' });
  });
});

describe('the stand-in', () => {
  const options = { port: 0, webhookUrl: 'http://127.0.0.1:1/webhook', webhookSecret, apiKey };
  it.each([
    ['beside an application elsewhere', { webhookUrl: 'https://works.example/api/webhooks/stripe' }],
    ['beside a name that only looks local', { webhookUrl: 'http://localhost.example/webhook' }],
    ['with a live key', { apiKey: 'sk_live_1' }],
  ])('does not start %s', async (_name, changes) => {
    await expect(startStripeFake({ ...options, ...changes })).rejects.toThrow(/stand-in/);
  });

  it('is not called elsewhere or with a live key', () => {
    expect(() => paymentsClient({ secretKey: apiKey, apiUrl: new URL('http://works.example') })).toThrow(
      RangeError,
    );
    expect(() => paymentsClient({ secretKey: 'sk_live_1', apiUrl: new URL('http://127.0.0.1:1') })).toThrow(
      RangeError,
    );
  });
});
