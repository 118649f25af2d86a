import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterEach, expect, test, vi } from 'vitest';
import { POST as askLink } from '~/pages/api/sign-in-links/index';
import { POST as signIn } from '~/pages/api/sign-in';
import { POST as signOut } from '~/pages/api/sign-out';
import { hashPassword, passwordFits } from '~/server/auth/passwords';
import { endOtherSessions, openSession, personOf, sessionCookieName } from '~/server/auth/sessions';
import { isTooMany } from '~/server/auth/throttle';
import { ledgerEntries, outbox, sessions, users } from '~/server/db/schema';
import { testDatabase } from '../../setup/database';
import { callDoor, problemIn } from '../../setup/call-door';
import { seedPerson } from '../../factories/people';

const database = testDatabase();
const json = { 'content-type': 'application/json' };
const password = 'a long enough password';

afterEach(() => {
  vi.restoreAllMocks();
});

const trySignIn = (email: string, typed: string, next?: string) =>
  callDoor(signIn, { headers: json, body: JSON.stringify({ email, password: typed, next }) });

test('a session is kept as the SHA-256 of its cookie’s token, and is compared byte for byte', async () => {
  const userId = await seedPerson(database.db, { email: 'quill@works.example', roles: ['tester'] });
  const { name, value: token, attributes } = await openSession(userId);
  expect(name).toBe('__Host-session');
  expect(attributes).toMatchObject({ httpOnly: true, secure: true, sameSite: 'lax', path: '/' });
  expect(attributes.domain).toBeUndefined();
  const [row] = await database.db.select().from(sessions);
  expect(row?.id).toBe(createHash('sha256').update(token).digest('hex'));
  expect((await personOf(token))?.person).toMatchObject({ id: userId, roles: ['tester'] });
  const swapped = token.replaceAll(/[a-z]/gi, (letter) =>
    letter === letter.toLowerCase() ? letter.toUpperCase() : letter.toLowerCase(),
  );
  expect(swapped).not.toBe(token);
  for (const other of [swapped, `${token} `, row?.id ?? '', '']) expect(await personOf(other)).toBeNull();
  // The column itself tells case apart, whatever hash is asked for.
  const upper = row?.id.toUpperCase() ?? '';
  expect(upper).not.toBe(row?.id);
  expect(await database.db.select().from(sessions).where(eq(sessions.id, upper))).toEqual([]);
});

test('a session ends with its time, its person’s account, and signing out', async () => {
  const userId = await seedPerson(database.db, { email: 'quill@works.example' });
  const tokens = [(await openSession(userId)).value, (await openSession(userId)).value];
  const [ours = '', other = ''] = tokens;
  await endOtherSessions(userId, ours);
  expect(await personOf(other)).toBeNull();
  expect(await personOf(ours)).not.toBeNull();
  await database.db.update(users).set({ disabledAt: new Date() });
  expect(await personOf(ours)).toBeNull();
  await database.db.update(users).set({ disabledAt: null });
  await database.db.update(sessions).set({ expiresAt: new Date(Date.now() - 1) });
  expect(await personOf(ours)).toBeNull();
  const { value: third } = await openSession(userId);
  const { response, cookies } = await callDoor(signOut, {
    headers: { cookie: `${sessionCookieName}=${third}`, origin: 'http://localhost:4321' },
  });
  expect(response.status).toBe(200);
  expect(await personOf(third)).toBeNull();
  expect(cookies.get(sessionCookieName)?.value).toBe('');
});

test('a session past half of its life is prolonged, and its cookie set again', async () => {
  const userId = await seedPerson(database.db, { email: 'quill@works.example' });
  const { value: token } = await openSession(userId);
  expect((await personOf(token))?.renewed).toBeNull();
  const day = 24 * 3600_000;
  await database.db.update(sessions).set({ expiresAt: new Date(Date.now() + 14 * day) });
  expect((await personOf(token))?.renewed).toMatchObject({ value: token });
  const [row] = await database.db.select().from(sessions);
  expect(row?.expiresAt.getTime()).toBeGreaterThan(Date.now() + 29 * day);
});

test('a password is kept by argon2id at 19 MiB, two passes, one lane', async () => {
  const kept = await hashPassword(password);
  expect(kept).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  expect(await hashPassword(password)).not.toBe(kept);
  expect(await passwordFits(kept, password)).toBe(true);
  expect(await passwordFits(kept, `${password} `)).toBe(false);
  expect(await passwordFits(null, password)).toBe(false);
});

