import { mkdirSync, readdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { simpleParser, type AddressObject } from 'mailparser';
import { z } from 'zod';

/** What SMTP said about a mail, beside the mail itself. */
const envelopeSchema = z.object({
  from: z.string(),
  to: z.array(z.string()),
  /** Unix ms of each arrival; a second sending of the same Message-ID adds one. */
  receivedAt: z.array(z.number()).min(1),
});
type Envelope = z.infer<typeof envelopeSchema>;

interface Attachment {
  filename: string;
  contentType: string;
  content: Buffer;
}

export interface Mail {
  /** 1, 2, 3, … in order of first arrival. */
  id: number;
  messageId: string;
  envelope: Envelope;
  from: string;
  to: string;
  subject: string;
  text: string;
  html: string | null;
  headers: Record<string, string>;
  attachments: Attachment[];
  /** The mail as it came over SMTP. */
  source: Buffer;
}

function addressText(address: AddressObject | AddressObject[] | undefined): string {
  if (address === undefined) return '';
  return [address]
    .flat()
    .map((item) => item.text)
    .join(', ');
}

async function parseMail(id: number, source: Buffer, envelope: Envelope): Promise<Mail> {
  const parsed = await simpleParser(source);
  return {
    id,
    messageId: parsed.messageId ?? '',
    envelope,
    from: addressText(parsed.from),
    to: addressText(parsed.to),
    subject: parsed.subject ?? '',
    text: parsed.text ?? '',
    html: typeof parsed.html === 'string' ? parsed.html : null,
    headers: Object.fromEntries(
      parsed.headerLines.map(({ key, line }) => [key, line.slice(line.indexOf(':') + 1).trim()]),
    ),
    attachments: parsed.attachments.map((attachment, index) => ({
      filename: attachment.filename ?? `attachment-${index + 1}`,
      contentType: attachment.contentType,
      content: attachment.content,
    })),
    source,
  };
}

/** Mails in memory and, with a folder, as `000001.eml` with `000001.json` beside each. */
export class MailStore {
  readonly mails: Mail[] = [];
  readonly #folder: string | undefined;
  #queue: Promise<unknown> = Promise.resolve();

  constructor(folder: string | undefined) {
    this.#folder = folder;
  }

  async load(): Promise<void> {
    if (this.#folder === undefined) return;
    mkdirSync(this.#folder, { recursive: true, mode: 0o700 });
    const names = readdirSync(this.#folder).filter((name) => /^\d{6,}\.json$/.test(name));
    for (const name of names.sort()) {
      const envelope = envelopeSchema.parse(JSON.parse(readFileSync(join(this.#folder, name), 'utf8')));
      const source = readFileSync(join(this.#folder, name.replace('.json', '.eml')));
      this.mails.push(await parseMail(Number.parseInt(name, 10), source, envelope));
    }
  }

  /** Takes a mail in; one with a Message-ID that is already here only counts up. */
  receive(source: Buffer, from: string, to: string[]): Promise<void> {
    // One after the other: two copies that arrive together must meet each other.
    const done = this.#queue.then(() => this.#take(source, from, to));
    this.#queue = done.catch(() => undefined);
    return done;
  }

  find(id: string): Mail | undefined {
    return this.mails.find((mail) => String(mail.id) === id);
  }

  async #take(source: Buffer, from: string, to: string[]): Promise<void> {
    const id = (this.mails.at(-1)?.id ?? 0) + 1;
    const mail = await parseMail(id, source, { from, to, receivedAt: [Date.now()] });
    const known =
      mail.messageId === '' ? undefined : this.mails.find((other) => other.messageId === mail.messageId);
    if (known) {
      known.envelope.receivedAt.push(Date.now());
      this.#write(known);
      return;
    }
    this.#write(mail);
    this.mails.push(mail);
  }

  #write(mail: Mail): void {
    if (this.#folder === undefined) return;
    const base = join(this.#folder, String(mail.id).padStart(6, '0'));
    writeFileSync(`${base}.eml`, mail.source, { mode: 0o600 });
    writeFileSync(`${base}.json.new`, JSON.stringify(mail.envelope), { mode: 0o600 });
    renameSync(`${base}.json.new`, `${base}.json`);
  }
}
