import { randomBytes } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import { amendStatement, correctableFacts } from '~/domain/certificates/amend';
import { CODE_RANDOM_BYTES, codeFromRandom } from '~/domain/certificates/code';
import { fullNumber } from '~/domain/certificates/statement';
import type { CertificateStatement } from '~/domain/certificates/statement';
import { dayOf } from '~/lib/dates';
import { paths } from '~/lib/paths';
import type { certificateAmendmentSchema } from '~/schemas/certificate-amendment';
import { certificateBuyers, certificates, userProfiles } from '~/server/db/schema';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import { digestBuyer } from '~/server/keys/ed25519';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { readWorksData } from '~/server/queries/office/read-works-data';
import type { Ctx } from '~/server/write';
import { actingPerson, write } from '~/server/write';
import { signStatement } from './sign-statement';

type Input = { code: string } & z.output<typeof certificateAmendmentSchema>;

/**
 * Issues the amendment of a certificate whose facts around the readings were wrong: the same number with the next
 * letter, which names the one it replaces and why. The readings and what they came to are those of the closed run.
 *
 * @throws DomainError `not_found`; `conflict` where it was replaced already; `invalid` where nothing differs
 */
export async function amendCertificate(
  { code, reason, worksAsNow, ...facts }: Input,
  ctx: Ctx,
): Promise<{ certificateId: number; number: string; code: string }> {
  return write(ctx, async (w) => {
    const issuedBy = actingPerson(w);
    const [row] = await w.tx.select().from(certificates).where(eq(certificates.code, code)).for('update');
    const replaced = row === undefined ? null : await readSignedCertificate(w.tx, { id: row.id });
    if (row === undefined || replaced === null) {
      throw new DomainError('not_found', 'There is no such certificate.');
    }
    if (replaced.replacedBy !== null) {
      throw new DomainError(
        'conflict',
        `${fullNumber(row)} was replaced by ${replaced.replacedBy}: amend that one.`,
      );
    }
    const [worksData, issuer] = await Promise.all([
      readWorksData(w.tx),
      w.tx.select({ name: userProfiles.name }).from(userProfiles).where(eq(userProfiles.userId, issuedBy)),
    ]);
    if (worksData === null) throw new Error('A certificate belongs to a works.');
    const before: CertificateStatement = { ...replaced.statement, buyer: replaced.buyer };
    const newCode = codeFromRandom(randomBytes(CODE_RANDOM_BYTES));
    const works = worksAsNow
      ? { name: worksData.name, addressLines: worksData.addressLines }
      : correctableFacts(before).works;
    const amended = amendStatement(
      before,
      { ...facts, works, callSign: before.buyer === null ? null : facts.callSign },
      {
        reason,
        code: newCode,
        checkUrl: new URL(paths.certificateByCode(newCode), env().baseUrl).href,
        issuedOn: dayOf(w.now, worksData.timeZone),
        issuedBy: issuer[0]?.name ?? '',
        salt: randomBytes(16).toString('hex'),
        digestBuyer,
      },
    );
    if (!amended.ok) throw new DomainError('invalid', amended.reason);
    const { statement } = amended;
    const [{ insertId: certificateId }] = await w.tx.insert(certificates).values({
      number: row.number,
      letter: statement.letter,
      unitId: row.unitId,
      testRunId: row.testRunId,
      contactId: row.contactId,
      destinationCountry: row.destinationCountry,
      code: newCode,
      ...(await signStatement(w, statement)),
      replacesId: row.id,
      reason,
      issuedAt: w.now,
      issuedBy,
    });
    if (statement.buyer !== null) {
      await w.tx.insert(certificateBuyers).values({ certificateId, ...statement.buyer });
    }
    await w.record({
      action: 'certificate.amend',
      subjects: [
        { type: 'certificate', id: certificateId },
        { type: 'certificate', id: row.id },
        { type: 'unit', id: row.unitId },
      ],
      details: { number: fullNumber(statement), replaces: fullNumber(row) },
    });
    await w.post({
      kind: 'certificate_pdf',
      key: `certificate-pdf:${certificateId}`,
      payload: { certificateId },
    });
    return { certificateId, number: fullNumber(statement), code: newCode };
  });
}
