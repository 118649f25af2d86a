import { eq, sql } from 'drizzle-orm';
import type { SQL } from 'drizzle-orm';
import { standingOf } from '~/domain/certificates/standing';
import { fullNumber } from '~/domain/certificates/statement';
import type { StatementSignature } from '~/domain/certificates/statement';
import { publicStatementSchema } from '~/schemas/certificate-statement';
import type { Reader } from '~/server/db/client';
import { certificateBuyers, certificates, files, signingKeys, testRuns, units } from '~/server/db/schema';

/** A certificate as kept: the signed text, its signature, its key, its PDF. */
export type SignedCertificate = NonNullable<Awaited<ReturnType<typeof readSignedCertificate>>>;

/** By its code, by number and letter together, or by id. */
type Wanted = { code: string } | { fullNumber: string } | { id: number };

function condition(wanted: Wanted): SQL | undefined {
  if ('code' in wanted) return eq(certificates.code, wanted.code);
  if ('id' in wanted) return eq(certificates.id, wanted.id);
  return eq(sql`concat(${certificates.number}, ${certificates.letter})`, wanted.fullNumber);
}

/**
 * A certificate with everything by which it can be checked, the amendment that took its place, and the unit's
 * certificate that counts where it is another one.
 */
export async function readSignedCertificate(reader: Reader, wanted: Wanted) {
  const [row] = await reader
    .select({
      id: certificates.id,
      number: certificates.number,
      letter: certificates.letter,
      code: certificates.code,
      unitId: certificates.unitId,
      serial: units.serial,
      runNo: testRuns.runNo,
      contactId: certificates.contactId,
      issuedAt: certificates.issuedAt,
      signedText: certificates.statement,
      signatureValue: certificates.signature,
      keyId: signingKeys.keyId,
      publicKey: signingKeys.publicKey,
      fileId: certificates.fileId,
      pdfSha256: files.sha256,
      buyerCallSign: certificateBuyers.callSign,
      buyerOrderNumber: certificateBuyers.orderNumber,
      buyerSalt: certificateBuyers.salt,
    })
    .from(certificates)
    .innerJoin(units, eq(units.id, certificates.unitId))
    .innerJoin(testRuns, eq(testRuns.id, certificates.testRunId))
    .innerJoin(signingKeys, eq(signingKeys.id, certificates.signingKeyId))
    .leftJoin(files, eq(files.id, certificates.fileId))
    .leftJoin(certificateBuyers, eq(certificateBuyers.certificateId, certificates.id))
    .where(condition(wanted));
  if (row === undefined) return null;
  const { signatureValue, keyId, publicKey, buyerSalt, buyerCallSign, buyerOrderNumber, ...rest } = row;
  const signature: StatementSignature = { algorithm: 'Ed25519', keyId, publicKey, value: signatureValue };
  const issued = await reader
    .select({
      id: certificates.id,
      number: certificates.number,
      letter: certificates.letter,
      testRunId: certificates.testRunId,
      replacesId: certificates.replacesId,
      code: certificates.code,
      reason: certificates.reason,
    })
    .from(certificates)
    .where(eq(certificates.unitId, row.unitId));
  const { successor, newest, isTestedAgain } = standingOf(row.id, issued);
  return {
    ...rest,
    signature,
    statement: publicStatementSchema.parse(JSON.parse(row.signedText)),
    buyer:
      buyerSalt === null ? null : { callSign: buyerCallSign, orderNumber: buyerOrderNumber, salt: buyerSalt },
    replacedBy: successor === null ? null : fullNumber(successor),
    replacedByCode: successor?.code ?? null,
    replacedWhy: successor?.reason ?? null,
    newerNumber: newest === null ? null : fullNumber(newest),
    isTestedAgain,
  };
}
