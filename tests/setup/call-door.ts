import type { APIContext } from 'astro';
import { createContext } from 'astro/middleware';
import type { Access } from '~/server/auth/access-tokens';
import type { SignedIn } from '~/server/auth/sessions';
import { db } from '~/server/db/client';
import type { Door } from '~/server/door';
import { someDay } from '../factories/contexts';

interface Call {
  method?: string;
  path?: string;
  params?: Record<string, string>;
  headers?: Record<string, string>;
  body?: string | FormData | URLSearchParams;
  person?: SignedIn | null;
  access?: Access | null;
  now?: Date;
}

/** What a browser sends with a page's own form. */
export const browser = {
  accept: 'text/html,application/xhtml+xml',
  origin: 'http://localhost:4321',
  referer: 'http://localhost:4321/works/people?page=2',
};

/** Calls a door as the middleware would, without a server around it. */
export async function callDoor(
  door: Door,
  {
    method = 'POST',
    path = '/api/tests',
    params = {},
    headers = {},
    body,
    person = null,
    access = null,
    now = someDay,
  }: Call = {},
): Promise<{ response: Response; cookies: APIContext['cookies'] }> {
  const url = new URL(path, 'http://localhost:4321');
  const request = new Request(url, { method, headers: { host: url.host, ...headers }, body: body ?? null });
  const context = createContext({
    request,
    params,
    defaultLocale: 'en',
    locals: {
      requestId: 'request-1',
      person,
      access,
      db: db(),
      now,
      works: { name: 'Works', timeZone: 'UTC', currency: 'EUR', country: 'XX' },
      use: null,
      said: null,
      formReturn: null,
    },
  });
  return { response: await door(context), cookies: context.cookies };
}

export function sendJson(body: unknown, headers: Record<string, string> = {}) {
  return { body: JSON.stringify(body), headers: { 'content-type': 'application/json', ...headers } };
}

/** A problem document's fields that a test looks at. */
export async function problemIn(response: Response): Promise<Record<string, unknown>> {
  if (response.headers.get('content-type') !== 'application/problem+json') {
    throw new Error(`Not a problem document: ${response.status} ${await response.text()}`);
  }
  return JSON.parse(await response.text()) as Record<string, unknown>;
}
