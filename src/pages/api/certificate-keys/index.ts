import { z } from 'zod';
import { door } from '~/server/door';
import { listPublicKeys } from '~/server/queries/certificates/list-public-keys';
import { anyone, staff } from '~/server/rules';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';

export const GET = door({
  rule: anyone,
  summary: 'The works’ public keys, the present one first, each with the time in which it signed',
  output: z.array(
    z.object({
      keyId: z.string(),
      algorithm: z.literal('Ed25519'),
      publicKey: z.string().describe('Base64 of the 32 raw bytes'),
      publicKeyPem: z.string().describe('The same as SubjectPublicKeyInfo in PEM, as openssl reads it'),
      createdAt: z.string(),
      retiredAt: z.string().nullable().describe('From when on it signs nothing more; it keeps verifying'),
    }),
  ),
  run: async ({ ctx }) => {
    const keys = await listPublicKeys(ctx.db);
    return keys.map(({ keyId, publicKey, pem, createdAt, retiredAt }) => ({
      keyId,
      algorithm: 'Ed25519' as const,
      publicKey,
      publicKeyPem: pem,
      createdAt: createdAt.toISOString(),
      retiredAt: retiredAt?.toISOString() ?? null,
    }));
  },
});

export const POST = door({
  rule: staff(),
  summary: 'Make a new signing key; the present one retires and keeps verifying what it signed',
  output: z.object({ signingKeyId: z.number().int(), keyId: z.string() }),
  said: ({ keyId }) => `The new key ${keyId} signs from now on.`,
  run: ({ ctx }) => addSigningKey(ctx),
});
