import { createPublicKey, verify } from 'node:crypto';
import { eq, isNull } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { signingKeys } from '~/server/db/schema';
import { sealPrivateKey } from '~/server/keys/seal';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { verifyCertificate } from '~/server/queries/certificates/verify-certificate';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { GET, POST } from '../../../src/pages/api/certificate-keys/index';
import { GET as GET_PEM } from '../../../src/pages/api/certificate-keys/[id]/pem';
import { callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { issueFor } from '../../factories/certificates';
import { callDoor, problemIn } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';
import { testKey } from '../../pdf/render-statement';

const database = testDatabase();
let bench: SeededBench;
const published = z.array(
  z.object({ keyId: z.string(), publicKeyPem: z.string(), retiredAt: z.string().nullable() }),
);

beforeEach(async () => {
  bench = await seedBench(database.db);
});

async function listKeys() {
  const { response } = await callDoor(GET, { method: 'GET' });
  return published.parse(await response.json());
}

describe('changing the signing key', () => {
  it('publishes old and new, and each certificate verifies with the PEM of its own', async () => {
    await addSigningKey(callAs(database.db, bench.owner));
    const old = await issueFor(bench);
    await addSigningKey(callAs(database.db, bench.owner));
    const added = await issueFor(bench);
    const keys = await listKeys();
    expect(keys.map(({ retiredAt }) => retiredAt === null)).toEqual([true, false]);
    const pems = await Promise.all(
      keys.map(async ({ keyId }) => {
        const { response } = await callDoor(GET_PEM, { method: 'GET', params: { id: keyId } });
        expect(response.headers.get('content-disposition')).toContain(`${keyId}.pem`);
        return response.text();
      }),
    );
    expect(pems).toEqual(keys.map(({ publicKeyPem }) => publicKeyPem));
    for (const { code, key } of [
      { code: added.code, key: pems[0] },
      { code: old.code, key: pems[1] },
    ]) {
      const certificate = await readSignedCertificate(database.db, { code });
      const bytes = Buffer.from(certificate?.signature.value ?? '', 'base64');
      const holds = (pem = '') =>
        verify(null, Buffer.from(certificate?.signedText ?? ''), createPublicKey(pem), bytes);
      expect(holds(key)).toBe(true);
      expect(pems.filter(holds)).toHaveLength(1);
      expect(await verifyCertificate(database.db, code)).toMatchObject({ signatureHolds: true });
    }
  });

  it('leaves one that signs, however many ask at once', async () => {
    const owner = callAs(database.db, bench.owner);
    await Promise.all([1, 2, 3, 4].map(() => addSigningKey(owner)));
    const present = await database.db.select().from(signingKeys).where(isNull(signingKeys.retiredAt));
    expect(present).toHaveLength(1);
    expect(await listKeys()).toHaveLength(4);
  });

  it('is for the owner alone', async () => {
    const as = (id: number, role: 'owner' | 'tester') => ({
      person: { id, name: 'A', email: 'a@works.test', callSign: null, roles: [role] },
    });
    const { response } = await callDoor(POST, as(bench.tester, 'tester'));
    expect(response.status).toBe(403);
    expect(await listKeys()).toEqual([]);
    expect((await callDoor(POST, as(bench.owner, 'owner'))).response.status).toBe(200);
    expect(await listKeys()).toHaveLength(1);
  });

  it('knows no key of another name', async () => {
    const { response } = await callDoor(GET_PEM, { method: 'GET', params: { id: '0'.repeat(16) } });
    expect(await problemIn(response)).toMatchObject({
      status: 404,
      detail: 'The works has no key of this name.',
    });
  });
});

describe('issuing', () => {
  it('says what to do where every key is retired', async () => {
    await addSigningKey(callAs(database.db, bench.owner));
    await database.db.update(signingKeys).set({ retiredAt: new Date() });
    await expect(issueFor(bench)).rejects.toThrow('its owner makes one under Office, Signing keys');
  });

  it('says what to do where the works’ secret does not open the key, and goes on with a new one', async () => {
    await addSigningKey(callAs(database.db, bench.owner));
    await database.db
      .update(signingKeys)
      .set({ sealedPrivateKey: sealPrivateKey(testKey, 'the secret of another works') })
      .where(eq(signingKeys.id, signingKeys.id));
    await expect(issueFor(bench)).rejects.toMatchObject({ code: 'conflict' });
    await addSigningKey(callAs(database.db, bench.owner));
    const { code } = await issueFor(bench);
    expect(await verifyCertificate(database.db, code)).toMatchObject({ ok: true, signatureHolds: true });
  });
});
