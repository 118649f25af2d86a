import type { MailTransport } from './transport';

interface MailAttachment {
  filename: string;
  contentType: string;
  content: Uint8Array;
}

interface Mail {
  /** `<left@right>`; the same for every repetition, so that the second sending can be told from a new mail. */
  messageId: string;
  /** `orders@works.example` or `Works <orders@works.example>`. */
  from: string;
  /** One bare address. */
  to: string;
  subject: string;
  text: string;
  html: string;
  attachments?: readonly MailAttachment[];
}

type Refusal = 'bad_sender' | 'bad_recipient' | 'bad_message_id' | 'bad_subject' | 'bad_attachment_name';

// eslint-disable-next-line no-control-regex -- control characters are what is looked for
const CONTROL = /[\u0000-\u001f\u007f\u0085\u2028\u2029]/;
const ADDRESS = /^[^\s<>()[\]\\,;:"@]{1,64}@[^\s<>()[\]\\,;:"@]{1,255}$/;
const NAMED_ADDRESS = /^([^<>"]*)<([^<>]*)>$/;
const MESSAGE_ID = /^<[^\s<>@]{1,200}@[^\s<>@]{1,255}>$/;

function isAddress(text: string): boolean {
  return !CONTROL.test(text) && ADDRESS.test(text);
}

function readSender(from: string): { name: string; address: string } | null {
  if (CONTROL.test(from)) return null;
  const named = NAMED_ADDRESS.exec(from);
  const address = named?.[2]?.trim() ?? from;
  return isAddress(address) ? { name: named?.[1]?.trim() ?? '', address } : null;
}

function refusalOf(mail: Mail): Refusal | null {
  if (!isAddress(mail.to)) return 'bad_recipient';
  if (CONTROL.test(mail.messageId) || !MESSAGE_ID.test(mail.messageId)) return 'bad_message_id';
  if (CONTROL.test(mail.subject) || mail.subject === '') return 'bad_subject';
  const named = mail.attachments?.every(({ filename }) => filename !== '' && !/[\\/]/.test(filename)) ?? true;
  const clean =
    mail.attachments?.every((file) => !CONTROL.test(file.filename) && !CONTROL.test(file.contentType)) ??
    true;
  return named && clean ? null : 'bad_attachment_name';
}

/**
 * Sends one mail. `ok: false` is a mail that can never be sent, whoever asks again: a line break in an address
 * would otherwise reach the SMTP dialogue as a command of its own.
 *
 * @throws nodemailer's error when the server is not there or refuses; that may be tried again.
 */
export async function sendMail(
  transport: MailTransport,
  mail: Mail,
): Promise<{ ok: true } | { ok: false; reason: Refusal }> {
  const from = readSender(mail.from);
  if (from === null) return { ok: false, reason: 'bad_sender' };
  const reason = refusalOf(mail);
  if (reason !== null) return { ok: false, reason };
  await transport.sendMail({
    messageId: mail.messageId,
    from,
    to: { name: '', address: mail.to },
    subject: mail.subject,
    text: mail.text,
    html: mail.html,
    attachments: mail.attachments?.map((file) => ({
      filename: file.filename,
      contentType: file.contentType,
      content: Buffer.from(file.content),
    })),
    headers: { 'Auto-Submitted': 'auto-generated' },
    disableFileAccess: true,
    disableUrlAccess: true,
  });
  return { ok: true };
}
