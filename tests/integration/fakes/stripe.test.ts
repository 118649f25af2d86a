import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Stripe from 'stripe';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openProviderCheckout, providerExpiry } from '~/server/payments/checkout-session';
import { paymentsClient } from '~/server/payments/client';
import { readProviderEvent } from '~/server/payments/read-event';
import { verifyProviderEvent } from '~/server/payments/verify-event';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import { startReceiver } from './receiver';

const apiKey = 'sk_test_rigwright';
const webhookSecret = 'whsec_test_fakes';

let receiver: Awaited<ReturnType<typeof startReceiver>>;
let fake: Awaited<ReturnType<typeof startStripeFake>>;
let stripe: Stripe;
let folder: string;

function start() {
  return startStripeFake({
    port: 0,
    webhookUrl: receiver.url,
    webhookSecret,
    apiKey,
    dataFile: join(folder, 'stripe.json'),
    retryDelaysMs: [5, 5],
  });
}

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'rigwright-stripe-'));
  receiver = await startReceiver();
  fake = await start();
  stripe = paymentsClient({ secretKey: apiKey, apiUrl: new URL(fake.url) });
});

afterEach(async () => {
  await fake.close();
  await receiver.close();
  rmSync(folder, { recursive: true, force: true });
});

function checkout(changes: Partial<Parameters<typeof openProviderCheckout>[1]> = {}) {
  return {
    checkoutId: 'chk-1',
    orderNumber: 'R-1042',
    currency: 'EUR',
    lines: [
      { name: 'Holm 3 with narrow filter', amountMinor: 43_700 },
      { name: 'Key cable, 3.5 mm & "straight" <ring>', amountMinor: 1_150 },
    ],
    email: 'quirin@buyer.test',
    successUrl: 'http://127.0.0.1:4321/paid?session={CHECKOUT_SESSION_ID}',
    cancelUrl: 'http://127.0.0.1:4321/rigs/holm-3',
    expiresAt: providerExpiry(new Date()),
    ...changes,
  };
}

function post(url: string, form: Record<string, string>, headers: Record<string, string> = {}) {
  return fetch(url, { method: 'POST', redirect: 'manual', body: new URLSearchParams(form), headers });
}

function pay(url: string, number: string) {
  return post(url, { action: 'pay', method: 'card', number });
}

function control(form: Record<string, string>) {
  return post(`${fake.url}/control`, form, { accept: 'application/json' });
}

function factOf(index: number) {
  const delivery = receiver.received[index];
  if (!delivery) throw new Error(`Only ${receiver.received.length} events arrived`);
  const verified = verifyProviderEvent(delivery.body, delivery.signature, [webhookSecret], Date.now() / 1000);
  if (!verified.ok) throw new Error(`Event ${index} does not verify: ${verified.reason}`);
  return { id: verified.event.id, type: verified.event.type, fact: readProviderEvent(verified.event) };
}

async function paidSession() {
  const opened = await openProviderCheckout(stripe, checkout());
  expect((await pay(opened.url, '4242424242424242')).status).toBe(303);
  await receiver.waitFor(1);
  return stripe.checkout.sessions.retrieve(opened.sessionId, { expand: ['payment_intent.latest_charge'] });
}

describe('a checkout session', () => {
  it('is opened with our total, our ids and an end', async () => {
    const input = checkout();
    const { sessionId, url } = await openProviderCheckout(stripe, input);
    const session = await stripe.checkout.sessions.retrieve(sessionId);
    expect(url).toBe(`${fake.url}/pay/${sessionId}`);
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
    const input = checkout();
    const first = await openProviderCheckout(stripe, input);
    expect(await openProviderCheckout(stripe, input)).toEqual(first);
    const together = await Promise.all([1, 2, 3].map(() => openProviderCheckout(stripe, input)));
    expect(new Set(together.map(({ sessionId }) => sessionId))).toEqual(new Set([first.sessionId]));
    await expect(
      openProviderCheckout(stripe, { ...input, email: 'other@buyer.test' }),
    ).rejects.toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect((await openProviderCheckout(stripe, checkout({ checkoutId: 'chk-2' }))).sessionId).not.toBe(
      first.sessionId,
    );
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
    await expect(openProviderCheckout(stripe, checkout(changes))).rejects.toMatchObject({
      type: 'StripeInvalidRequestError',
      statusCode: 400,
      param,
    });
  });

  it('may be mended under the same key after a refusal', async () => {
    await expect(openProviderCheckout(stripe, checkout({ lines: [] }))).rejects.toThrow('line_items');
    expect((await openProviderCheckout(stripe, checkout())).sessionId).toMatch(/^cs_test_/);
  });

  it('refuses a parameter that the provider does not know', async () => {
    const response = await post(
      `${fake.url}/v1/checkout/sessions`,
      { mode: 'payment', colour: 'red' },
      {
        authorization: `Bearer ${apiKey}`,
      },
    );
    expect(response.status).toBe(400);
  });

  it('wants the right key', async () => {
    const stranger = paymentsClient({ secretKey: 'sk_test_other', apiUrl: new URL(fake.url) });
    await expect(openProviderCheckout(stranger, checkout())).rejects.toBeInstanceOf(
      Stripe.errors.StripeAuthenticationError,
    );
  });

  it.each(['cs_test_nothing', '__proto__', 'constructor'])('named %s is not there', async (id) => {
    await expect(stripe.checkout.sessions.retrieve(id)).rejects.toMatchObject({
      statusCode: 404,
      code: 'resource_missing',
    });
    expect((await fetch(`${fake.url}/pay/${id}`)).status).toBe(404);
  });
});

