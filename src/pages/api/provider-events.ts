import { z } from 'zod';
import { door } from '~/server/door';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import { takeProviderEvent } from '~/server/payments/take-provider-event';
import { verifyProviderEvent } from '~/server/payments/verify-event';
import { anyone } from '~/server/rules';

export const POST = door({
  rule: anyone,
  summary: 'The payment provider’s webhook; signed by it',
  raw: true,
  maxBytes: 256 * 1024,
  output: z.object({ state: z.enum(['kept', 'applied', 'unknown']) }),
  run: async ({ rawBody, api, ctx }) => {
    const verified = verifyProviderEvent(
      rawBody,
      api.request.headers.get('stripe-signature'),
      env().stripeWebhookSecrets,
      Math.floor(ctx.now.getTime() / 1000),
    );
    if (!verified.ok) throw new DomainError('invalid', 'The signature of this event does not hold.');
    return takeProviderEvent(verified.event, rawBody, { ...ctx, actor: { kind: 'provider' } });
  },
});
