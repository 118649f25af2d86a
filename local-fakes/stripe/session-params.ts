import { z } from 'zod';
import { isLoopback } from '../loopback';
import { invalid } from './fault';
import type { FormValue } from './form-body';
import { newId, nowSeconds, totalOf, type Session } from './state';

/** The provider's smallest charge, 0.50 of the larger currencies. */
const SMALLEST_TOTAL = 50;
const SHORTEST_LIFE_S = 30 * 60;
const LONGEST_LIFE_S = 24 * 60 * 60;

const wholeNumber = z
  .string()
  .regex(/^\d{1,12}$/, 'Invalid integer')
  .transform(Number);
const metadata = z.record(z.string().max(500)).default({});

const paramsSchema = z
  .object({
    mode: z.literal('payment'),
    line_items: z
      .array(
        z
          .object({
            quantity: wholeNumber.refine((quantity) => quantity > 0, 'Must be at least 1'),
            price_data: z
              .object({
                currency: z.string().regex(/^[a-z]{3}$/, 'Invalid currency'),
                unit_amount: wholeNumber,
                product_data: z.object({ name: z.string().min(1) }).strict(),
              })
              .strict(),
          })
          .strict(),
      )
      .min(1),
    success_url: z.string().url(),
    cancel_url: z.string().url().optional(),
    customer_email: z.string().email().optional(),
    client_reference_id: z.string().max(200).optional(),
    expires_at: wholeNumber.optional(),
    metadata,
    payment_intent_data: z
      .object({ metadata, description: z.string().max(1000).optional() })
      .strict()
      .default({}),
    expand: z.array(z.string()).optional(),
  })
  .strict();

function bracketed(path: (string | number)[]): string {
  return path.map((part, index) => (index === 0 ? String(part) : `[${part}]`)).join('');
}

/** A new session from the parameters of `POST /v1/checkout/sessions`, refused as the provider refuses them. */
export function sessionFromParams(params: Record<string, FormValue>): Session {
  const parsed = paramsSchema.safeParse(params);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    const path = issue?.path ?? [];
    if (issue?.code === 'unrecognized_keys') {
      const name = bracketed([...path, issue.keys[0] ?? '']);
      throw invalid(`Received unknown parameter: ${name}`, name, 'parameter_unknown');
    }
    const name = bracketed(path);
    if (issue?.code === 'invalid_type' && issue.received === 'undefined') {
      throw invalid(`Missing required param: ${name}.`, name, 'parameter_missing');
    }
    throw invalid(`${issue?.message ?? 'Invalid parameters'}: ${name}`, name);
  }
  const given = parsed.data;
  const created = nowSeconds();
  const expiresAt = given.expires_at ?? created + LONGEST_LIFE_S;
  if (expiresAt < created + SHORTEST_LIFE_S || expiresAt > created + LONGEST_LIFE_S) {
    throw invalid(
      'The `expires_at` timestamp must be at least 30 minutes and at most 24 hours from Checkout Session creation.',
      'expires_at',
    );
  }
  const currencies = new Set(given.line_items.map((line) => line.price_data.currency));
  const [currency] = currencies;
  if (currencies.size !== 1 || currency === undefined) {
    throw invalid('All line items of a Checkout Session must have the same currency.', 'line_items');
  }
  for (const url of [given.success_url, given.cancel_url]) {
    if (url !== undefined && !isLoopback(url)) {
      throw invalid('This stand-in sends buyers back to an application on this machine only.', 'success_url');
    }
  }
  const session: Session = {
    id: newId('cs_test'),
    created,
    expiresAt,
    status: 'open',
    paymentStatus: 'unpaid',
    currency,
    lines: given.line_items.map((line) => ({
      name: line.price_data.product_data.name,
      unitAmount: line.price_data.unit_amount,
      quantity: line.quantity,
    })),
    customerEmail: given.customer_email ?? null,
    clientReferenceId: given.client_reference_id ?? null,
    metadata: given.metadata,
    paymentMetadata: given.payment_intent_data.metadata,
    description: given.payment_intent_data.description ?? null,
    successUrl: given.success_url,
    cancelUrl: given.cancel_url ?? null,
    paymentIntent: null,
    declines: 0,
  };
  if (totalOf(session) < SMALLEST_TOTAL) {
    throw invalid(
      `The Checkout Session's total amount must be at least ${SMALLEST_TOTAL} minor units.`,
      'line_items',
      'amount_too_small',
    );
  }
  return session;
}
