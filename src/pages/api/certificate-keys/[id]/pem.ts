import { z } from 'zod';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { listPublicKeys } from '~/server/queries/certificates/list-public-keys';
import { anyone } from '~/server/rules';

export const GET = door({
  rule: anyone,
  summary: 'One public key of the works as PEM, by its name',
  params: z.object({ id: z.string().max(64) }),
  output: 'file',
  run: async ({ params, ctx }) => {
    const key = (await listPublicKeys(ctx.db)).find(({ keyId }) => keyId === params.id);
    if (key === undefined) throw new DomainError('not_found', 'The works has no key of this name.');
    return {
      bytes: new TextEncoder().encode(key.pem),
      mediaType: 'application/x-pem-file',
      fileName: `${key.keyId}.pem`,
    };
  },
});