describe('paying', () => {
  it('shows lines and total, and escapes what comes from data', async () => {
    const { url } = await openProviderCheckout(stripe, checkout());
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
    const opened = await openProviderCheckout(stripe, checkout());
    const response = await pay(opened.url, '4242 4242 4242 4242');
    expect(response.status).toBe(303);
    expect(response.headers.get('location')).toBe(`http://127.0.0.1:4321/paid?session=${opened.sessionId}`);
    await receiver.waitFor(1);

    const session = await stripe.checkout.sessions.retrieve(opened.sessionId, { expand: ['payment_intent'] });
    expect(session).toMatchObject({ status: 'complete', payment_status: 'paid', url: null });
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    expect(intent).toMatchObject({
      status: 'succeeded',
      amount_received: 44_850,
      metadata: { checkout_id: 'chk-1' },
    });
    expect(await stripe.paymentIntents.retrieve(intent.id)).toMatchObject({ id: intent.id, amount: 44_850 });

    const { id, type, fact } = factOf(0);
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
    expect(await stripe.events.retrieve(id)).toMatchObject({ id, type });
    expect((await pay(opened.url, '4242424242424242')).status).toBe(200);
    expect(receiver.received).toHaveLength(1);
  });

  it.each([
    ['4000000000000002', 'Your card was declined.'],
    ['4000000000009995', 'Your card has insufficient funds.'],
    ['4111111111111111', 'not one of the test card numbers'],
    ['', 'not one of the test card numbers'],
  ])('is refused with card %s and may be tried again', async (number, message) => {
    const opened = await openProviderCheckout(stripe, checkout());
    const refused = await pay(opened.url, number);
    expect(refused.status).toBe(402);
    const html = await refused.text();
    expect(html).toContain(message);
    expect(html).toContain('aria-invalid="true"');
    expect(receiver.received).toHaveLength(0);
    expect((await stripe.checkout.sessions.retrieve(opened.sessionId)).payment_status).toBe('unpaid');
    expect((await pay(opened.url, '4242424242424242')).status).toBe(303);
  });

  it('is left by cancelling, and the session stays open', async () => {
    const opened = await openProviderCheckout(stripe, checkout());
    const response = await post(opened.url, { action: 'cancel' });
    expect(response.headers.get('location')).toBe('http://127.0.0.1:4321/rigs/holm-3');
    expect((await stripe.checkout.sessions.retrieve(opened.sessionId)).status).toBe('open');
  });

  it.each([
    ['settle', 'checkout_paid'],
    ['fail', 'checkout_payment_failed'],
  ])('by bank debit is not paid until the debit settles (%s)', async (action, kind) => {
    const opened = await openProviderCheckout(stripe, checkout());
    expect((await post(opened.url, { action: 'pay', method: 'debit' })).status).toBe(303);
    expect(factOf(0)).toMatchObject({
      type: 'checkout.session.completed',
      fact: { kind: 'checkout_awaits_payment' },
    });
    expect((await control({ action, session: opened.sessionId })).status).toBe(200);
    expect(factOf(1).fact).toMatchObject({ kind, checkoutId: 'chk-1' });
  });
});

