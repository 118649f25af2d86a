import { createHash, createHmac } from 'node:crypto';
import type { APIContext, APIRoute } from 'astro';
import type { z } from 'zod';
import type { AccessScope } from '~/domain/people/access-scopes';
import { paths } from '~/lib/paths';
import { sessionCookieName } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { db } from '~/server/db/client';
import { env } from '~/server/env';
import { DomainError, problemOf } from '~/server/errors';
import type { FieldErrors } from '~/server/errors';
import { log } from '~/server/log';
import type { CallContext } from '~/server/write';
import { formFields, readBody } from './body';
import { formReturnCookie, keepForm } from './form-return';
import { passes } from './rules';
import type { Rule } from './rules';

/** Bytes instead of JSON: a PDF, a photo. */
export interface FileAnswer {
  bytes: Uint8Array<ArrayBuffer>;
  mediaType: string;
  fileName: string;
  inline?: boolean;
}

export interface DoorCall<Params, Query, Input> {
  params: Params;
  query: Query;
  input: Input;
  /** Null only where the rule lets anyone pass. */
  person: SignedIn | null;
  ctx: CallContext;
  /** For the session's own doors and for streams. */
  api: APIContext;
  /** The body as it came; only where `raw` is asked for. */
  rawBody: string;
}

interface DoorSpec<
  P extends z.ZodTypeAny,
  Q extends z.ZodTypeAny,
  I extends z.ZodTypeAny,
  O extends z.ZodTypeAny,
> {
  rule: Rule;
  /** Opens the door to access tokens of this scope too; without it, to none. */
  scope?: AccessScope;
  /** One line for the API's description. */
  summary: string;
  params?: P;
  query?: Q;
  input?: I;
  /** `file`: bytes; `stream`: a Response of its own. */
  output: O | 'file' | 'stream';
  /** Of the body; 64 KiB unless the door needs more. */
  maxBytes?: number;
  /** The body is not parsed but handed over as text (for signatures over it). */
  raw?: boolean;
  /** Where a plain HTML form goes on when it was done; its own page unless given. */
  next?: (output: z.output<O>, call: { params: z.output<P>; input: z.output<I> }) => string;
  /** The sentence that the page says afterwards. */
  said?: (output: z.output<O>) => string;
  run: (call: DoorCall<z.output<P>, z.output<Q>, z.output<I>>) => Promise<z.input<O> | FileAnswer | Response>;
}

/** What the API's description and the tests read off a door. */
export interface DoorDescription {
  rule: Rule;
  scope: AccessScope | undefined;
  summary: string;
  params: z.ZodTypeAny | undefined;
  query: z.ZodTypeAny | undefined;
  input: z.ZodTypeAny | undefined;
  output: z.ZodTypeAny | 'file' | 'stream';
  /** Of the body. */
  maxBytes: number;
  /** The body is taken as text, whatever it is. */
  raw: boolean;
}

export type Door = APIRoute & { description: DoorDescription };

const safeMethods = new Set(['GET', 'HEAD']);
const defaultMaxBytes = 64 * 1024;

/**
 * Makes one API route: who may pass, Zod in, one service or query or document, Zod out. JSON for islands
 * and scripts; plain HTML forms are redirected, with what is wrong shown on their page.
 */
export function door<
  P extends z.ZodTypeAny = z.ZodUndefined,
  Q extends z.ZodTypeAny = z.ZodUndefined,
  I extends z.ZodTypeAny = z.ZodUndefined,
  O extends z.ZodTypeAny = z.ZodTypeAny,
>(spec: DoorSpec<P, Q, I, O>): Door {
  const route: APIRoute = async (api) => {
    const form = { data: undefined as FormData | undefined };
    try {
      checkOrigin(api);
      checkAccess(spec.scope, api);
      checkRule(spec.rule, api.locals.person);
      const raw = await readRequest(api, spec, form);
      const params = parse(spec.params, api.params, 'The address');
      const query = parse(spec.query, queryFields(api.url), 'The address');
      const input = parse(spec.input, raw.fields, 'What was sent');
      const ctx = callContext(api, form.data, raw.text);
      const result = await spec.run({
        params,
        query,
        input,
        person: api.locals.person,
        ctx,
        api,
        rawBody: raw.text,
      });
      if (result instanceof Response) return result;
      if (spec.output === 'file' || spec.output === 'stream') return fileResponse(result);
      // A schema's output is its own inferred type; Zod's generic signature loses it.
      const output = spec.output.parse(result) as z.output<O>;
      if (form.data === undefined || !wantsPage(api.request)) return Response.json(output ?? null);
      if (spec.said !== undefined) saySo(api, spec.said(output));
      return seeOther(spec.next?.(output, { params, input }) ?? pageOf(api));
    } catch (error) {
      return refusal(api, error, form.data, spec.scope);
    }
  };
  const {
    rule,
    scope,
    summary,
    params,
    query,
    input,
    output,
    maxBytes = defaultMaxBytes,
    raw = false,
  } = spec;
  return Object.assign(route, {
    description: { rule, scope, summary, params, query, input, output, maxBytes, raw },
  });
}

