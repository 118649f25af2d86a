import { paths } from '~/lib/paths';
import { env } from '~/server/env';
import { log } from '~/server/log';
import { prepareCheckout } from '~/server/services/orders/prepare-checkout';
import { storeCheckoutSession } from '~/server/services/orders/store-checkout-session';
import type { CallContext } from '~/server/write';
import { openProviderCheckout } from './checkout-session';
import { provider } from './shared-client';

/** Where the buyer of a checkout goes on. */
export interface StartedCheckout {
  orderNumber: number;
  orderUrl: string;
  payUrl: string;
  /** The provider's page; null where the provider did not answer: it is asked again by a job. */
  providerUrl: string | null;
}

/**
 * Opens the provider's page for a checkout that is written already, and keeps the provider's answer. The
 * checkout's own reference is the idempotency key, so asking twice opens one page.
 *
 * @throws DomainError `not_found`
 */
export async function startCheckout(checkoutId: number, ctx: CallContext): Promise<StartedCheckout> {
  const checkout = await prepareCheckout(checkoutId, ctx);
  const { baseUrl } = env();
  const orderUrl = new URL(paths.orderByLink(checkout.token), baseUrl).href;
  const started = {
    orderNumber: checkout.orderNumber,
    orderUrl,
    payUrl: new URL(paths.payByLink(checkout.token), baseUrl).href,
  };
  if (checkout.url !== null) return { ...started, providerUrl: checkout.url };
  try {
    const { sessionId, url } = await openProviderCheckout(provider(), {
      checkoutId: checkout.reference,
      orderNumber: String(checkout.orderNumber),
      currency: checkout.currency,
      lines: checkout.lines,
      email: checkout.email,
      successUrl: `${orderUrl}?returned=1`,
      cancelUrl: orderUrl,
      expiresAt: checkout.expiresAt,
    });
    await storeCheckoutSession({ checkoutId, sessionId, url }, ctx);
    return { ...started, providerUrl: url };
  } catch (error) {
    // The order stands; its page offers to try again, and a job does so too.
    log.warn({ err: error, checkoutId }, 'the payment provider did not open a checkout');
    return { ...started, providerUrl: null };
  }
}
