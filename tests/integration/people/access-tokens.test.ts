import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { z } from 'zod';
import { accessOf, bearerOf } from '~/server/auth/access-tokens';
import type { Access } from '~/server/auth/access-tokens';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { accessTokens, idempotencyKeys, ledgerEntries, users } from '~/server/db/schema';
import { door } from '~/server/door';
import { listAccessTokens } from '~/server/queries/people/list-access-tokens';
import { anyone, staff } from '~/server/rules';
import { createAccessToken } from '~/server/services/people/create-access-token';
import { POST as createDoor } from '~/pages/api/access-tokens/index';
import { POST as revokeDoor } from '~/pages/api/access-tokens/[id]/revoking';
import { callAs } from '../../factories/bench';
import { someDay } from '../../factories/contexts';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let tester: SignedIn;

beforeEach(async () => {
  const id = await seedPerson(database.db, { name: 'Ines Aldous', roles: ['tester'] });
  tester = await person(id);
});

async function person(id: number): Promise<SignedIn> {
  const found = await letIn(id);
  if (found === null) throw new Error('The person is shut out.');
  return found;
}

const made = z.object({ tokenId: z.number(), token: z.string() });

async function makeToken(more: Record<string, unknown> = {}) {
  const { response } = await callDoor(createDoor, {
    person: tester,
    ...sendJson({ name: 'bench PC', scopes: ['readings:write'], ...more }),
  });
  expect(response.status).toBe(200);
  return made.parse(await response.json());
}

async function rows() {
  return database.db.select().from(accessTokens);
}

const minutes = (count: number) => new Date(someDay.getTime() + count * 60_000);

describe('making one', () => {
  test('shows it once and keeps only its hash, anywhere in the database', async () => {
    const { token } = await makeToken();
    expect(token).toMatch(/^rw_[\w-]{43}$/);
    const kept = JSON.stringify([
      await rows(),
      await database.db.select().from(ledgerEntries),
      await database.db.select().from(idempotencyKeys),
    ]);
    expect(kept).not.toContain(token);
    const [row] = await rows();
    expect(row).toMatchObject({ name: 'bench PC', userId: tester.id, expiresAt: null });
    expect(row?.tokenHash).toMatch(/^[0-9a-f]{64}$/);
  });

  test('asked for twice under one key makes one, and does not show it again', async () => {
    const call = {
      person: tester,
      ...sendJson({ name: 'bench PC', scopes: ['readings:write'] }, { 'idempotency-key': 'once' }),
    };
    expect((await callDoor(createDoor, call)).response.status).toBe(200);
    const { response } = await callDoor(createDoor, call);
    expect(await problemIn(response)).toMatchObject({ status: 409 });
    expect(await rows()).toHaveLength(1);
    expect(JSON.stringify(await database.db.select().from(idempotencyKeys))).not.toContain('rw_');
  });

  test('by the page’s own form says the token on the page that follows', async () => {
    const { response, cookies } = await callDoor(createDoor, {
      person: tester,
      headers: browser,
      body: new URLSearchParams({ name: 'bench PC', scopes: 'readings:write', days: '90' }),
    });
    expect(response.status).toBe(303);
    expect(cookies.get('__Host-said')?.value).toMatch(/The token is rw_[\w-]{43} — copy it now/);
    const [row] = await rows();
    expect(row?.expiresAt).toEqual(new Date(someDay.getTime() + 90 * 24 * 3600_000));
  });

  test.each([
    [{ name: ' ' }, 'name'],
    [{ scopes: [] }, 'scopes'],
    [{ scopes: ['everything'] }, 'scopes.0'],
    [{ days: 0 }, 'days'],
  ])('%j is refused at its field', async (change, field) => {
    const { response } = await callDoor(createDoor, {
      person: tester,
      ...sendJson({ name: 'bench PC', scopes: ['readings:write'], ...change }),
    });
    expect((await problemIn(response))['fields']).toHaveProperty([field]);
    expect(await rows()).toEqual([]);
  });

  test('is for people of the works', async () => {
    const buyer = await person(await seedPerson(database.db, { name: 'Q0ABC' }));
    const input = sendJson({ name: 'x', scopes: ['readings:write'] });
    expect((await callDoor(createDoor, { ...input, person: buyer })).response.status).toBe(404);
    expect((await callDoor(createDoor, input)).response.status).toBe(401);
  });
});

describe('revoking one', () => {
  test('ends it at once, and only its own person can', async () => {
    const { tokenId, token } = await makeToken();
    const other = await person(await seedPerson(database.db, { name: 'Ruth Osei', roles: ['owner'] }));
    const revoke = (who: SignedIn) => callDoor(revokeDoor, { params: { id: String(tokenId) }, person: who });
    expect((await revoke(other)).response.status).toBe(404);
    expect(await accessOf(token, someDay)).toMatchObject({ ok: true });
    expect((await revoke(tester)).response.status).toBe(200);
    expect(await accessOf(token, someDay)).toMatchObject({ ok: false });
    expect((await revoke(tester)).response.status).toBe(409);
    const actions = (await database.db.select().from(ledgerEntries)).map(({ action }) => action);
    expect(actions).toEqual(['token.create', 'token.revoke']);
  });
});