test('signing in opens a session and goes on to the works, the buyer’s orders, or a page of ours', async () => {
  await seedPerson(database.db, { email: 'tester@works.example', roles: ['tester'], password });
  await seedPerson(database.db, { email: 'buyer@home.example', password });
  const { response, cookies } = await trySignIn(' Tester@Works.example ', password);
  expect(await response.json()).toEqual({ signedIn: true, next: '/works' });
  expect((await personOf(cookies.get(sessionCookieName)?.value ?? ''))?.person.email).toBe(
    'tester@works.example',
  );
  const nextFor = async (next?: string): Promise<unknown> => {
    const answer: unknown = await (await trySignIn('buyer@home.example', password, next)).response.json();
    return answer;
  };
  expect(await nextFor()).toEqual({ signedIn: true, next: '/my/orders' });
  expect(await nextFor('/works/units/V40-0007?tab=1')).toMatchObject({ next: '/works/units/V40-0007?tab=1' });
  for (const next of ['//elsewhere.example', '/\\elsewhere.example', 'https://elsewhere.example', 'x']) {
    expect(await nextFor(next), next).toMatchObject({ next: '/my/orders' });
  }
});

test('nobody can tell from signing in whether an address has an account', async () => {
  await seedPerson(database.db, { email: 'known@works.example', roles: ['tester'], password });
  await seedPerson(database.db, { email: 'link-only@home.example' });
  const gone = await seedPerson(database.db, { email: 'gone@works.example', password });
  await database.db.update(users).set({ disabledAt: new Date() }).where(eq(users.id, gone));
  const answers = [];
  for (const email of ['known@works.example', 'nobody@works.example', 'link-only@home.example']) {
    const { response, cookies } = await trySignIn(email, 'not the password');
    expect(cookies.has(sessionCookieName)).toBe(false);
    answers.push({ status: response.status, body: await response.text() });
  }
  const { response } = await trySignIn('gone@works.example', password);
  answers.push({ status: response.status, body: await response.text() });
  expect(new Set(answers.map((answer) => JSON.stringify(answer))).size).toBe(1);
  expect(answers[0]?.status).toBe(422);
});

test('an address that nobody has costs as much work as a wrong password', async () => {
  const kept = await hashPassword(password);
  const timeOf = async (hash: string | null) => {
    const start = performance.now();
    for (let round = 0; round < 5; round += 1) await passwordFits(hash, 'not the password');
    return performance.now() - start;
  };
  await timeOf(kept);
  const [known, unknown] = [await timeOf(kept), await timeOf(null)];
  // A skipped hash would be some thousand times quicker; the load of the machine is not.
  expect(unknown).toBeGreaterThan(known / 10);
});

test('asking for a link answers the same whether the address has an account, and mails only where it has', async () => {
  const userId = await seedPerson(database.db, { email: 'known@home.example' });
  const ask = async (email: string) => {
    const { response } = await callDoor(askLink, { headers: json, body: JSON.stringify({ email }) });
    return { status: response.status, body: await response.text() };
  };
  expect(await ask('known@home.example')).toEqual(await ask('nobody@home.example'));
  const rows = await database.db.select().from(outbox);
  expect(rows.map(({ kind, payload }) => ({ kind, payload }))).toEqual([
    { kind: 'mail', payload: { letter: 'sign_in_link', signInLinkId: 1 } },
  ]);
  expect(JSON.stringify(await database.db.select().from(ledgerEntries))).not.toContain('home.example');
  await database.db.update(users).set({ disabledAt: new Date() }).where(eq(users.id, userId));
  await ask('known@home.example');
  expect(await database.db.$count(outbox)).toBe(1);
});

test('ten wrong passwords for an address are one quarter of an hour’s worth', async () => {
  await seedPerson(database.db, { email: 'throttled@works.example', password });
  for (let attempt = 1; attempt <= 10; attempt += 1) {
    expect((await trySignIn('throttled@works.example', 'not it')).response.status).toBe(422);
  }
  // The right password does not help now, and nor does another spelling of the address.
  const { response } = await trySignIn('Throttled@works.example', password);
  expect(response.status).toBe(429);
  expect(await problemIn(response)).toMatchObject({ type: 'urn:rigwright:problem:too-many' });
  expect((await trySignIn('other@works.example', 'not it')).response.status).toBe(422);
});

test('tries older than a quarter of an hour are forgotten', () => {
  const start = new Date('2026-03-02T09:00:00Z').getTime();
  const at = (seconds: number) => isTooMany('window@works.example', new Date(start + seconds * 1000));
  for (let attempt = 0; attempt < 10; attempt += 1) expect(at(attempt)).toBe(false);
  expect(at(10)).toBe(true);
  expect(at(15 * 60 + 11)).toBe(false);
});

test('signing in clears what was mistyped before', async () => {
  await seedPerson(database.db, { email: 'typist@works.example', password });
  for (let round = 0; round < 2; round += 1) {
    for (let attempt = 1; attempt <= 6; attempt += 1) await trySignIn('typist@works.example', 'not it');
    expect((await trySignIn('typist@works.example', password)).response.status).toBe(200);
  }
});
