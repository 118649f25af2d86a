import { randomBytes } from 'node:crypto';
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import { withLock } from './machine-lock.mjs';
import { freePort } from './ports';
import { PlainError } from './step.mjs';

const shape = z.object({
  secret: z.string().min(32),
  stripeSecretKey: z.string().min(1),
  stripeWebhookSecret: z.string().min(1),
  stripePort: z.number().int(),
  smtpPort: z.number().int(),
  mailboxPort: z.number().int(),
});

/** What a data folder remembers of its own: generated secrets, and the ports that links in old mails name. */
export type LocalSettings = z.infer<typeof shape>;

async function generate(): Promise<LocalSettings> {
  const ports = new Set<number>();
  while (ports.size < 3) ports.add(await freePort());
  const [stripePort = 0, smtpPort = 0, mailboxPort = 0] = ports;
  return {
    secret: randomBytes(32).toString('hex'),
    stripeSecretKey: `sk_test_${randomBytes(16).toString('hex')}`,
    stripeWebhookSecret: `whsec_${randomBytes(16).toString('hex')}`,
    stripePort,
    smtpPort,
    mailboxPort,
  };
}

/**
 * Reads the data folder's own settings; makes folder (mode 0700) and file (mode 0600) at first.
 *
 * @throws PlainError when the file cannot be understood.
 */
export function localSettings(dataFolder: string): Promise<LocalSettings> {
  return withLock(`local settings ${dataFolder}`, async () => {
    await mkdir(dataFolder, { recursive: true, mode: 0o700 });
    const file = join(dataFolder, 'local.json');
    const text = await readFile(file, 'utf8').catch(() => undefined);
    if (text === undefined) {
      const fresh = await generate();
      await writeFile(`${file}.new`, `${JSON.stringify(fresh, null, 2)}\n`, { mode: 0o600 });
      await rename(`${file}.new`, file);
      return fresh;
    }
    try {
      return shape.parse(JSON.parse(text));
    } catch {
      throw new PlainError(`${file} cannot be understood; put it back from a backup.`);
    }
  });
}
