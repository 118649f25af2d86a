import type Stripe from 'stripe';
import { env } from '~/server/env';
import { paymentsClient } from './client';

let shared: Stripe | undefined;

/** The process's own client of the payment provider, made from the settings at its first use. */
export function provider(): Stripe {
  const { stripeSecretKey, stripeApiUrl } = env();
  shared ??= paymentsClient({ secretKey: stripeSecretKey, apiUrl: stripeApiUrl });
  return shared;
}
