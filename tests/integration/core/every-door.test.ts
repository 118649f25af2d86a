import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import type { AccessScope } from '~/domain/people/access-scopes';
import { staffRoles } from '~/domain/people/roles';
import type { StaffRole } from '~/domain/people/roles';
import { paths } from '~/lib/paths';
import { listDoors } from '~/server/api-routes';
import { newAccessToken } from '~/server/auth/access-tokens';
import { openSession } from '~/server/auth/sessions';
import { tokenHash } from '~/server/auth/tokens';
import { pageRules } from '~/server/doors';
import { passes } from '~/server/rules';
import type { Rule } from '~/server/rules';
import { createAccessToken } from '~/server/services/people/create-access-token';
import { write } from '~/server/write';
import { root } from '../../../src/server/run/root';
import { seedWorks } from '../../factories/catalog';
import { testDatabase } from '../../setup/database';
import { startWebProcesses, type WebProcess } from '../../setup/web-process';
import { seedPerson } from '../../factories/people';
import { callContext } from '../../factories/contexts';
import { readEvents } from './read-events';

const database = testDatabase();
let server: WebProcess | undefined;

beforeAll(async () => {
  [server] = await startWebProcesses(1);
}, 600_000);

afterAll(() => server?.stop());

/** Everybody who can stand before a door: nobody, a buyer, and each role of the works. */
const callers: { who: string; roles: StaffRole[] | null }[] = [
  { who: 'nobody', roles: null },
  { who: 'a buyer', roles: [] },
  ...staffRoles.map((role) => ({ who: `the ${role}`, roles: [role] })),
];
const userIds = new Map<string, number>();

beforeEach(async () => {
  await seedWorks(database.db);
  for (const { who, roles } of callers) {
    if (roles === null) continue;
    const email = `${who.replaceAll(' ', '-')}@works.test`;
    userIds.set(who, await seedPerson(database.db, { email, roles }));
  }
});

/** Asks the server as one of the callers, each time in a session of their own: some doors end it. */
async function ask(who: string, path: string, init: RequestInit = {}): Promise<Response> {
  const url = server?.url ?? '';
  const userId = userIds.get(who);
  const session = userId === undefined ? undefined : await openSession(userId);
  return fetch(new URL(path, url), {
    redirect: 'manual',
    ...init,
    headers: {
      ...(init.method === undefined || init.method === 'GET' ? {} : { origin: url }),
      ...(session === undefined ? {} : { cookie: `${session.name}=${session.value}` }),
      ...Object.fromEntries(new Headers(init.headers)),
    },
  });
}

/** An address of a pattern; nothing with these names is there. */
function addressOf(pattern: string): string {
  return pattern.replaceAll(/\[(?:\.\.\.)?[^\]]+\]/g, '1');
}

function answerOf(rule: Rule, roles: StaffRole[] | null) {
  return passes(rule, roles === null ? null : { roles });
}

function patternsOfPages(): string[] {
  return readdirSync(join(root, 'src/pages'), { recursive: true })
    .map(String)
    .filter((file) => file.endsWith('.astro') || (file.endsWith('.ts') && !file.startsWith('api/')))
    .map((file) => `/${file.replace(/\.(astro|ts)$/, '').replace(/(^|\/)index$/, '')}`)
    .sort();
}

test('every page has a rule, and every rule a page', () => {
  expect(Object.keys(pageRules).sort()).toEqual(patternsOfPages());
});

test('every route of the API is a door with a rule', async () => {
  const { doors, withoutRule } = await listDoors();
  expect(withoutRule).toEqual([]);
  expect(doors.length).toBeGreaterThan(0);
});

describe.each(callers)('as $who', ({ who, roles }) => {
  test('every door of the API answers as its rule says', { timeout: 300_000 }, async () => {
    const { doors } = await listDoors();
    const wrong: string[] = [];
    for (const { pattern, method, description } of doors) {
      if (description.output === 'stream') continue;
      const body = method === 'GET' ? {} : { body: '{}', headers: { 'content-type': 'application/json' } };
      const response = await ask(who, addressOf(pattern), { method, ...body });
      const text = await response.text();
      const expected = answerOf(description.rule, roles);
      const isRight = {
        unsigned: response.status === 401 && text.includes('Sign in first.'),
        forbidden: response.status === 403 && text.includes('Your roles do not open this door.'),
        hidden: response.status === 404 && text.includes('There is nothing here.'),
        yes:
          response.status < 500 &&
          ![401, 403].includes(response.status) &&
          !/There is nothing here|There is no such door/.test(text),
      }[expected];
      if (!isRight) wrong.push(`${method} ${pattern}: ${expected}, but ${response.status} ${text}`);
    }
    expect(wrong).toEqual([]);
  });

  test('every page answers as its rule says', { timeout: 300_000 }, async () => {
    const wrong: string[] = [];
    for (const [pattern, rule] of Object.entries(pageRules)) {
      if (['/404', '/500', '/closed'].includes(pattern)) continue;
      const response = await ask(who, addressOf(pattern), { headers: { accept: 'text/html' } });
      const location = response.headers.get('location') ?? '';
      await response.body?.cancel();
      const expected = answerOf(rule, roles);
      const isRight = {
        unsigned: response.status === 302 && location.startsWith(paths.signIn()),
        forbidden: response.status === 403,
        hidden: response.status === 404,
        yes: response.status < 500 && response.status !== 403 && !location.startsWith(paths.signIn()),
      }[expected];
      if (!isRight) wrong.push(`${pattern}: ${expected}, but ${response.status} ${location}`);
    }
    expect(wrong).toEqual([]);
  });
});