describe('a payment afterwards', () => {
  it('is refunded in part, then in full, and never beyond', async () => {
    const session = await paidSession();
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    const refund = (amount?: number) => stripe.refunds.create({ payment_intent: intent.id, amount });

    expect(await refund(10_000)).toMatchObject({ status: 'succeeded', amount: 10_000, currency: 'eur' });
    await receiver.waitFor(2);
    expect(factOf(1)).toMatchObject({
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
    await receiver.waitFor(3);
    expect(factOf(2).fact).toMatchObject({ refundedMinor: 44_850 });
    await expect(refund(1)).rejects.toMatchObject({ code: 'charge_already_refunded' });
    await expect(stripe.refunds.create({ payment_intent: 'pi_none' })).rejects.toMatchObject({
      statusCode: 404,
    });
  });

  it('is refunded once when the call is repeated under one key', async () => {
    const session = await paidSession();
    const intent = session.payment_intent;
    if (intent === null || typeof intent === 'string') throw new Error('The payment intent was not expanded');
    const refund = () =>
      stripe.refunds.create({ payment_intent: intent.id, amount: 500 }, { idempotencyKey: 'refund-1' });
    expect((await refund()).id).toBe((await refund()).id);
    const again = await stripe.paymentIntents.retrieve(intent.id, { expand: ['latest_charge'] });
    expect(again.latest_charge).toMatchObject({ amount_refunded: 500 });
  });

  it('is disputed', async () => {
    const session = await paidSession();
    await control({ action: 'dispute', session: session.id });
    expect(factOf(1)).toMatchObject({
      type: 'charge.dispute.created',
      fact: { kind: 'payment_disputed', amountMinor: 44_850, currency: 'EUR', cause: 'fraudulent' },
    });
    expect((await control({ action: 'dispute', session: session.id })).status).toBe(400);
  });
});

describe('an open session', () => {
  it('is expired by the application, and cannot be paid then', async () => {
    const opened = await openProviderCheckout(stripe, checkout());
    expect((await stripe.checkout.sessions.expire(opened.sessionId)).status).toBe('expired');
    await receiver.waitFor(1);
    expect(factOf(0).fact).toMatchObject({ kind: 'checkout_expired', checkoutId: 'chk-1' });
    expect((await pay(opened.url, '4242424242424242')).status).toBe(410);
    await expect(stripe.checkout.sessions.expire(opened.sessionId)).rejects.toMatchObject({
      statusCode: 400,
    });
  });
});

describe('events', () => {
  it('come again until the application takes them, and then stop', async () => {
    receiver.answers.push(500, 404);
    await paidSession();
    await receiver.waitFor(3);
    expect(new Set([0, 1, 2].map((index) => factOf(index).id)).size).toBe(1);
  });

  it('that are given up come after the next start', async () => {
    receiver.answers.push(500, 500, 500);
    const session = await paidSession();
    await receiver.waitFor(3);
    await fake.close();
    fake = await start();
    await receiver.waitFor(4);
    expect(factOf(3).id).toBe(factOf(0).id);
    stripe = paymentsClient({ secretKey: apiKey, apiUrl: new URL(fake.url) });
    expect((await stripe.checkout.sessions.retrieve(session.id)).payment_status).toBe('paid');
  });

  it('are sent five times at once on request, the same event each time', async () => {
    await paidSession();
    const { id } = factOf(0);
    await control({ action: 'resend', event: id, times: '5' });
    expect(receiver.received).toHaveLength(6);
    expect(new Set(receiver.received.map(({ body }) => body)).size).toBe(1);
    expect(factOf(5).id).toBe(id);
  });

  it('are held back and sent newest first on request', async () => {
    await control({ action: 'hold' });
    const opened = await openProviderCheckout(stripe, checkout());
    await pay(opened.url, '4242424242424242');
    await control({ action: 'refund', session: opened.sessionId, amount: '100' });
    expect(receiver.received).toHaveLength(0);
    await control({ action: 'release', order: 'newest' });
    expect([factOf(0).type, factOf(1).type]).toEqual(['charge.refunded', 'checkout.session.completed']);
  });

  it('of a type without use are read as unknown', async () => {
    const session = await paidSession();
    await control({ action: 'unknown', session: session.id });
    expect(factOf(1).fact).toEqual({ kind: 'unknown', reason: 'type_not_used' });
  });
});

describe('the control page', () => {
  it('lists sessions with their events, and answers forms with a redirect', async () => {
    const session = await paidSession();
    const html = await (await fetch(`${fake.url}/control`)).text();
    expect(html).toContain('R-1042');
    expect(html).toContain('checkout.session.completed');
    expect(html).toContain('delivered');
    const response = await post(`${fake.url}/control`, { action: 'refund', session: session.id, amount: '' });
    expect([response.status, response.headers.get('location')]).toEqual([303, '/control']);
  });

  it('takes nothing from another site', async () => {
    const response = await post(`${fake.url}/control`, { action: 'hold' }, { origin: 'http://evil.example' });
    expect(response.status).toBe(403);
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