function checkOrigin({ request, cookies }: APIContext): void {
  if (safeMethods.has(request.method)) return;
  const origin = request.headers.get('origin');
  const refused = new DomainError('forbidden', 'This was sent from a page of another site.');
  if (origin === null) {
    // Scripts send no Origin and no cookie; browsers send an Origin with every unsafe method.
    if (cookies.has(sessionCookieName)) throw refused;
    return;
  }
  if (!URL.canParse(origin) || new URL(origin).host !== request.headers.get('host')) throw refused;
}

/** Roles are asked all the same: a token opens no more than its person may. */
function checkAccess(scope: AccessScope | undefined, { locals: { access } }: APIContext): void {
  if (access === null) return;
  if (!access.ok) throw new DomainError('unsigned', access.reason);
  if (scope === undefined) throw new DomainError('forbidden', 'This door does not open to access tokens.');
  if (!access.scopes.includes(scope)) {
    throw new DomainError(
      'forbidden',
      `This access token has not the scope ${scope}. Make one that has it, on the page of your tokens.`,
    );
  }
}

/** What a script is told of tokens, as RFC 6750 has it; null where tokens are beside the point. */
function challengeOf(scope: AccessScope | undefined, { locals }: APIContext, status: number): string | null {
  const { access } = locals;
  if (status === 401) {
    if (access !== null) return 'Bearer error="invalid_token"';
    return scope === undefined ? null : `Bearer scope="${scope}"`;
  }
  if (status !== 403 || access?.ok !== true || scope === undefined || access.scopes.includes(scope)) {
    return null;
  }
  return `Bearer error="insufficient_scope", scope="${scope}"`;
}

function checkRule(rule: Rule, person: SignedIn | null): void {
  const answer = passes(rule, person);
  if (answer === 'unsigned') throw new DomainError('unsigned', 'Sign in first.');
  if (answer === 'forbidden') throw new DomainError('forbidden', 'Your roles do not open this door.');
  if (answer === 'hidden') throw new DomainError('not_found', 'There is nothing here.');
}

async function readRequest(
  api: APIContext,
  spec: { maxBytes?: number; raw?: boolean; input?: z.ZodTypeAny },
  form: { data: FormData | undefined },
): Promise<{ fields: unknown; text: string }> {
  if (safeMethods.has(api.request.method)) return { fields: undefined, text: '' };
  const bytes = await readBody(api.request, spec.maxBytes ?? defaultMaxBytes);
  const type = api.request.headers.get('content-type') ?? '';
  if (spec.raw === true) return { fields: undefined, text: new TextDecoder().decode(bytes) };
  if (/^(application\/x-www-form-urlencoded|multipart\/form-data)/i.test(type)) {
    form.data = await new Response(bytes, { headers: { 'content-type': type } }).formData().catch(() => {
      throw new DomainError('invalid', 'The form could not be read.');
    });
    return { fields: formFields(form.data), text: await formDigest(form.data) };
  }
  const text = new TextDecoder().decode(bytes);
  if (spec.input === undefined || text === '') return { fields: undefined, text };
  if (!/^application\/(.+\+)?json/i.test(type)) {
    throw new DomainError('invalid', 'Send a form or application/json.');
  }
  try {
    return { fields: JSON.parse(text), text };
  } catch {
    throw new DomainError('invalid', 'The body is not JSON.');
  }
}

/** Of what a form holds: a multipart body differs at every sending, by its boundary. */
async function formDigest(form: FormData): Promise<string> {
  const digest = createHash('sha256');
  for (const [name, value] of form) {
    const isText = typeof value === 'string';
    const content = isText ? value : Buffer.from(await value.arrayBuffer());
    const kind = isText ? 'text' : `file ${value.type} ${value.name}`;
    const field = [name, kind, createHash('sha256').update(content).digest('hex')];
    digest.update(JSON.stringify(field));
  }
  return digest.digest('hex');
}

function queryFields(url: URL): Record<string, unknown> {
  const fields: Record<string, unknown> = {};
  for (const name of new Set(url.searchParams.keys())) {
    const values = url.searchParams.getAll(name);
    fields[name] = values.length === 1 ? values[0] : values;
  }
  return fields;
}