test(
  'no door takes a form of another site, or one with a cookie and no origin',
  { timeout: 300_000 },
  async () => {
    const { doors } = await listDoors();
    const url = server?.url ?? '';
    const wrong: string[] = [];
    for (const { pattern, method } of doors.filter((door) => door.method !== 'GET')) {
      const session = await openSession(userIds.get('the owner') ?? 0);
      for (const origin of ['https://elsewhere.example', null]) {
        const response = await fetch(new URL(addressOf(pattern), url), {
          method,
          redirect: 'manual',
          body: new URLSearchParams({ name: 'x' }),
          headers: {
            cookie: `${session.name}=${session.value}`,
            ...(origin === null ? {} : { origin }),
          },
        });
        const isRight = response.status === 403 && (await response.text()).includes('a page of another site');
        if (!isRight) wrong.push(`${method} ${pattern}: ${response.status}`);
      }
    }
    expect(wrong).toEqual([]);
  },
);

describe('with an access token', () => {
  const bearing = (token: string) => ({ authorization: `Bearer ${token}` });

  async function tokenOf(who: string, scopes: AccessScope[]): Promise<string> {
    const token = newAccessToken();
    const userId = userIds.get(who) ?? 0;
    await createAccessToken(
      { name: 'script', scopes, days: null, tokenHash: tokenHash(token) },
      callContext(database.db, { actor: { kind: 'user', userId } }),
    );
    return token;
  }

  async function walk(
    token: string,
    isRight: (scope: AccessScope | undefined, response: Response) => boolean,
  ) {
    const { doors } = await listDoors();
    const wrong: string[] = [];
    for (const { pattern, method, description } of doors) {
      const body = method === 'GET' ? {} : { body: '{}' };
      const response = await ask('nobody', addressOf(pattern), {
        ...{ method, ...body },
        headers: { ...bearing(token), 'content-type': 'application/json' },
      });
      await response.body?.cancel();
      if (!isRight(description.scope, response)) wrong.push(`${method} ${pattern}: ${response.status}`);
    }
    expect(wrong).toEqual([]);
  }

  test('only doors of its scope open, even to the owner', { timeout: 300_000 }, async () => {
    await walk(await tokenOf('the owner', ['readings:write']), (scope, { status }) =>
      scope === undefined ? status === 403 : status < 500 && ![401, 403].includes(status),
    );
  });

  test('none opens to one without a scope', { timeout: 300_000 }, async () => {
    await walk(await tokenOf('the owner', []), (scope, { status, headers }) => {
      const said = headers.get('www-authenticate')?.startsWith('Bearer error="insufficient_scope"') ?? false;
      return status === 403 && said === (scope !== undefined);
    });
  });

  test('none opens to one that is unknown', { timeout: 300_000 }, async () => {
    await walk(
      'rw_unknown',
      (_, { status, headers }) =>
        status === 401 && headers.get('www-authenticate') === 'Bearer error="invalid_token"',
    );
  });

  test('no page opens', async () => {
    const token = await tokenOf('the owner', ['readings:write']);
    const response = await ask('nobody', paths.works(), { headers: bearing(token) });
    expect(response.headers.get('location')).toContain(paths.signIn());
    await response.body?.cancel();
  });
});

test('a method that a route does not have opens nothing', async () => {
  const { doors } = await listDoors();
  for (const pattern of new Set(doors.map((door) => door.pattern))) {
    const methods = doors.filter((door) => door.pattern === pattern).map(({ method }) => method);
    for (const method of ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'].filter((one) => !methods.includes(one))) {
      const response = await ask('the owner', addressOf(pattern), { method });
      expect(response.status, `${method} ${pattern}`).toBe(404);
      await response.body?.cancel();
    }
  }
});

test('a problem document carries the request id of the answer’s header', async () => {
  const response = await ask('nobody', paths.api.people(), { headers: { 'x-request-id': 'made up' } });
  const id = response.headers.get('x-request-id');
  expect(id).toMatch(/^[0-9a-f-]{36}$/);
  expect(await response.json()).toMatchObject({ status: 401, instance: `urn:rigwright:request:${id}` });
});

test('the description that the server gives holds every door', async () => {
  const response = await ask('nobody', paths.api.openApi());
  const { doors } = await listDoors();
  const description: unknown = await response.json();
  for (const { pattern, method } of doors) {
    const path = pattern.replaceAll(/\[(?:\.\.\.)?([^\]]+)\]/g, '{$1}');
    expect(description).toHaveProperty(['paths', path, method.toLowerCase()]);
  }
});

test.each(callers)('changes are streamed to people of the works only: $who', async ({ who, roles }) => {
  const response = await ask(who, paths.api.live(['unit:1']));
  const mayListen = roles !== null && roles.length > 0;
  expect(response.status).toBe(mayListen ? 200 : roles === null ? 401 : 404);
  await response.body?.cancel();
});

test('a stream tells of a change made elsewhere, and ends when the server is asked to stop', async () => {
  const response = await ask('the builder', paths.api.live(['unit:7']));
  expect(response.headers.get('content-type')).toBe('text/event-stream');
  const events = readEvents(response);
  expect((await events.next()).value).toMatchObject({ event: 'state' });
  await write(callContext(database.db), async (w) => {
    await w.record({ action: 'unit.advance', subjects: [{ type: 'unit', id: 7 }] });
    return null;
  });
  expect((await events.next()).value).toMatchObject({ event: 'change', data: { action: 'unit.advance' } });
  const ended = events.next().then(
    ({ done }) => done,
    () => true,
  );
  await server?.stop();
  expect(await ended).toBe(true);
});
