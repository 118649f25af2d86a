import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { z } from 'zod';

const metadata = z.record(z.string());

const sessionSchema = z.object({
  id: z.string(),
  created: z.number(),
  expiresAt: z.number(),
  status: z.enum(['open', 'complete', 'expired']),
  paymentStatus: z.enum(['unpaid', 'paid']),
  currency: z.string(),
  lines: z.array(z.object({ name: z.string(), unitAmount: z.number(), quantity: z.number() })),
  customerEmail: z.string().nullable(),
  clientReferenceId: z.string().nullable(),
  metadata,
  paymentMetadata: metadata,
  description: z.string().nullable(),
  successUrl: z.string(),
  cancelUrl: z.string().nullable(),
  paymentIntent: z.string().nullable(),
  /** How often a card was refused on the pay page. */
  declines: z.number(),
});
export type Session = z.infer<typeof sessionSchema>;

const paymentSchema = z.object({
  id: z.string(),
  chargeId: z.string(),
  sessionId: z.string(),
  created: z.number(),
  amount: z.number(),
  currency: z.string(),
  method: z.enum(['card', 'sepa_debit']),
  status: z.enum(['processing', 'succeeded', 'requires_payment_method']),
  description: z.string().nullable(),
  metadata,
  disputeId: z.string().nullable(),
});
export type Payment = z.infer<typeof paymentSchema>;

const refundSchema = z.object({
  id: z.string(),
  created: z.number(),
  paymentIntent: z.string(),
  amount: z.number(),
  reason: z.string().nullable(),
  metadata,
});
export type Refund = z.infer<typeof refundSchema>;

const eventSchema = z.object({
  id: z.string(),
  type: z.string(),
  created: z.number(),
  sessionId: z.string(),
  /** The body as it is sent each time, byte for byte. */
  body: z.string(),
  attempts: z.array(z.object({ at: z.number(), status: z.number().nullable() })),
  /** `held` waits for the control page; `given_up` for a new start or a sending by hand. */
  state: z.enum(['waiting', 'held', 'delivered', 'given_up']),
});
export type StoredEvent = z.infer<typeof eventSchema>;

const stateSchema = z.object({
  sessions: z.record(sessionSchema),
  payments: z.record(paymentSchema),
  refunds: z.record(refundSchema),
  events: z.record(eventSchema),
  idempotency: z.record(z.object({ fingerprint: z.string(), status: z.number(), body: z.string() })),
  hold: z.boolean(),
});
type State = z.infer<typeof stateSchema>;

/** All that the stand-in remembers, with a file beside it when it shall outlive a restart. */
export class Store {
  readonly state: State;
  readonly #file: string | undefined;

  constructor(file: string | undefined) {
    this.#file = file;
    this.state = read(file) ?? {
      sessions: {},
      payments: {},
      refunds: {},
      events: {},
      idempotency: {},
      hold: false,
    };
  }

  /** Writes beside the file and moves it over, so that a crash leaves the old or the new one whole. */
  save(): void {
    if (this.#file === undefined) return;
    mkdirSync(dirname(this.#file), { recursive: true });
    const temporary = `${this.#file}.new`;
    writeFileSync(temporary, JSON.stringify(this.state), { mode: 0o600 });
    renameSync(temporary, this.#file);
  }

  refundsOf(paymentIntent: string): Refund[] {
    return Object.values(this.state.refunds).filter((refund) => refund.paymentIntent === paymentIntent);
  }

  refundedOf(paymentIntent: string): number {
    return this.refundsOf(paymentIntent).reduce((sum, refund) => sum + refund.amount, 0);
  }

  /** Oldest first. */
  eventsOf(sessionId: string): StoredEvent[] {
    return Object.values(this.state.events).filter((event) => event.sessionId === sessionId);
  }
}

function read(file: string | undefined): State | null {
  if (file === undefined) return null;
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return null;
    throw error;
  }
  return stateSchema.parse(JSON.parse(text));
}

/** A record's own entry; an id from an address may be any word, `__proto__` too. */
export function find<T>(record: Record<string, T>, id: string): T | undefined {
  return Object.hasOwn(record, id) ? record[id] : undefined;
}

export function newId(prefix: string): string {
  return `${prefix}_${randomBytes(18).toString('hex').slice(0, 32)}`;
}

export function nowSeconds(): number {
  return Math.floor(Date.now() / 1000);
}

export function totalOf(session: Session): number {
  return session.lines.reduce((sum, line) => sum + line.unitAmount * line.quantity, 0);
}
