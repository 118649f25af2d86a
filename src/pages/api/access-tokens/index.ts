import { z } from 'zod';
import { newAccessTokenSchema } from '~/schemas/access-tokens';
import { newAccessToken } from '~/server/auth/access-tokens';
import { tokenHash } from '~/server/auth/tokens';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { everyStaff } from '~/server/rules';
import { createAccessToken } from '~/server/services/people/create-access-token';

export const POST = door({
  rule: everyStaff,
  summary: 'Make an access token for a script of your own; it is shown this once',
  input: newAccessTokenSchema,
  output: z.object({ tokenId: z.number().int(), token: z.string() }),
  said: ({ token }) => `The token is ${token} — copy it now, it is not shown again.`,
  run: async ({ input, ctx }) => {
    const token = newAccessToken();
    const made = await createAccessToken({ ...input, tokenHash: tokenHash(token) }, ctx);
    // The answer to a repeated request names the token of the first, which nobody can show again.
    if (made.tokenHash !== tokenHash(token)) {
      throw new DomainError(
        'conflict',
        'This token was made and shown already. If it is lost, revoke it and make another.',
      );
    }
    return { tokenId: made.tokenId, token };
  },
});
