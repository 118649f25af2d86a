import { z } from 'zod';
import { letters } from '~/server/documents/letters';
import { env } from '~/server/env';
import { sendMail } from '~/server/mail/send';
import { mailTransport } from '~/server/mail/transport';
import type { MailTransport } from '~/server/mail/transport';
import { NeverPossible } from './job';
import type { JobCall } from './job';

const payloadSchema = z.object({ letter: z.string() }).passthrough();

let transport: MailTransport | undefined;

/** Writes and sends one letter; its Message-ID follows from the outbox key, so a second sending can be told. */
export async function mailLetter({ db, key, payload }: JobCall): Promise<void> {
  const { letter: name } = payloadSchema.parse(payload);
  const write = letters[name];
  if (write === undefined) throw new NeverPossible(`There is no letter “${name}”.`);
  const letter = await write(db, payload);
  // What the letter was about is gone (an erased address, a cancelled order): nobody is left to write to.
  if (letter === null) return;
  const { smtpUrl, mailFrom, baseUrl } = env();
  transport ??= mailTransport(smtpUrl);
  const messageId = `<${key.replaceAll(/[^A-Za-z0-9.-]/g, '.')}@${baseUrl.hostname.replaceAll(/[[\]:]/g, '.')}>`;
  const sent = await sendMail(transport, { ...letter, messageId, from: mailFrom });
  if (!sent.ok) throw new NeverPossible(`The letter cannot be sent: ${sent.reason}.`);
}
