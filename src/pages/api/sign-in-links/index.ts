import { z } from 'zod';
import { askLinkSchema } from '~/schemas/people';
import { isTooMany } from '~/server/auth/throttle';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { anyone } from '~/server/rules';
import { askSignInLink } from '~/server/services/people/ask-sign-in-link';

export const POST = door({
  rule: anyone,
  summary: 'Ask for a sign-in link by mail',
  input: askLinkSchema,
  output: z.object({ asked: z.literal(true) }),
  said: () => 'If this address has an account here, a link is on its way to it.',
  run: ({ input, ctx }) => {
    if (isTooMany(`link:${input.email}`, ctx.now)) {
      throw new DomainError('too_many', 'Links were asked for too often. Wait a quarter of an hour.');
    }
    return askSignInLink(input, ctx);
  },
});
