import { join } from 'node:path';
import { startMailbox } from '../../../local-fakes/mailbox/server';
import { startStripeFake } from '../../../local-fakes/stripe/server';
import type { LocalSettings } from './local-settings';
import { tryLock } from './machine-lock.mjs';
import { isPortFree } from './ports';
import { isLoopback } from './request-guards';
import { PlainError } from './step.mjs';

/** The outside services of one application: settings for its processes, and pages for the person who tries it. */
export interface Fakes {
  variables: Record<string, string>;
  /** The control page of the payment fake; undefined with a real provider. */
  paymentsPage: string | undefined;
  /** The page that shows what was mailed; undefined with a real mail server. */
  mailboxPage: string | undefined;
  stop(): Promise<void>;
}

interface Options {
  variables: NodeJS.ProcessEnv;
  local: LocalSettings;
  dataFolder: string;
  baseUrl: URL;
  /** Path of the door that takes the provider's events. */
  webhookPath: string;
}

function refuseInPublic(baseUrl: URL, settings: string): void {
  if (isLoopback(baseUrl)) return;
  throw new PlainError(
    `Set ${settings}: the stand-in for it runs only where RIGWRIGHT_BASE_URL is this machine's own, and it is ${baseUrl.origin}.`,
  );
}

async function needPort(port: number, what: string): Promise<void> {
  if (await isPortFree(port, '127.0.0.1')) return;
  throw new PlainError(
    `Port ${port}, which ${what} used before, is taken by another program; end that program, or move the data folder's local.json away to choose new ports.`,
  );
}

/**
 * Starts the stand-ins for what the settings do not name: a payment provider, a mail server. When another
 * start with the same data folder runs them already, they are shared.
 *
 * @throws PlainError when the application can be reached from elsewhere, or a port is taken.
 */
export async function startFakes(options: Options): Promise<Fakes> {
  const { variables, local, dataFolder, baseUrl, webhookPath } = options;
  const fakesPayments = !variables['STRIPE_SECRET_KEY'];
  const fakesMail = !variables['SMTP_URL'];
  if (fakesPayments) refuseInPublic(baseUrl, 'STRIPE_SECRET_KEY and STRIPE_WEBHOOK_SECRET');
  if (fakesMail) refuseInPublic(baseUrl, 'SMTP_URL and MAIL_FROM');
  const fakes: Fakes = {
    variables: {},
    paymentsPage: undefined,
    mailboxPage: undefined,
    stop: () => Promise.resolve(),
  };
  if (fakesPayments) {
    fakes.paymentsPage = `http://127.0.0.1:${local.stripePort}`;
    fakes.variables['STRIPE_SECRET_KEY'] = local.stripeSecretKey;
    fakes.variables['STRIPE_WEBHOOK_SECRET'] = local.stripeWebhookSecret;
    fakes.variables['STRIPE_API_URL'] = fakes.paymentsPage;
  }
  if (fakesMail) {
    fakes.mailboxPage = `http://127.0.0.1:${local.mailboxPort}`;
    fakes.variables['SMTP_URL'] = `smtp://127.0.0.1:${local.smtpPort}`;
    fakes.variables['MAIL_FROM'] =
      variables['MAIL_FROM'] ?? 'Thistledown Radio Works <works@thistledown.example>';
  }
  const release = await tryLock(`fakes ${dataFolder}`);
  if (!release) return fakes;
  const running: { close(): Promise<void> }[] = [];
  if (fakesPayments) {
    await needPort(local.stripePort, 'the payment fake');
    running.push(
      await startStripeFake({
        port: local.stripePort,
        webhookUrl: new URL(webhookPath, baseUrl).href,
        webhookSecret: local.stripeWebhookSecret,
        apiKey: local.stripeSecretKey,
        dataFile: join(dataFolder, 'payment-fake.json'),
      }),
    );
  }
  if (fakesMail) {
    await needPort(local.smtpPort, 'the mail fake');
    await needPort(local.mailboxPort, 'the mailbox');
    running.push(
      await startMailbox({
        smtpPort: local.smtpPort,
        httpPort: local.mailboxPort,
        dataFolder: join(dataFolder, 'mailbox'),
      }),
    );
  }
  fakes.stop = async () => {
    await Promise.all(running.map((fake) => fake.close()));
    await release();
  };
  return fakes;
}
