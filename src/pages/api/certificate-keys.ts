import { z } from 'zod';
import { door } from '~/server/door';
import { listPublicKeys } from '~/server/queries/certificates/read-signed-certificate';
import { anyone } from '~/server/rules';

export const GET = door({
  rule: anyone,
  summary: 'The works’ public keys, the present one first',
  output: z.array(
    z.object({
      keyId: z.string(),
      algorithm: z.literal('Ed25519'),
      publicKey: z.string().describe('Base64 of the 32 raw bytes'),
      createdAt: z.string(),
      retiredAt: z.string().nullable(),
    }),
  ),
  run: async ({ ctx }) => {
    const keys = await listPublicKeys(ctx.db);
    return keys.map(({ keyId, publicKey, createdAt, retiredAt }) => ({
      keyId,
      algorithm: 'Ed25519' as const,
      publicKey,
      createdAt: createdAt.toISOString(),
      retiredAt: retiredAt?.toISOString() ?? null,
    }));
  },
});
