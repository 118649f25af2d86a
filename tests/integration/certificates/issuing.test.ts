import { createPublicKey, verify } from 'node:crypto';
import { execFile } from 'node:child_process';
import { mkdtemp, readFile as readDisk, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { eq } from 'drizzle-orm';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import { makeCertificatePdf, stopCertificateThread } from '~/server/documents/certificate-pdf';
import { certificates, outbox, runPoints, signingKeys, testRuns } from '~/server/db/schema';
import { publicKeyPem } from '~/server/keys/ed25519';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { verifyCertificate } from '~/server/queries/certificates/verify-certificate';
import { readFile } from '~/server/queries/files/read-file';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { attachCertificatePdf } from '~/server/services/certificates/attach-certificate-pdf';
import { issueCertificate } from '~/server/services/certificates/issue-certificate';
import { callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { fillRun, issueFor } from '../../factories/certificates';
import { testDatabase } from '../../setup/database';

const run = promisify(execFile);
const database = testDatabase();
let bench: SeededBench;

beforeEach(async () => {
  bench = await seedBench(database.db);
  await addSigningKey(callAs(database.db, bench.owner));
});

afterAll(stopCertificateThread);

const openAndFill = (change: Parameters<typeof fillRun>[1] = {}) => fillRun(bench, change);
const issue = () => issueFor(bench);

describe('issuing a certificate', () => {
  it('signs the statement with the works’ key, to be checked without this program', async () => {
    const { code } = await issue();
    const [row] = await database.db.select().from(certificates).where(eq(certificates.code, code));
    const [key] = await database.db.select().from(signingKeys);
    const holds = (text: string) =>
      verify(
        null,
        Buffer.from(text),
        createPublicKey(publicKeyPem(key?.publicKey ?? '')),
        Buffer.from(row?.signature ?? '', 'base64'),
      );
    expect(holds(row?.statement ?? '')).toBe(true);
    expect(holds((row?.statement ?? '').replace('-51.1', '-61.1'))).toBe(false);
  });

  it('states what was read, with its limit, rule and uncertainty', async () => {
    const { code, number } = await issue();
    const certificate = await readSignedCertificate(database.db, { code });
    const second = certificate?.statement.points.find(({ quantityKey }) => quantityKey === 'harmonic_2');
    expect(number).toBe('TC-2027-00001');
    expect(second).toMatchObject({
      band: '20 m',
      text: '−51.1 dBc',
      decision: 'guarded',
      verdict: 'pass',
      n: 1,
    });
    expect(second?.uncertainty?.text).toMatch(/^\d\.\d dB$/);
    expect(second?.upper).toBeLessThan(-40);
    expect(certificate?.statement.notAssessed).toContain('Not assessed to EN 301 783.');
  });

  it('says where it was tested, what was done otherwise than planned, and what was not read', async () => {
    const runId = await openAndFill();
    await database.db
      .update(testRuns)
      .set({ deviations: 'Keyed by hand: the keyer was not fitted yet.' })
      .where(eq(testRuns.id, runId));
    await closeRun({ runId }, bench.ctx);
    const { code } = await issueCertificate({ runId }, bench.ctx);
    const certificate = await readSignedCertificate(database.db, { code });
    expect(certificate?.statement).toMatchObject({
      place: 'at the works',
      deviations: ['Keyed by hand: the keyer was not fitted yet.'],
    });
    expect(certificate?.statement.conformity.join(' ')).toContain(
      'On 20 m the 2nd and 3rd harmonic are each',
    );
    expect(certificate?.statement.notAssessed).toContain('Harmonics above the 3rd were not assessed.');
  });

  it('refuses a run that would be judged otherwise now', async () => {
    const runId = await openAndFill();
    const [run] = await database.db.select().from(testRuns).where(eq(testRuns.id, runId));
    await database.db.insert(runPoints).values({
      ...{ testRunId: runId, testPointId: bench.pointId('rf_power'), verdict: 'pass', readingCount: 1 },
      ...{ lowerLimit: 1.5, ruleText: 'As it was then' },
    });
    await database.db
      .update(testRuns)
      .set({ state: 'closed', result: 'passed', closedAt: run?.openedAt ?? new Date() })
      .where(eq(testRuns.id, runId));
    await expect(issueCertificate({ runId }, bench.ctx)).rejects.toThrow('judged otherwise now');
  });

  it.each([
    ['an open run', async () => openAndFill()],
    [
      'a failed run',
      async () => {
        const runId = await openAndFill({ harmonic_2: '30' });
        await closeRun({ runId }, bench.ctx);
        return runId;
      },
    ],
  ])('refuses %s', async (_, make) => {
    const runId = await make();
    await expect(issueCertificate({ runId }, bench.ctx)).rejects.toMatchObject({ code: 'conflict' });
    expect(await database.db.select().from(certificates)).toHaveLength(0);
  });

  it('gives a run one certificate, however often it is asked for at once', async () => {
    const runId = await openAndFill();
    await closeRun({ runId }, bench.ctx);
    const answers = await Promise.allSettled([1, 2, 3].map(() => issueCertificate({ runId }, bench.ctx)));
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await database.db.select().from(certificates)).toHaveLength(1);
  });

  it('refuses a run that is no longer the newest', async () => {
    const runId = await openAndFill();
    await closeRun({ runId }, bench.ctx);
    await openRun({ serial: bench.serial }, bench.ctx);
    await expect(issueCertificate({ runId }, bench.ctx)).rejects.toThrow('tested again');
  });

  it('refuses a run that another version of the computation has judged', async () => {
    const { runId } = await openRun({ serial: bench.serial }, bench.ctx);
    const [open] = await database.db.select().from(testRuns).where(eq(testRuns.id, runId));
    if (open === undefined) throw new Error('The run is gone.');
    const judgedThen = {
      ...open,
      runNo: 2,
      state: 'closed',
      result: 'passed',
      computationVersion: '0.9',
    } as const;
    const [{ insertId }] = await database.db.insert(testRuns).values({ ...judgedThen, id: undefined });
    await expect(issueCertificate({ runId: insertId }, bench.ctx)).rejects.toThrow('another version');
  });

  it('refuses while the works has no key', async () => {
    await database.db.update(signingKeys).set({ retiredAt: new Date() });
    const runId = await openAndFill();
    await closeRun({ runId }, bench.ctx);
    await expect(issueCertificate({ runId }, bench.ctx)).rejects.toThrow('no signing key');
  });
});

describe('rule 6: an issued certificate does not change', () => {
  it('is kept by the database, which lets it gain its PDF once', async () => {
    const { certificateId } = await issue();
    const change = (values: Partial<typeof certificates.$inferInsert>) =>
      database.db.update(certificates).set(values).where(eq(certificates.id, certificateId));
    await expect(change({ number: 'TC-2027-99999' })).rejects.toThrow();
    await expect(change({ statement: '{}' })).rejects.toThrow();
    await expect(
      database.db.delete(certificates).where(eq(certificates.id, certificateId)),
    ).rejects.toThrow();
    const bytes = Buffer.from('%PDF-1.7 invented');
    const first = await attachCertificatePdf({ certificateId, bytes }, bench.ctx);
    const second = await attachCertificatePdf(
      { certificateId, bytes: Buffer.from('%PDF-1.7 other') },
      bench.ctx,
    );
    expect(second.fileId).toBe(first.fileId);
    await expect(change({ fileId: null })).rejects.toThrow();
  });

  it('keeps verifying after the works has changed its key', async () => {
    const { code } = await issue();
    await addSigningKey(callAs(database.db, bench.owner));
    expect(await verifyCertificate(database.db, code)).toMatchObject({ ok: true, signatureHolds: true });
  });
});

describe('its PDF', () => {
  it('is made in a thread, the same bytes each time, kept with its hash, and says what was measured', async () => {
    const { certificateId, number, code } = await issue();
    const bytes = await makeCertificatePdf(database.db, certificateId);
    const again = await makeCertificatePdf(database.db, certificateId);
    expect(bytes).not.toBeNull();
    expect(Buffer.from(again ?? []).equals(Buffer.from(bytes ?? []))).toBe(true);
    const { fileId } = await attachCertificatePdf(
      { certificateId, bytes: bytes ?? new Uint8Array() },
      bench.ctx,
    );
    const kept = await readFile(database.db, fileId);
    expect(Buffer.from(kept.bytes).equals(Buffer.from(bytes ?? []))).toBe(true);
    const folder = await mkdtemp(join(tmpdir(), 'certificate-'));
    try {
      const file = join(folder, 'certificate.pdf');
      await writeFile(file, kept.bytes);
      const { stdout } = await run('pdftotext', ['-layout', file, '-']);
      for (const words of [number, bench.serial, 'Holm 3', '−51.1', code.slice(0, 4)]) {
        expect(stdout).toContain(words);
      }
      await run('pdfdetach', ['-saveall', '-o', folder, file]);
      const attached: unknown = JSON.parse(await readDisk(join(folder, `${number}.json`), 'utf8'));
      expect(attached).toMatchObject({ statement: { number }, signature: { algorithm: 'Ed25519' } });
    } finally {
      await rm(folder, { recursive: true });
    }
  }, 60_000);

  it('is asked for in the same transaction, and its letter only for a unit with a buyer', async () => {
    const { certificateId } = await issue();
    await attachCertificatePdf({ certificateId, bytes: Buffer.from('%PDF-1.7') }, bench.ctx);
    const rows = await database.db.select().from(outbox);
    expect(rows.map(({ key }) => key)).toEqual([`certificate-pdf:${certificateId}`]);
  });
});
