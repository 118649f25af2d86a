import { expect, test } from 'vitest';
import { signingKeys } from '~/server/db/schema';
import { signStatement } from '~/server/services/certificates/sign-statement';
import { write } from '~/server/write';
import { callContext } from '../../factories/contexts';
import { buildStatement } from '../../pdf/build-statement';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

const signed = () =>
  write(callContext(database.db), async (w) => {
    const { signingKeyId } = await signStatement(w, buildStatement());
    await w.record({ action: 'certificate.issue', subjects: [] });
    return signingKeyId;
  });

test('a works that never had a signing key gets its first with its first certificate', async () => {
  const first = await signed();
  expect(await signed()).toBe(first);
  expect(await database.db.$count(signingKeys)).toBe(1);
});

test('where every key was retired, none is made by itself', async () => {
  await signed();
  await database.db.update(signingKeys).set({ retiredAt: new Date() });
  await expect(signed()).rejects.toThrow('no signing key');
  expect(await database.db.$count(signingKeys)).toBe(1);
});
