import type Stripe from 'stripe';

/** One order line as the provider shall show it: its total after rounding, already in minor units. */
interface ProviderLine {
  name: string;
  amountMinor: number;
}

interface ProviderCheckout {
  /** Unique for ever, at most 255 characters; it is also the idempotency key. */
  checkoutId: string;
  orderNumber: string;
  /** ISO 4217, upper case. */
  currency: string;
  lines: readonly ProviderLine[];
  email: string;
  /** May carry `{CHECKOUT_SESSION_ID}`, which the provider fills in. */
  successUrl: string;
  cancelUrl: string;
  expiresAt: Date;
}

/** The provider wants 30 minutes at least between its own clock and the end; one more covers clock and way. */
const SESSION_LIFE_MS = 31 * 60_000;

/**
 * When the provider's session for a checkout begun at `startedAt` ends. The same for every repetition, as
 * the idempotency key demands equal parameters. A hold on a place must last a little longer than this.
 */
export function providerExpiry(startedAt: Date): Date {
  return new Date(startedAt.getTime() + SESSION_LIFE_MS);
}

/**
 * Opens the provider's checkout page for a checkout that is already written.
 *
 * Each order line goes out as quantity 1 at its rounded total, so that the provider's sum is ours to the
 * minor unit. Repeating the call with the same checkout gives the same session.
 *
 * @throws Stripe errors as the SDK throws them; the caller decides whether to try again.
 */
export async function openProviderCheckout(
  stripe: Stripe,
  checkout: ProviderCheckout,
): Promise<{ sessionId: string; url: string }> {
  const metadata = { checkout_id: checkout.checkoutId, order_number: checkout.orderNumber };
  const currency = checkout.currency.toLowerCase();
  const session = await stripe.checkout.sessions.create(
    {
      mode: 'payment',
      client_reference_id: checkout.checkoutId,
      customer_email: checkout.email,
      line_items: checkout.lines.map((line) => ({
        quantity: 1,
        price_data: { currency, unit_amount: line.amountMinor, product_data: { name: line.name } },
      })),
      metadata,
      payment_intent_data: { metadata, description: `Order ${checkout.orderNumber}` },
      success_url: checkout.successUrl,
      cancel_url: checkout.cancelUrl,
      expires_at: Math.floor(checkout.expiresAt.getTime() / 1000),
    },
    { idempotencyKey: checkout.checkoutId },
  );
  if (!session.url) {
    throw new Error(`The provider opened session ${session.id} without an address to send the buyer to`);
  }
  return { sessionId: session.id, url: session.url };
}
