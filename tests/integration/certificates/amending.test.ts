import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { certificates, ledgerEntries, outbox, units } from '~/server/db/schema';
import { readGateFacts } from '~/server/queries/dispatch/read-gate-facts';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { verifyCertificate } from '~/server/queries/certificates/verify-certificate';
import { certificateAmendmentSchema } from '~/schemas/certificate-amendment';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { amendCertificate } from '~/server/services/certificates/amend-certificate';
import { callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { issueFor } from '../../factories/certificates';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;

beforeEach(async () => {
  bench = await seedBench(database.db);
  await addSigningKey(callAs(database.db, bench.owner));
});

/** As the form sends it: everything that may be corrected, with what was changed. */
async function amend(code: string, change: Record<string, string>) {
  const certificate = await readSignedCertificate(database.db, { code });
  if (certificate === null) throw new Error('There is no such certificate.');
  const { statement } = certificate;
  const input = certificateAmendmentSchema.parse({
    ...{ reason: 'It was misread.', place: 'at the works', options: statement.unit.options },
    ...{ bomRevision: statement.unit.bomRevision, firmware: statement.unit.firmware },
    ...{ alignment: statement.unit.alignment.join('\n'), ambient: statement.conditions.ambient },
    ...{ deviations: statement.deviations.join('\n') },
    ...change,
  });
  return amendCertificate({ code, ...input }, bench.ctx);
}

describe('amending a certificate', () => {
  // ISO/IEC 17025:2017, 7.8.8.2 and 7.8.8.3.
  it('twice: each names its immediate predecessor, and the first still verifies', async () => {
    const { code, number } = await issueFor(bench);
    const first = await amend(code, { firmware: '1.5' });
    const second = await amend(first.code, { bomRevision: 'E', reason: 'The kit was of revision E.' });
    expect([first.number, second.number]).toEqual([`${number}A`, `${number}B`]);
    const seen = await Promise.all(
      [code, first.code, second.code].map((each) => verifyCertificate(database.db, each)),
    );
    expect(seen).toMatchObject([
      {
        signatureHolds: true,
        certificate: { replacedBy: `${number}A`, replacedWhy: 'It was misread.', newerNumber: `${number}B` },
      },
      {
        signatureHolds: true,
        certificate: {
          statement: { replaces: { number, reason: 'It was misread.' }, unit: { firmware: '1.5' } },
          replacedBy: `${number}B`,
        },
      },
      {
        signatureHolds: true,
        certificate: {
          statement: {
            replaces: { number: `${number}A`, reason: 'The kit was of revision E.' },
            unit: { firmware: '1.5', bomRevision: 'E' },
          },
          replacedBy: null,
          newerNumber: null,
        },
      },
    ]);
  });

  it('keeps the readings and the old certificate as they are, and asks for the new PDF', async () => {
    const { code, certificateId } = await issueFor(bench);
    const before = await readSignedCertificate(database.db, { code });
    const amended = await amend(code, { deviations: 'Keyed by hand.' });
    const after = await readSignedCertificate(database.db, { code });
    const added = await readSignedCertificate(database.db, { code: amended.code });
    expect(after?.signedText).toBe(before?.signedText);
    expect(added?.statement.points).toEqual(before?.statement.points);
    expect(added?.statement.deviations).toEqual(['Keyed by hand.']);
    const rows = await database.db.select().from(outbox).where(eq(outbox.kind, 'certificate_pdf'));
    expect(rows.map(({ payload }) => payload)).toEqual([
      { certificateId },
      { certificateId: amended.certificateId },
    ]);
    const entries = await database.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.action, 'certificate.amend'));
    expect(entries).toHaveLength(1);
  });

  it('is the one that goes with the parcel', async () => {
    const { code, unitId } = await issueFor(bench);
    const amended = await amend(code, { firmware: '1.5' });
    const [gate] = await readGateFacts(database.db, [unitId]);
    expect(gate?.certificate).toMatchObject({ id: amended.certificateId, number: amended.number });
  });

  it('refuses one that was replaced already, also when two ask at once', async () => {
    const { code } = await issueFor(bench);
    const answers = await Promise.allSettled([1, 2].map((n) => amend(code, { firmware: `1.${n}` })));
    expect(answers.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    await expect(amend(code, { firmware: '2.0' })).rejects.toThrow('amend that one');
    expect(await database.db.select().from(certificates)).toHaveLength(2);
  });

  it('refuses where nothing differs, or no reason is given', async () => {
    const { code } = await issueFor(bench);
    await expect(amend(code, {})).rejects.toMatchObject({ code: 'invalid' });
    await expect(amend(code, { firmware: '1.5', reason: ' ' })).rejects.toThrow('Say why');
    await expect(amend('0'.repeat(12), { firmware: '1.5' })).rejects.toThrow('no such');
  });

  it('does not let an amendment of an older test pass for the newest', async () => {
    const old = await issueFor(bench);
    await database.db.update(units).set({ stage: 'final_test' }).where(eq(units.id, old.unitId));
    const again = await issueFor(bench);
    const amended = await amend(old.code, { firmware: '1.5' });
    expect(await readSignedCertificate(database.db, { code: again.code })).toMatchObject({
      ...{ newerNumber: null, replacedBy: null },
    });
    expect(await readSignedCertificate(database.db, { code: amended.code })).toMatchObject({
      ...{ newerNumber: again.number, isTestedAgain: true },
    });
    const [gate] = await readGateFacts(database.db, [old.unitId]);
    expect(gate?.certificate?.number).toBe(again.number);
  });
});
