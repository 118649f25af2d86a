import { count, desc, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { certificates, signingKeys } from '~/server/db/schema';
import { publicKeyPem } from '~/server/keys/ed25519';

/** The works' public keys, the present one first, with how many certificates each has signed. */
export async function listPublicKeys(reader: Reader) {
  const rows = await reader
    .select({
      keyId: signingKeys.keyId,
      publicKey: signingKeys.publicKey,
      createdAt: signingKeys.createdAt,
      retiredAt: signingKeys.retiredAt,
      signed: count(certificates.id),
    })
    .from(signingKeys)
    .leftJoin(certificates, eq(certificates.signingKeyId, signingKeys.id))
    .groupBy(signingKeys.id)
    .orderBy(desc(signingKeys.id));
  return rows.map((row) => ({ ...row, pem: publicKeyPem(row.publicKey) }));
}
