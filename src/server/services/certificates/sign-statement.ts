import { isNull } from 'drizzle-orm';
import { signedText } from '~/domain/certificates/canonical';
import type { CertificateStatement } from '~/domain/certificates/statement';
import { signingKeys } from '~/server/db/schema';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import { signText } from '~/server/keys/ed25519';
import { openPrivateKey } from '~/server/keys/seal';
import type { WriteContext } from '~/server/write';
import { addSigningKey } from './add-signing-key';

/**
 * Signs a statement with the works' present key; a works that never had one gets its first.
 *
 * @returns the columns of a certificate that follow from it
 * @throws DomainError `conflict` where there is no key, or the works' secret does not open it
 */
export async function signStatement(
  w: WriteContext,
  statement: CertificateStatement,
): Promise<{ statement: string; signature: string; signingKeyId: number }> {
  const key = (await presentKey(w)) ?? (await firstKey(w));
  if (key === null) {
    throw new DomainError(
      'conflict',
      'The works has no signing key: its owner makes one under Office, Signing keys.',
    );
  }
  const text = signedText(statement);
  return { statement: text, signature: signText(opened(key), text), signingKeyId: key.id };
}

async function presentKey(w: WriteContext) {
  const [key] = await w.tx.select().from(signingKeys).where(isNull(signingKeys.retiredAt)).limit(1);
  return key ?? null;
}

/** Where every key was retired, somebody meant it so. */
async function firstKey(w: WriteContext) {
  const [earlier] = await w.tx.select({ id: signingKeys.id }).from(signingKeys).limit(1).for('update');
  if (earlier !== undefined) return null;
  await addSigningKey(w);
  return presentKey(w);
}

function opened({ keyId, sealedPrivateKey }: { keyId: string; sealedPrivateKey: string }): string {
  try {
    return openPrivateKey(sealedPrivateKey, env().secret);
  } catch {
    throw new DomainError(
      'conflict',
      `The works’ secret does not open the signing key ${keyId}: start with the secret that it was made under, ` +
        'or the owner makes a new key under Office, Signing keys.',
    );
  }
}
