import { createHmac } from 'node:crypto';
import { newId, nowSeconds, type Session, type Store, type StoredEvent } from './state';

/** The version that the installed SDK speaks; events say by which they were written. */
const API_VERSION = '2026-10-28.endive';
const ATTEMPT_TIMEOUT_MS = 10_000;

interface Endpoint {
  url: string;
  secret: string;
  /** Pauses before the second, third, … attempt; then it is given up until the next start. */
  retryDelaysMs: readonly number[];
}

/** Keeps events and sends them to the application's endpoint, signed, until it takes them. */
export class Courier {
  readonly #store: Store;
  readonly #endpoint: Endpoint;
  readonly #timers = new Set<NodeJS.Timeout>();
  readonly #stopping = new AbortController();

  constructor(store: Store, endpoint: Endpoint) {
    this.#store = store;
    this.#endpoint = endpoint;
  }

  /**
   * Writes an event about `session` and begins to send it. Resolves after the first attempt, as the
   * provider's own page waits a little for the webhook before it sends the buyer on.
   */
  async emit(type: string, session: Session, object: Record<string, unknown>): Promise<void> {
    const id = newId('evt');
    const created = nowSeconds();
    const body = JSON.stringify(
      {
        id,
        object: 'event',
        api_version: API_VERSION,
        created,
        data: { object },
        livemode: false,
        pending_webhooks: 1,
        request: { id: null, idempotency_key: null },
        type,
      },
      null,
      2,
    );
    const { hold } = this.#store.state;
    const event: StoredEvent = {
      id,
      type,
      created,
      sessionId: session.id,
      body,
      attempts: [],
      state: hold ? 'held' : 'waiting',
    };
    this.#store.state.events[id] = event;
    this.#store.save();
    if (!hold) await this.#attempt(event, 0);
  }

  /** Sends what an earlier run could not; a held event stays held. */
  resume(): void {
    for (const event of Object.values(this.#store.state.events)) {
      if (event.state === 'waiting' || event.state === 'given_up') this.#later(event, 0, 0);
    }
  }

  /** Sends the same event `times` more at once, side by side, each signed anew; `delayS` seconds from now. */
  async sendAgain(event: StoredEvent, times: number, delayS: number): Promise<void> {
    if (delayS > 0) {
      for (let n = 0; n < times; n += 1) this.#later(event, 0, delayS * 1000);
      return;
    }
    await Promise.all(Array.from({ length: times }, () => this.#attempt(event, 0)));
  }

  /** One after the other in the order given. */
  async sendInOrder(events: readonly StoredEvent[]): Promise<void> {
    for (const event of events) await this.#attempt(event, 0);
  }

  close(): void {
    this.#stopping.abort();
    for (const timer of this.#timers) clearTimeout(timer);
    this.#timers.clear();
  }

  #isStopping(): boolean {
    return this.#stopping.signal.aborted;
  }

  #later(event: StoredEvent, attempt: number, delayMs: number): void {
    const timer = setTimeout(() => {
      this.#timers.delete(timer);
      void this.#attempt(event, attempt);
    }, delayMs);
    this.#timers.add(timer);
  }

  async #attempt(event: StoredEvent, attempt: number): Promise<void> {
    if (this.#isStopping()) return;
    if (event.state !== 'delivered') event.state = 'waiting';
    const status = await this.#post(event.body);
    if (this.#isStopping()) return;
    event.attempts.push({ at: Date.now(), status });
    if (status !== null && status >= 200 && status < 300) {
      event.state = 'delivered';
    } else {
      const delayMs = this.#endpoint.retryDelaysMs[attempt];
      if (delayMs !== undefined) this.#later(event, attempt + 1, delayMs);
      else if (event.state !== 'delivered') event.state = 'given_up';
    }
    this.#store.save();
  }

  /** The status that the endpoint answered, or null where there was no answer. */
  async #post(body: string): Promise<number | null> {
    const time = nowSeconds();
    const signature = createHmac('sha256', this.#endpoint.secret).update(`${time}.${body}`).digest('hex');
    try {
      const response = await fetch(this.#endpoint.url, {
        method: 'POST',
        redirect: 'manual',
        headers: {
          'content-type': 'application/json; charset=utf-8',
          'stripe-signature': `t=${time},v1=${signature}`,
          'user-agent': 'Stripe/1.0 (local stand-in)',
        },
        body,
        signal: AbortSignal.any([this.#stopping.signal, AbortSignal.timeout(ATTEMPT_TIMEOUT_MS)]),
      });
      await response.arrayBuffer();
      return response.status;
    } catch {
      return null;
    }
  }
}
