import { eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { afterAll, beforeAll } from 'vitest';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import { openSession } from '~/server/auth/sessions';
import type { Db } from '~/server/db/client';
import { checkouts, orders } from '~/server/db/schema';
import { env } from '~/server/env';
import { checkoutReference } from '~/server/services/orders/checkout-reference';
import { startWebProcesses, type WebProcess } from '../../setup/web-process';

interface Answer {
  status: number;
  body: unknown;
}

/** Two built servers on the database of this worker, and a payment provider for both. */
export function twoServers(): {
  readonly both: readonly [WebProcess, WebProcess];
  /** Puts another server in the place of one that was killed. */
  replace(dead: WebProcess): Promise<void>;
} {
  let both: [WebProcess, WebProcess] | undefined;
  let closeFake: (() => Promise<void>) | undefined;
  beforeAll(async () => {
    const { stripeSecretKey, stripeWebhookSecrets } = env();
    const fake = await startStripeFake({
      port: 0,
      // The tests deliver events themselves; nobody listens here.
      webhookUrl: 'http://127.0.0.1:9/',
      webhookSecret: stripeWebhookSecrets[0] ?? '',
      apiKey: stripeSecretKey,
      retryDelaysMs: [],
    });
    closeFake = () => fake.close();
    process.env['STRIPE_API_URL'] = fake.url;
    const [one, other] = await startWebProcesses(2);
    if (one === undefined || other === undefined) throw new Error('Two servers were to start.');
    both = [one, other];
  }, 600_000);
  afterAll(async () => {
    await Promise.all(both?.map((server) => server.stop()) ?? []);
    await closeFake?.();
  });
  return {
    get both() {
      if (both === undefined) throw new Error('The servers have not started.');
      return both;
    },
    async replace(dead) {
      const [fresh] = await startWebProcesses(1);
      if (both === undefined || fresh === undefined) throw new Error('A server was to start.');
      both[both.indexOf(dead)] = fresh;
    },
  };
}

/** Posts JSON to a server, as an island does: with the session's cookie and the page's Origin. */
export async function post(
  server: WebProcess,
  path: string,
  body: unknown,
  { cookie, key }: { cookie?: string; key?: string } = {},
): Promise<Answer> {
  const response = await fetch(new URL(path, server.url), {
    method: 'POST',
    body: JSON.stringify(body),
    headers: {
      'content-type': 'application/json',
      origin: server.url,
      ...(cookie === undefined ? {} : { cookie }),
      ...(key === undefined ? {} : { 'idempotency-key': key }),
    },
  });
  return { status: response.status, body: await response.json() };
}

/** A session of a person, as the cookie header that carries it. */
export async function cookieOf(userId: number): Promise<string> {
  const { name, value } = await openSession(userId);
  return `${name}=${value}`;
}

/** What the provider sends when the checkout of an order is paid. */
export async function buildPaidEvent(db: Db, orderNumber: number, eventId: string): Promise<string> {
  const [row] = await db
    .select({ checkout: checkouts, currency: orders.currency })
    .from(checkouts)
    .innerJoin(orders, eq(orders.id, checkouts.orderId))
    .where(eq(orders.number, orderNumber));
  if (row === undefined) throw new Error(`Order ${orderNumber} has no checkout.`);
  return JSON.stringify({
    id: eventId,
    object: 'event',
    type: 'checkout.session.completed',
    created: Math.floor(Date.now() / 1000),
    livemode: false,
    data: {
      object: {
        id: row.checkout.providerSessionId ?? 'cs_test_unanswered',
        object: 'checkout.session',
        payment_status: 'paid',
        payment_intent: `pi_test_${row.checkout.id}`,
        amount_total: row.checkout.amountMinor,
        currency: row.currency.toLowerCase(),
        metadata: { checkout_id: checkoutReference(row.checkout), order_number: String(orderNumber) },
      },
    },
  });
}

/** Delivers an event to a server, signed as the provider signs. */
export async function deliverEvent(server: WebProcess, body: string): Promise<Answer> {
  const signature = Stripe.webhooks.generateTestHeaderString({
    payload: body,
    secret: env().stripeWebhookSecrets[0] ?? '',
  });
  const response = await fetch(new URL('/api/provider-events', server.url), {
    method: 'POST',
    body,
    headers: { 'content-type': 'application/json', 'stripe-signature': signature },
  });
  return { status: response.status, body: await response.json() };
}
