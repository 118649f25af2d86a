import { isNull } from 'drizzle-orm';
import { env } from '~/server/env';
import { signingKeys, works } from '~/server/db/schema';
import { generateKeyPair, keyId } from '~/server/keys/ed25519';
import { sealPrivateKey } from '~/server/keys/seal';
import type { Ctx } from '~/server/write';
import { actingUserId, write } from '~/server/write';

/** Makes a new signing key the works' own; earlier ones retire and keep verifying what they signed. */
export async function addSigningKey(ctx: Ctx): Promise<{ signingKeyId: number; keyId: string }> {
  return write(ctx, async (w) => {
    const { privatePem, publicKey } = generateKeyPair();
    const name = keyId(publicKey);
    // Two owners at once make two keys, one after the other; without the lock both would be present.
    await w.tx.select({ id: works.id }).from(works).for('update');
    await w.tx.update(signingKeys).set({ retiredAt: w.now }).where(isNull(signingKeys.retiredAt));
    const [{ insertId: signingKeyId }] = await w.tx.insert(signingKeys).values({
      keyId: name,
      publicKey,
      sealedPrivateKey: sealPrivateKey(privatePem, env().secret),
      createdAt: w.now,
      createdBy: actingUserId(w),
    });
    await w.record({
      action: 'key.add',
      subjects: [{ type: 'key', id: signingKeyId }],
      details: { keyId: name },
    });
    return { signingKeyId, keyId: name };
  });
}
