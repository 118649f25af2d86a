import { z } from 'zod';

const optionalText = z
  .string()
  .trim()
  .transform((text) => (text === '' ? undefined : text))
  .optional();

const settings = z.object({
  DATABASE_URL: z.string().url().startsWith('mysql://', 'must begin with mysql://'),
  PORT: z.coerce.number().int().min(0).max(65535).default(4321),
  RIGWRIGHT_BASE_URL: optionalText.pipe(z.string().url().optional()),
  RIGWRIGHT_SECRET: z.string().min(32, 'needs at least 32 characters'),
  STRIPE_SECRET_KEY: z.string().min(1),
  STRIPE_WEBHOOK_SECRET: z.string().min(1),
  STRIPE_API_URL: optionalText.pipe(z.string().url().optional()),
  SMTP_URL: z.string().url(),
  MAIL_FROM: z.string().min(3),
  LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'silent']).default('info'),
});

/** The settings of one process, read once. */
export interface Env {
  databaseUrl: string;
  port: number;
  /** Where people reach the works; links in mails and the Host check come from it. */
  baseUrl: URL;
  /** Seals private keys at rest; at least 32 characters, the same on every instance. */
  secret: string;
  stripeSecretKey: string;
  /** Several, separated by commas, while a secret is being rolled. */
  stripeWebhookSecrets: string[];
  /** Null for the provider's own address. */
  stripeApiUrl: URL | null;
  smtpUrl: string;
  mailFrom: string;
  logLevel: z.infer<typeof settings>['LOG_LEVEL'];
}

let known: Env | undefined;

/**
 * Reads the settings from the process environment at run time, for the application, the worker and
 * scripts alike.
 *
 * @throws Error naming every setting that is missing or wrong.
 */
export function env(): Env {
  known ??= readEnv(process.env);
  return known;
}

/** Parses a set of environment variables; see {@link env}. */
export function readEnv(variables: Readonly<Record<string, string | undefined>>): Env {
  const parsed = settings.safeParse(variables);
  if (!parsed.success) {
    const faults = parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
    throw new Error(`The settings cannot be used. ${faults.join('; ')}`);
  }
  const values = parsed.data;
  return {
    databaseUrl: values.DATABASE_URL,
    port: values.PORT,
    baseUrl: new URL(values.RIGWRIGHT_BASE_URL ?? `http://localhost:${values.PORT}`),
    secret: values.RIGWRIGHT_SECRET,
    stripeSecretKey: values.STRIPE_SECRET_KEY,
    stripeWebhookSecrets: values.STRIPE_WEBHOOK_SECRET.split(',').map((secret) => secret.trim()),
    stripeApiUrl: values.STRIPE_API_URL === undefined ? null : new URL(values.STRIPE_API_URL),
    smtpUrl: values.SMTP_URL,
    mailFrom: values.MAIL_FROM,
    logLevel: values.LOG_LEVEL,
  };
}
