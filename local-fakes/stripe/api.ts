import { createHash, timingSafeEqual } from 'node:crypto';
import type { IncomingMessage } from 'node:http';
import { z } from 'zod';
import { json, readBody, type Answer } from '../http';
import { Fault, invalid, missing } from './fault';
import { parseForm, type FormValue } from './form-body';
import { paymentIntentObject, refundObject, sessionObject, type Expansions } from './objects';
import { sessionFromParams } from './session-params';
import { find, type Payment, type Store } from './state';
import type { Till } from './till';

const refundSchema = z
  .object({
    payment_intent: z.string().optional(),
    charge: z.string().optional(),
    amount: z
      .string()
      .regex(/^[1-9]\d{0,11}$/)
      .transform(Number)
      .optional(),
    reason: z.enum(['duplicate', 'fraudulent', 'requested_by_customer']).optional(),
    metadata: z.record(z.string()).default({}),
  })
  .strict();

interface Context {
  store: Store;
  till: Till;
  apiKey: string;
  baseUrl: string;
}

type Params = Record<string, FormValue>;

/** `a.b` expands `a` as well. */
function expansionsOf(params: Params): Expansions {
  const paths = Array.isArray(params['expand']) ? params['expand'] : [];
  return new Set(
    paths.flatMap((path) => {
      const parts = typeof path === 'string' ? path.split('.') : [];
      return parts.map((_, index) => parts.slice(0, index + 1).join('.'));
    }),
  );
}

function isAuthorised(request: IncomingMessage, apiKey: string): boolean {
  const digest = (text: string) => createHash('sha256').update(text).digest();
  return timingSafeEqual(digest(request.headers.authorization ?? ''), digest(`Bearer ${apiKey}`));
}

function unauthorised(): Answer {
  return json(401, {
    error: {
      type: 'invalid_request_error',
      message: 'Invalid API Key provided: the stand-in has another one',
    },
  });
}

function createRefund({ store, till }: Context, params: Params): unknown {
  const parsed = refundSchema.safeParse(params);
  if (!parsed.success) {
    const param = parsed.error.issues[0]?.path.join('.');
    throw invalid(`Invalid parameters of a refund: ${param ?? ''}`, param);
  }
  const { payment_intent: intent, charge, amount, reason, metadata } = parsed.data;
  const payments: Payment[] = Object.values(store.state.payments);
  const payment = payments.find((item) => (intent ? item.id === intent : item.chargeId === charge));
  if (!payment) {
    if (intent) throw missing('payment_intent', intent, 'payment_intent');
    if (charge) throw missing('charge', charge, 'charge');
    throw invalid(
      'One of the following params should be provided for this request: payment_intent or charge.',
    );
  }
  const { refund, told } = till.refund(payment, amount ?? null, reason ?? null, metadata);
  void told;
  return refundObject(store, refund);
}

function answerPost(context: Context, path: string, params: Params): unknown {
  const { store, till, baseUrl } = context;
  if (path === '/v1/checkout/sessions') {
    const session = sessionFromParams(params);
    store.state.sessions[session.id] = session;
    return sessionObject(store, session, baseUrl, expansionsOf(params));
  }
  const expired = /^\/v1\/checkout\/sessions\/([^/]+)\/expire$/.exec(path)?.[1];
  if (expired !== undefined) {
    const session = find(store.state.sessions, expired);
    if (!session) throw missing('checkout.session', expired, 'session');
    void till.expire(session);
    return sessionObject(store, session, baseUrl, expansionsOf(params));
  }
  if (path === '/v1/refunds') return createRefund(context, params);
  throw unrecognised('POST', path);
}

function answerGet({ store, baseUrl }: Context, path: string, params: Params): unknown {
  const [, kind, id = ''] = /^\/v1\/(checkout\/sessions|payment_intents|events)\/([^/]+)$/.exec(path) ?? [];
  if (kind === 'checkout/sessions') {
    const session = find(store.state.sessions, id);
    if (!session) throw missing('checkout.session', id, 'session');
    return sessionObject(store, session, baseUrl, expansionsOf(params));
  }
  if (kind === 'payment_intents') {
    const payment = find(store.state.payments, id);
    if (!payment) throw missing('payment_intent', id, 'intent');
    return paymentIntentObject(store, payment, expansionsOf(params));
  }
  if (kind === 'events') {
    const event = find(store.state.events, id);
    if (!event) throw missing('event', id);
    return JSON.parse(event.body);
  }
  throw unrecognised('GET', path);
}

function unrecognised(method: string, path: string): Fault {
  return new Fault(404, {
    type: 'invalid_request_error',
    message: `Unrecognized request URL (${method}: ${path}).`,
  });
}

/**
 * A repeated key gives the first answer again; a key used for something else is an error. A refused request
 * leaves no trace, so that it may be mended and sent under the same key.
 */
function once(context: Context, key: string, path: string, body: string): Answer {
  if (key.length > 255) throw invalid('Idempotency keys may be at most 255 characters long.');
  const { idempotency } = context.store.state;
  const fingerprint = createHash('sha256').update(`${path}\n${body}`).digest('hex');
  const known = find(idempotency, key);
  if (known) {
    if (known.fingerprint !== fingerprint) {
      throw new Fault(400, {
        type: 'idempotency_error',
        message: `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${key}' if you meant to execute a different request.`,
      });
    }
    return { ...json(known.status, null, { 'idempotent-replayed': 'true' }), body: known.body };
  }
  const answer = json(200, answerPost(context, path, parseForm(body)));
  idempotency[key] = { fingerprint, status: 200, body: String(answer.body) };
  return answer;
}

/** Answers a request under `/v1`. */
export async function answerApi(context: Context, request: IncomingMessage, url: URL): Promise<Answer> {
  if (!isAuthorised(request, context.apiKey)) return unauthorised();
  try {
    if (request.method === 'GET') {
      return json(200, answerGet(context, url.pathname, parseForm(url.search)));
    }
    if (request.method !== 'POST') throw unrecognised(String(request.method), url.pathname);
    const body = await readBody(request);
    const key = request.headers['idempotency-key'];
    const answer =
      typeof key === 'string' && key !== ''
        ? once(context, key, url.pathname, body)
        : json(200, answerPost(context, url.pathname, parseForm(body)));
    context.store.save();
    return answer;
  } catch (error) {
    if (error instanceof Fault) return error.answer();
    throw error;
  }
}
