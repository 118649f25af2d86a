import Stripe from 'stripe';
import { z } from 'zod';

/** The envelope of an event; what stands in `data.object` depends on `type` and is read later. */
const providerEventSchema = z.object({
  id: z.string().min(1).max(255),
  object: z.literal('event'),
  type: z.string().min(1).max(255),
  /** Unix seconds by the provider's clock. Events are not in this order: never sort by it. */
  created: z.number().int(),
  livemode: z.boolean(),
  data: z.object({ object: z.record(z.unknown()) }),
});

/** Reads the envelope of an event that was verified when it came; null where it is none. */
export function parseKeptEvent(body: string): ProviderEvent | null {
  try {
    const parsed = providerEventSchema.safeParse(JSON.parse(body));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

export type ProviderEvent = z.infer<typeof providerEventSchema>;

type RefusalReason =
  'no_signature' | 'malformed_signature' | 'too_old' | 'in_the_future' | 'wrong_signature' | 'not_an_event';

type Verification = { ok: true; event: ProviderEvent } | { ok: false; reason: RefusalReason };

const MAX_AGE_S = 300;
const MAX_AHEAD_S = 60;

/** The signing time of a `Stripe-Signature` header, or null where it has none, several, or no `v1`. */
function signingTime(header: string): number | null {
  const items = header.split(',').map((item) => item.trim());
  const times = items.filter((item) => item.startsWith('t='));
  const time = times[0]?.slice(2);
  if (times.length !== 1 || time === undefined || !/^\d{1,12}$/.test(time)) return null;
  return items.some((item) => item.startsWith('v1=')) ? Number(time) : null;
}

/**
 * Checks that the provider sent `rawBody` just now, and gives its envelope.
 *
 * @param rawBody the request's body exactly as it came; parsed and written again it no longer matches.
 * @param secrets all signing secrets in force: two while one is being replaced by the next.
 * @param nowSeconds Unix seconds. Older than 300 s is refused as the provider's own libraries do; more than
 * a minute ahead too, which they let pass: a captured future signature could otherwise be kept for later.
 */
export function verifyProviderEvent(
  rawBody: string,
  signatureHeader: string | null,
  secrets: readonly string[],
  nowSeconds: number,
): Verification {
  if (!signatureHeader) return { ok: false, reason: 'no_signature' };
  const signedAt = signingTime(signatureHeader);
  if (signedAt === null) return { ok: false, reason: 'malformed_signature' };
  if (nowSeconds - signedAt > MAX_AGE_S) return { ok: false, reason: 'too_old' };
  if (signedAt - nowSeconds > MAX_AHEAD_S) return { ok: false, reason: 'in_the_future' };

  for (const secret of secrets) {
    let body: unknown;
    try {
      body = Stripe.webhooks.constructEvent(
        rawBody,
        signatureHeader,
        secret,
        MAX_AGE_S,
        undefined,
        nowSeconds * 1000,
      );
    } catch (error) {
      // The body is parsed only after the signature held; anything else is a signature that did not.
      if (error instanceof SyntaxError) return { ok: false, reason: 'not_an_event' };
      continue;
    }
    const parsed = providerEventSchema.safeParse(body);
    return parsed.success ? { ok: true, event: parsed.data } : { ok: false, reason: 'not_an_event' };
  }
  return { ok: false, reason: 'wrong_signature' };
}
