import { z } from 'zod';
import { door } from '~/server/door';
import { everyStaff } from '~/server/rules';
import { revokeAccessToken } from '~/server/services/people/revoke-access-token';

export const POST = door({
  rule: everyStaff,
  summary: 'Revoke an access token of your own',
  params: z.object({ id: z.coerce.number().int().positive() }),
  output: z.object({ tokenId: z.number().int(), name: z.string() }),
  said: ({ name }) => `“${name}” is revoked; scripts that bear it are refused.`,
  run: ({ params, ctx }) => revokeAccessToken({ tokenId: params.id }, ctx),
});