describe('what a bearer token stands for', () => {
  test('a person with their roles of this moment, and the token’s scopes', async () => {
    const { tokenId, token } = await makeToken();
    expect(await accessOf(token, someDay)).toEqual({
      ok: true,
      tokenId,
      scopes: ['readings:write'],
      person: tester,
    });
    await database.db.update(users).set({ disabledAt: someDay }).where(eq(users.id, tester.id));
    expect(await accessOf(token, someDay)).toEqual({
      ok: false,
      reason: 'The person of this access token is no longer let in.',
    });
  });

  test('nothing once it has expired, to the millisecond', async () => {
    const { token } = await makeToken({ days: 1 });
    const end = minutes(24 * 60);
    expect(await accessOf(token, new Date(end.getTime() - 1))).toMatchObject({ ok: true });
    expect(await accessOf(token, end)).toEqual({
      ok: false,
      reason: 'This access token has expired. Make another.',
    });
  });

  test('nothing where it is unknown, cut short or in other letters', async () => {
    const { token } = await makeToken();
    for (const wrong of ['', 'rw_', token.slice(0, -1), token.slice(3), token.toUpperCase(), `${token} `]) {
      expect(await accessOf(wrong, someDay), wrong).toMatchObject({ ok: false });
    }
  });

  test('its last use is kept, at most once a minute', async () => {
    const { token } = await makeToken();
    const lastUse = async () => (await listAccessTokens(database.db, tester.id, someDay))[0]?.lastUsedAt;
    expect(await lastUse()).toBeNull();
    await accessOf(token, minutes(1));
    await accessOf(token, minutes(1.5));
    expect(await lastUse()).toEqual(minutes(1));
    await accessOf(token, minutes(2.1));
    expect(await lastUse()).toEqual(minutes(2.1));
  });

  test.each([
    ['Bearer rw_abc', 'rw_abc'],
    ['bearer   rw_abc ', 'rw_abc'],
    ['Bearer', ''],
    ['Basic cXVpbGw6cXVpbGw=', null],
    ['Bearertoken', null],
    [undefined, null],
  ])('of the header %j it reads %j', (header, expected) => {
    const headers = new Headers(header === undefined ? {} : { authorization: header });
    expect(bearerOf(headers)).toBe(expected);
  });
});

describe('a door', () => {
  const shut = door({
    rule: anyone,
    summary: 'Shut to tokens',
    output: z.object({ open: z.boolean() }),
    run: () => Promise.resolve({ open: true }),
  });
  const open = door({ ...specOf(staff('tester')), scope: 'readings:write' });

  function specOf(rule: ReturnType<typeof staff>) {
    return {
      rule,
      summary: 'Open to tokens',
      output: z.object({ open: z.boolean() }),
      run: () => Promise.resolve({ open: true }),
    };
  }

  function bearing(scopes: 'readings:write'[], who: SignedIn) {
    const access: Access = { ok: true, tokenId: 1, scopes, person: who };
    return { access, person: who };
  }

  test('that names no scope refuses every token, even where anyone may pass', async () => {
    const { response } = await callDoor(shut, bearing(['readings:write'], tester));
    expect(await problemIn(response)).toMatchObject({
      status: 403,
      detail: 'This door does not open to access tokens.',
    });
    expect(response.headers.get('www-authenticate')).toBeNull();
  });

  test('that names a scope opens to it, and asks for the roles all the same', async () => {
    expect((await callDoor(open, bearing(['readings:write'], tester))).response.status).toBe(200);
    const shipper = await person(await seedPerson(database.db, { name: 'Theo', roles: ['shipper'] }));
    const { response } = await callDoor(open, bearing(['readings:write'], shipper));
    expect(await problemIn(response)).toMatchObject({
      status: 403,
      detail: 'Your roles do not open this door.',
    });
    expect(response.headers.get('www-authenticate')).toBeNull();
  });

  test('tells a token without the scope what it lacks', async () => {
    const { response } = await callDoor(open, bearing([], tester));
    expect((await problemIn(response))['status']).toBe(403);
    expect(response.headers.get('www-authenticate')).toBe(
      'Bearer error="insufficient_scope", scope="readings:write"',
    );
  });

  test('answers a bad token with 401, and says how one gets in', async () => {
    const { response } = await callDoor(open, { access: { ok: false, reason: 'It has expired.' } });
    expect(await problemIn(response)).toMatchObject({ status: 401, detail: 'It has expired.' });
    expect(response.headers.get('www-authenticate')).toBe('Bearer error="invalid_token"');
    const bare = await callDoor(open);
    expect(bare.response.status).toBe(401);
    expect(bare.response.headers.get('www-authenticate')).toBe('Bearer scope="readings:write"');
  });

  test('keeps browsers’ rule of Origin, token or not', async () => {
    const { response } = await callDoor(open, {
      ...bearing(['readings:write'], tester),
      headers: { origin: 'https://elsewhere.example' },
    });
    expect((await problemIn(response))['detail']).toBe('This was sent from a page of another site.');
  });

  test('lets the ledger name the token by which it was asked', async () => {
    await createAccessToken(
      { name: 'x', scopes: [], days: null, tokenHash: 'a'.repeat(64) },
      { ...callAs(database.db, tester.id), actor: { kind: 'user', userId: tester.id, accessTokenId: 7 } },
    );
    const [entry] = await database.db.select().from(ledgerEntries);
    expect(entry).toMatchObject({ actorUserId: tester.id, details: { accessTokenId: 7 } });
  });
});
