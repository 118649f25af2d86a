import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type Stripe from 'stripe';
import { afterEach, beforeEach, expect } from 'vitest';
import { openProviderCheckout, providerExpiry } from '~/server/payments/checkout-session';
import { paymentsClient } from '~/server/payments/client';
import { readProviderEvent } from '~/server/payments/read-event';
import { verifyProviderEvent } from '~/server/payments/verify-event';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import { startReceiver } from './receiver';

export const apiKey = 'sk_test_rigwright';
export const webhookSecret = 'whsec_test_fakes';

export function buildCheckout(changes: Partial<Parameters<typeof openProviderCheckout>[1]> = {}) {
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

export function post(url: string, form: Record<string, string>, headers: Record<string, string> = {}) {
  return fetch(url, { method: 'POST', redirect: 'manual', body: new URLSearchParams(form), headers });
}

/** Pays by card at a payment page. */
export function pay(url: string, number: string) {
  return post(url, { action: 'pay', method: 'card', number });
}

interface Running {
  fake: Awaited<ReturnType<typeof startStripeFake>>;
  receiver: Awaited<ReturnType<typeof startReceiver>>;
  stripe: Stripe;
  dataFile: string;
}

async function startFake(receiver: Running['receiver'], dataFile: string) {
  const fake = await startStripeFake({
    ...{ port: 0, webhookUrl: receiver.url, webhookSecret, apiKey, dataFile },
    retryDelaysMs: [5, 5],
  });
  return { fake, stripe: paymentsClient({ secretKey: apiKey, apiUrl: new URL(fake.url) }) };
}

/** A stand-in of each test's own, a client that calls it, and an endpoint that writes down its events. */
export function stripeAtWork() {
  let running: Running | undefined;
  const folder = mkdtempSync(join(tmpdir(), 'rigwright-stripe-'));

  function now(): Running {
    if (running === undefined) throw new Error('The stand-in runs within a test only.');
    return running;
  }

  beforeEach(async () => {
    const receiver = await startReceiver();
    const dataFile = join(folder, 'stripe.json');
    running = { ...(await startFake(receiver, dataFile)), receiver, dataFile };
  });
  afterEach(async () => {
    await running?.fake.close();
    await running?.receiver.close();
    rmSync(folder, { recursive: true, force: true });
  });

  return {
    get url() {
      return now().fake.url;
    },
    get stripe() {
      return now().stripe;
    },
    get receiver() {
      return now().receiver;
    },
    async restart(): Promise<void> {
      const { fake, receiver, dataFile } = now();
      await fake.close();
      running = { ...(await startFake(receiver, dataFile)), receiver, dataFile };
    },
    control: (form: Record<string, string>) =>
      post(`${now().fake.url}/control`, form, { accept: 'application/json' }),
    /** What the application reads from an event that has arrived. */
    factOf(index: number) {
      const { received } = now().receiver;
      const delivery = received[index];
      if (!delivery) throw new Error(`Only ${received.length} events arrived`);
      const at = Date.now() / 1000;
      const verified = verifyProviderEvent(delivery.body, delivery.signature, [webhookSecret], at);
      if (!verified.ok) throw new Error(`Event ${index} does not verify: ${verified.reason}`);
      return { id: verified.event.id, type: verified.event.type, fact: readProviderEvent(verified.event) };
    },
    async paidSession() {
      const { stripe, receiver } = now();
      const opened = await openProviderCheckout(stripe, buildCheckout());
      expect((await pay(opened.url, '4242424242424242')).status).toBe(303);
      await receiver.waitFor(1);
      return stripe.checkout.sessions.retrieve(opened.sessionId, {
        expand: ['payment_intent.latest_charge'],
      });
    },
  };
}
