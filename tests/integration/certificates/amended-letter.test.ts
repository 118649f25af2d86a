import { eq } from 'drizzle-orm';
import { expect, it } from 'vitest';
import { signedText } from '~/domain/certificates/canonical';
import { writeCertificateIssued } from '~/server/documents/certificate-letter';
import { certificateBuyers, certificates, outbox, signingKeys, testRuns } from '~/server/db/schema';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { certificateAmendmentSchema } from '~/schemas/certificate-amendment';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { amendCertificate } from '~/server/services/certificates/amend-certificate';
import { attachCertificatePdf } from '~/server/services/certificates/attach-certificate-pdf';
import type { Db } from '~/server/db/client';
import { seedDispatch, seedReadyOrder } from '../../factories/dispatch';
import { buildStatement } from '../../pdf/build-statement';
import { signatureOf } from '../../pdf/render-statement';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

/** A certificate for a buyer, with a whole statement that is signed. */
async function seedBuyersCertificate(db: Db) {
  const seed = await seedDispatch(db);
  const order = await seedReadyOrder(db, seed);
  const [unit] = order.units;
  const [run] = await db
    .select()
    .from(testRuns)
    .where(eq(testRuns.unitId, unit?.id ?? 0));
  const statement = buildStatement();
  const { keyId, publicKey, value } = signatureOf(statement);
  const [key] = await db
    .insert(signingKeys)
    .values({ keyId, publicKey, sealedPrivateKey: 'gone', createdAt: seed.owner.now })
    .$returningId();
  const [issued] = await db
    .insert(certificates)
    .values({
      ...{ number: statement.number, unitId: unit?.id ?? 0, testRunId: run?.id ?? 0 },
      ...{ contactId: order.contactId, destinationCountry: order.destination, code: statement.code },
      ...{ statement: signedText(statement), signature: value, signingKeyId: key?.id ?? 0 },
      ...{ issuedAt: seed.owner.now, issuedBy: seed.tester },
    })
    .$returningId();
  if (statement.buyer !== null) {
    await db.insert(certificateBuyers).values({ certificateId: issued?.id ?? 0, ...statement.buyer });
  }
  await addSigningKey(seed.owner);
  return { seed, code: statement.code, number: statement.number };
}

it('an amendment is mailed to the buyer, with the words of a correction and its own PDF', async () => {
  const { seed, code, number } = await seedBuyersCertificate(database.db);
  const before = await readSignedCertificate(database.db, { code });
  const { unit, conditions } = before?.statement ?? buildStatement();
  const input = certificateAmendmentSchema.parse({
    ...{ reason: 'The call sign was mistyped.', callSign: 'q0abd', place: 'at the works' },
    ...{ options: unit.options, bomRevision: unit.bomRevision, firmware: unit.firmware },
    ...{ ambient: conditions.ambient },
  });
  const amended = await amendCertificate({ code, ...input }, seed.owner);
  const { certificateId } = amended;
  const kept = await readSignedCertificate(database.db, { id: certificateId });
  expect(kept?.buyer).toMatchObject({ callSign: 'Q0ABD', orderNumber: '1093' });
  expect(kept?.buyer?.salt).not.toBe(before?.buyer?.salt);
  expect(kept?.statement.buyerDigest).not.toBe(before?.statement.buyerDigest);
  expect(kept?.statement.replaces?.changes).toEqual(['The buyer’s call sign.']);
  expect(kept?.signedText).not.toMatch(/Q0AB[CD]/u);

  await attachCertificatePdf({ certificateId, bytes: Buffer.from('%PDF-1.7 invented') }, seed.owner);
  const [row] = await database.db
    .select()
    .from(outbox)
    .where(eq(outbox.key, `certificate-issued:${certificateId}`));
  const letter = await writeCertificateIssued(database.db, row?.payload ?? {});
  expect(letter?.subject).toContain(`Corrected test certificate ${number}A`);
  expect(letter?.text).toContain(`takes the place of ${number}.`);
  expect(letter?.text).toContain('The call sign was mistyped.');
  expect(letter?.attachments?.map(({ filename }) => filename)).toEqual([`${number}A.pdf`]);
});
