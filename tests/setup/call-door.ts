import type { APIContext } from 'astro';
import type { SignedIn } from '~/server/auth/sessions';
import type { Door } from '~/server/door';
import { db } from '~/server/db/client';

interface Call {
  method?: string;
  path: string;
  params?: Record<string, string>;
  headers?: Record<string, string>;
  body?: string;
  person?: SignedIn | null;
  now?: Date;
}

/** Calls a door as the application does, without the pages around it. */
export async function callDoor(door: Door, call: Call): Promise<Response> {
  const url = new URL(call.path, 'http://localhost:4321');
  const jar = new Map<string, string>();
  const context = {
    url,
    params: call.params ?? {},
    request: new Request(url, {
      method: call.method ?? 'POST',
      headers: { host: url.host, ...call.headers },
      ...(call.body === undefined ? {} : { body: call.body }),
    }),
    cookies: {
      has: (name: string) => jar.has(name),
      set: (name: string, value: string) => jar.set(name, value),
    },
    locals: { person: call.person ?? null, now: call.now ?? new Date(), requestId: 'test', db: db() },
  };
  // The door reads only these of what Astro gives it.
  const answer: unknown = await door(context as unknown as APIContext);
  if (!(answer instanceof Response)) throw new Error('A door gave no response.');
  return Object.assign(answer, { formCookie: jar.get('__Host-form') });
}

export function sendJson(body: unknown, headers: Record<string, string> = {}) {
  return { body: JSON.stringify(body), headers: { 'content-type': 'application/json', ...headers } };
}