function parse<S extends z.ZodTypeAny>(schema: S | undefined, value: unknown, what: string): z.output<S> {
  const parsed = schema === undefined ? { success: true as const, data: undefined } : schema.safeParse(value);
  // As above.
  if (parsed.success) return parsed.data as z.output<S>;
  const fields: FieldErrors = {};
  for (const issue of parsed.error.issues) fields[issue.path.join('.')] ??= issue.message;
  const [first] = parsed.error.issues;
  throw new DomainError(
    'invalid',
    `${what} cannot be used: ${first?.message ?? 'it is not understood.'}`,
    fields,
  );
}

function callContext(api: APIContext, form: FormData | undefined, body: string): CallContext {
  const { person, access, now, requestId } = api.locals;
  const formKey = form?.get('_key');
  const key = api.request.headers.get('idempotency-key') ?? (typeof formKey === 'string' ? formKey : null);
  const ctx: CallContext = {
    db: db(),
    now,
    requestId,
    actor:
      person === null
        ? { kind: 'visitor' }
        : {
            kind: 'user',
            userId: person.id,
            ...(access?.ok === true ? { accessTokenId: access.tokenId } : {}),
          },
  };
  if (key === null || safeMethods.has(api.request.method)) return ctx;
  if (!/^[\x21-\x7e]{1,200}$/.test(key)) {
    throw new DomainError('invalid', 'An Idempotency-Key has 1 to 200 visible ASCII characters.');
  }
  const route = `${api.request.method} ${api.url.pathname}`.slice(0, 200);
  // Keyed, because a body may hold a password, and this is kept.
  const requestHash = createHmac('sha256', env().secret).update(body).digest('hex');
  const actor = person === null ? 'visitor' : `user:${person.id}`;
  return { ...ctx, idempotency: { actor, route, key, requestHash, steps: 0 } };
}

function fileResponse(answer: unknown): Response {
  if (!isFileAnswer(answer)) throw new Error('A file door gave something else.');
  const disposition = answer.inline === true ? 'inline' : 'attachment';
  return new Response(answer.bytes, {
    headers: {
      'content-type': answer.mediaType,
      'content-length': String(answer.bytes.byteLength),
      'content-disposition': `${disposition}; filename*=UTF-8''${encodeURIComponent(answer.fileName)}`,
      'x-content-type-options': 'nosniff',
      'content-security-policy': "default-src 'none'; sandbox",
      'cache-control': 'private, no-cache',
    },
  });
}

function isFileAnswer(answer: unknown): answer is FileAnswer {
  return (
    typeof answer === 'object' && answer !== null && 'bytes' in answer && answer.bytes instanceof Uint8Array
  );
}

function wantsPage(request: Request): boolean {
  return request.headers.get('accept')?.includes('text/html') ?? false;
}

/** The page on which a form stood: the Referer, where it is one of ours. */
function pageOf({ request }: APIContext): string {
  const referer = request.headers.get('referer');
  if (referer === null || !URL.canParse(referer)) return '/';
  const url = new URL(referer);
  return url.host === request.headers.get('host') ? `${url.pathname}${url.search}` : '/';
}

function seeOther(location: string): Response {
  return new Response(null, { status: 303, headers: { location } });
}

const noteCookie = { path: '/', secure: true, httpOnly: true, sameSite: 'lax', maxAge: 1800 } as const;

/** The cookie that carries one sentence to the next page. */
export const saidCookie = '__Host-said';

function saySo({ cookies }: APIContext, sentence: string): void {
  cookies.set(saidCookie, sentence, noteCookie);
}

async function refusal(
  api: APIContext,
  error: unknown,
  form: FormData | undefined,
  scope: AccessScope | undefined,
): Promise<Response> {
  const { requestId, now } = api.locals;
  if (!(error instanceof DomainError)) log.error({ err: error, requestId }, 'a door failed');
  const problem = problemOf(error, requestId);
  if (form !== undefined && wantsPage(api.request)) {
    if (problem.status === 401) return seeOther(paths.signIn(pageOf(api)));
    const page = pageOf(api);
    const token = await keepForm(db(), new URL(page, api.url).pathname, form, problem, now);
    api.cookies.set(formReturnCookie, token, noteCookie);
    return seeOther(page);
  }
  const challenge = challengeOf(scope, api, problem.status);
  return new Response(JSON.stringify(problem), {
    status: problem.status,
    headers: {
      'content-type': 'application/problem+json',
      ...(challenge === null ? {} : { 'www-authenticate': challenge }),
    },
  });
}
