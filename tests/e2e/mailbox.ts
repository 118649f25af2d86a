import { z } from 'zod';
import { expect } from 'playwright/test';

const messageSchema = z.object({
  id: z.number(),
  to: z.array(z.string()),
  subject: z.string(),
  /** How often it came; 2 after a second sending. */
  count: z.number(),
  attachments: z.array(z.object({ n: z.number(), filename: z.string(), contentType: z.string() })),
});
const listSchema = z.object({ messages: z.array(messageSchema) });
const wholeSchema = messageSchema.extend({ text: z.string() });

type Message = z.infer<typeof messageSchema>;

/** What the application has mailed, read from the stand-in for the mail service. */
export class Mailbox {
  constructor(private readonly url: string) {}

  /** Mail to an address, in order of arrival. */
  async list(to: string): Promise<Message[]> {
    const answer = await fetch(`${this.url}/api/messages?to=${encodeURIComponent(to)}`);
    return listSchema.parse(await answer.json()).messages;
  }

  /** Waits for a mail with such a subject, and gives it with its text. */
  async expectMail(to: string, subject: RegExp): Promise<z.infer<typeof wholeSchema>> {
    let found: Message | undefined;
    await expect
      .poll(
        async () => {
          const messages = await this.list(to);
          found = messages.find((message) => subject.test(message.subject));
          return messages.map((message) => message.subject).join('; ');
        },
        { message: `mail to ${to}`, timeout: 30_000 },
      )
      .toMatch(subject);
    const answer = await fetch(`${this.url}/api/messages/${found?.id ?? 0}`);
    return wholeSchema.parse(await answer.json());
  }

  /** The bytes of a file that came with a mail. */
  async attachment(message: Message, n: number): Promise<Uint8Array> {
    const answer = await fetch(`${this.url}/api/messages/${message.id}/attachments/${n}`);
    expect(answer.status).toBe(200);
    return new Uint8Array(await answer.arrayBuffer());
  }
}

/** The first address in a text that leads to such a path. */
export function linkIn(text: string, path: RegExp): string {
  const link = text
    .match(/https?:\/\/[^\s<>"]+/g)
    ?.find((address) => URL.canParse(address) && path.test(new URL(address).pathname));
  if (link === undefined) throw new Error(`The mail has no link to ${String(path)}:\n${text}`);
  return link;
}
