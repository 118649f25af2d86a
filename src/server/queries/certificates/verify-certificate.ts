import { parseCode } from '~/domain/certificates/code';
import type { Reader } from '~/server/db/client';
import { verifyText } from '~/server/keys/ed25519';
import { readSignedCertificate } from './read-signed-certificate';
import type { SignedCertificate } from './read-signed-certificate';

type Verified =
  { ok: true; certificate: SignedCertificate; signatureHolds: boolean } | { ok: false; reason: string };

/** Looks a certificate up by its code, as typed or scanned, and checks its signature over the text as kept. */
export async function verifyCertificate(reader: Reader, typed: string): Promise<Verified> {
  const parsed = parseCode(typed);
  if (!parsed.ok) return parsed;
  const certificate = await readSignedCertificate(reader, { code: parsed.code });
  if (certificate === null) return { ok: false, reason: 'No certificate of ours bears this code.' };
  const { signature, signedText } = certificate;
  return {
    ok: true,
    certificate,
    signatureHolds: verifyText(signature.publicKey, signedText, signature.value),
  };
}
