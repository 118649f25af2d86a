import { createServer, type IncomingMessage } from 'node:http';
import { inspect } from 'node:util';
import { isForeign, json, listen, readBody, redirect, send, stop, styleSheet, type Answer } from '../http';
import { assertLoopback } from '../loopback';
import { answerApi } from './api';
import { answerControl, controlJson } from './control';
import { controlPage } from './control-page';
import { Courier } from './deliver';
import { Fault } from './fault';
import { closedPage, nothingHere, payPage } from './pay-page';
import { find, Store } from './state';
import { Till } from './till';

interface StripeFakeOptions {
  /** 0 takes a free one. Listens on 127.0.0.1 only. */
  port: number;
  /** Where events go: the application's own webhook address, which must be on this machine. */
  webhookUrl: string;
  webhookSecret: string;
  /** A test key, `sk_test_…`; a live one is refused. */
  apiKey: string;
  /** Keeps sessions, payments and events over a restart. */
  dataFile?: string;
  /** Pauses between attempts to deliver an event, in ms; about two minutes together if not given. */
  retryDelaysMs?: readonly number[];
}

interface RunningFake {
  /** Without a slash at the end. */
  url: string;
  close(): Promise<void>;
}

const RETRY_DELAYS_MS = [500, 1_000, 2_000, 4_000, 8_000, 16_000, 30_000, 60_000];
const EXPIRY_CHECK_MS = 5_000;

/**
 * Starts a stand-in for Stripe that speaks its HTTP as the SDK uses it, with a page to pay on (`/pay/…`) and
 * one to try what a provider does (`/control`).
 *
 * @throws {Error} when the application is not on this machine or the key is not a test key.
 */
export async function startStripeFake(options: StripeFakeOptions): Promise<RunningFake> {
  assertLoopback('the address for its events', options.webhookUrl);
  if (!/^[sr]k_test_/.test(options.apiKey)) {
    throw new Error(
      'The payment stand-in takes test keys only (sk_test_…); a live key belongs to the provider.',
    );
  }
  let url = '';
  const store = new Store(options.dataFile);
  const courier = new Courier(store, {
    url: options.webhookUrl,
    secret: options.webhookSecret,
    retryDelaysMs: options.retryDelaysMs ?? RETRY_DELAYS_MS,
  });
  const till = new Till(store, courier, () => url);

  async function answerPay(request: IncomingMessage, id: string): Promise<Answer> {
    till.expireDue();
    const session = find(store.state.sessions, id);
    if (!session) return nothingHere();
    if (request.method !== 'POST') {
      return session.status === 'open' ? payPage(session, null) : closedPage(session);
    }
    const form = new URLSearchParams(await readBody(request));
    if (form.get('action') === 'cancel') return redirect(session.cancelUrl ?? `/pay/${id}`);
    if (session.status !== 'open') return closedPage(session);
    const number = form.get('number') ?? '';
    try {
      if (form.get('method') === 'debit') await till.payByDebit(session);
      else await till.payByCard(session, number);
    } catch (error) {
      if (!(error instanceof Fault)) throw error;
      return payPage(session, { message: error.message, number });
    }
    return redirect(session.successUrl.replaceAll('{CHECKOUT_SESSION_ID}', session.id));
  }

  async function answer(request: IncomingMessage): Promise<Answer> {
    const target = new URL(request.url ?? '/', url);
    const wantsJson = request.headers.accept?.includes('application/json') ?? false;
    if (isForeign(request)) return json(403, { error: { message: 'Asked from another site' } });
    if (target.pathname.startsWith('/v1/')) {
      till.expireDue();
      return answerApi({ store, till, apiKey: options.apiKey, baseUrl: url }, request, target);
    }
    const paid = /^\/pay\/([^/]+)$/.exec(target.pathname)?.[1];
    if (paid !== undefined) return answerPay(request, paid);
    if (target.pathname === '/control' && request.method === 'POST') {
      return answerControl({ store, till, courier }, await readBody(request), wantsJson);
    }
    if (target.pathname === '/control') return wantsJson ? controlJson(store) : controlPage(store, null);
    if (target.pathname === '/page.css') return styleSheet();
    if (target.pathname === '/') return redirect('/control');
    return nothingHere();
  }

  const server = createServer((request, response) => {
    answer(request).then(
      (made) => {
        send(response, made);
      },
      (error: unknown) => {
        process.stderr.write(`The payment stand-in failed: ${inspect(error)}\n`);
        send(response, json(500, { error: { type: 'api_error', message: 'The stand-in failed' } }));
      },
    );
  });
  url = await listen(server, options.port);
  courier.resume();
  const expiry = setInterval(() => {
    till.expireDue();
  }, EXPIRY_CHECK_MS);
  expiry.unref();

  return {
    url,
    async close() {
      clearInterval(expiry);
      courier.close();
      await stop(server);
    },
  };
}
