import { afterAll, expect, test } from 'vitest';
import { z } from 'zod';
import { outbox } from '~/server/db/schema';
import { leaseOutbox } from '~/server/jobs/lease-outbox';
import { mailLetter } from '~/server/jobs/mail-letter';
import { drainOutbox } from '~/server/jobs/run-worker';
import { askSignInLink } from '~/server/services/people/ask-sign-in-link';
import { startMailbox } from '../../../local-fakes/mailbox/server';
import { seedWorks } from '../../factories/catalog';
import { testDatabase } from '../../setup/database';
import { seedPerson } from '../../factories/people';
import { callContext } from '../../factories/contexts';

const mailbox = await startMailbox({ smtpPort: 0, httpPort: 0 });
// Before the settings are read for the first time.
process.env['SMTP_URL'] = mailbox.smtpUrl;
const database = testDatabase();

afterAll(() => mailbox.close());

const messagesSchema = z.object({
  messages: z.array(z.object({ messageId: z.string(), subject: z.string(), count: z.number() })),
});

async function arrived(to: string) {
  const response = await fetch(new URL(`/api/messages?to=${encodeURIComponent(to)}`, mailbox.url));
  return messagesSchema.parse(await response.json()).messages;
}

test('rule 8: a mail goes out after the commit, at least once, and a second one is told by its Message-ID', async () => {
  await seedWorks(database.db);
  await seedPerson(database.db, { email: 'buyer@home.example' });
  await askSignInLink({ email: 'buyer@home.example' }, callContext(database.db, { now: new Date() }));
  expect(await arrived('buyer@home.example')).toEqual([]);

  // A worker that sends the letter and dies before it says so.
  const [row] = await leaseOutbox(database.db, new Date(), 8);
  if (row === undefined) throw new Error('A letter was to be sent.');
  await mailLetter({ db: database.db, now: new Date(), key: row.key, payload: row.payload });
  const [first] = await arrived('buyer@home.example');
  expect(first).toMatchObject({ count: 1 });

  // Its lease runs out, and another worker does the row.
  await database.db.update(outbox).set({ leasedUntil: new Date(Date.now() - 1) });
  expect(await drainOutbox(database.db)).toBe(1);
  expect(await arrived('buyer@home.example')).toEqual([{ ...first, count: 2 }]);
  expect(await drainOutbox(database.db)).toBe(0);

  // Another letter to the same person is another mail.
  await askSignInLink({ email: 'buyer@home.example' }, callContext(database.db, { now: new Date() }));
  await drainOutbox(database.db);
  const all = await arrived('buyer@home.example');
  expect(new Set(all.map(({ messageId }) => messageId)).size).toBe(2);
});
