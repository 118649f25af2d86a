import { eq } from 'drizzle-orm';
import { expect, test } from 'vitest';
import { POST as useLink } from '~/pages/api/sign-in-links/[token]';
import { passwordFits } from '~/server/auth/passwords';
import { personOf, sessionCookieName } from '~/server/auth/sessions';
import { linkToken, tokenHash } from '~/server/auth/tokens';
import {
  ledgerEntries,
  outbox,
  sessions,
  signInLinks,
  signingKeys,
  userProfiles,
  userRoles,
  users,
  works,
} from '~/server/db/schema';
import { letters } from '~/server/documents/letters';
import { env } from '~/server/env';
import { askSignInLink } from '~/server/services/people/ask-sign-in-link';
import { changePerson } from '~/server/services/people/change-person';
import { invitePerson } from '~/server/services/people/invite-person';
import { useSignInLink as takeLink } from '~/server/services/people/use-sign-in-link';
import { testDatabase } from '../../setup/database';
import { callDoor } from '../../setup/call-door';
import { callContext, someDay } from '../../factories/contexts';
import { seedPerson } from '../../factories/people';

const database = testDatabase();
const password = 'a long enough password';
const minutesLater = (minutes: number) => new Date(someDay.getTime() + minutes * 60_000);
const asOwner = (userId: number) => callContext(database.db, { actor: { kind: 'user', userId } });

/** The token in the letter that the newest outbox row asks for. */
async function mailedToken(): Promise<string> {
  const rows = await database.db.select().from(outbox);
  const payload = rows.at(-1)?.payload ?? {};
  const letter = await letters[String(payload['letter'])]?.(database.db, payload);
  const [, token] = /\/sign-in\/([\w-]+)/.exec(letter?.text ?? '') ?? [];
  if (token === undefined) throw new Error('The letter carries no link.');
  return token;
}

async function seedWorks(): Promise<void> {
  await database.db.insert(works).values({
    name: 'Thistledown Radio Works',
    addressLines: ['1 Quiet Lane'],
    country: 'XX',
    email: 'works@thistledown.example',
    timeZone: 'UTC',
    currency: 'EUR',
  });
}

test('a mailed link signs in once, also when it is opened five times at once', async () => {
  await seedWorks();
  const userId = await seedPerson(database.db, { email: 'buyer@home.example' });
  await askSignInLink({ email: 'buyer@home.example' }, callContext(database.db));
  const token = await mailedToken();
  const uses = await Promise.allSettled(
    Array.from({ length: 5 }, () => takeLink({ token }, callContext(database.db))),
  );
  const won = uses.flatMap((use) => (use.status === 'fulfilled' ? [use.value] : []));
  expect(won).toEqual([{ userId, isStaff: false }]);
  for (const use of uses) {
    if (use.status === 'rejected') expect(use.reason).toMatchObject({ code: 'not_found' });
  }
  await expect(takeLink({ token }, callContext(database.db))).rejects.toMatchObject({ code: 'not_found' });
});

test('a link opens a session at its door', async () => {
  await seedWorks();
  const userId = await seedPerson(database.db, { email: 'buyer@home.example' });
  await askSignInLink({ email: 'buyer@home.example' }, callContext(database.db));
  const { response, cookies } = await callDoor(useLink, {
    params: { token: await mailedToken() },
    headers: { accept: 'text/html' },
    body: new URLSearchParams(),
  });
  expect(response.headers.get('location')).toBe('/my/orders');
  const session = await personOf(cookies.get(sessionCookieName)?.value ?? '');
  expect(session?.person.id).toBe(userId);
});

test('a sign-in link lasts half an hour, an invitation seven days', async () => {
  const owner = await seedPerson(database.db, { email: 'owner@works.example', roles: ['owner'] });
  await askSignInLink({ email: 'owner@works.example' }, callContext(database.db));
  const link = linkToken(env().secret, 'sign_in', 1);
  const late = callContext(database.db, { now: minutesLater(30) });
  await expect(takeLink({ token: link }, late)).rejects.toMatchObject({ code: 'not_found' });
  const inTime = callContext(database.db, { now: minutesLater(29) });
  expect(await takeLink({ token: link }, inTime)).toMatchObject({ userId: owner });
  await invitePerson({ email: 'new@works.example', name: 'Quince', roles: ['builder'] }, asOwner(owner));
  const invitation = { token: linkToken(env().secret, 'sign_in', 2), password };
  const days = 7 * 24 * 60;
  const tooLate = callContext(database.db, { now: minutesLater(days) });
  await expect(takeLink(invitation, tooLate)).rejects.toMatchObject({ code: 'not_found' });
  await takeLink(invitation, callContext(database.db, { now: minutesLater(days - 1) }));
});

test('the database and the outbox hold no token, and a made-up one opens nothing', async () => {
  await seedPerson(database.db, { email: 'buyer@home.example' });
  await askSignInLink({ email: 'buyer@home.example' }, callContext(database.db));
  const token = linkToken(env().secret, 'sign_in', 1);
  const [link] = await database.db.select().from(signInLinks);
  expect(link?.tokenHash).toBe(tokenHash(token));
  const kept = JSON.stringify([link, await database.db.select().from(outbox)]);
  expect(kept).not.toContain(token);
  for (const wrong of [
    token.toUpperCase(),
    `${token}A`,
    link?.tokenHash ?? '',
    linkToken('other', 'sign_in', 1),
  ]) {
    await expect(takeLink({ token: wrong }, callContext(database.db))).rejects.toMatchObject({
      code: 'not_found',
    });
  }
});

test('an invited person gets a letter, chooses a password and has the roles', async () => {
  await seedWorks();
  const owner = await seedPerson(database.db, { email: 'owner@works.example', roles: ['owner'] });
  const { userId } = await invitePerson(
    { email: 'new@works.example', name: 'Quince', roles: ['builder', 'tester'] },
    asOwner(owner),
  );
  const token = await mailedToken();
  await expect(takeLink({ token }, callContext(database.db))).rejects.toMatchObject({
    code: 'invalid',
    fields: { password: 'Choose a password.' },
  });
  expect(await takeLink({ token, password }, callContext(database.db))).toEqual({ userId, isStaff: true });
  const [user] = await database.db.select().from(users).where(eq(users.id, userId));
  expect(await passwordFits(user?.passwordHash ?? null, password)).toBe(true);
  const entries = await database.db.select().from(ledgerEntries);
  expect(entries.map(({ action, actorUserId }) => ({ action, actorUserId }))).toEqual([
    { action: 'person.invite', actorUserId: owner },
    { action: 'person.use_link', actorUserId: null },
  ]);
  expect(JSON.stringify(entries)).not.toMatch(/Quince|works\.example|argon2/);
});

test('an address that is here already is not invited again', async () => {
  const owner = await seedPerson(database.db, { email: 'owner@works.example', roles: ['owner'] });
  const again = invitePerson(
    { email: 'owner@works.example', name: 'Quince', roles: ['builder'] },
    asOwner(owner),
  );
  await expect(again).rejects.toMatchObject({
    code: 'conflict',
    fields: { email: 'Somebody with this address is here already; change their roles in the list instead.' },
  });
  expect(await database.db.$count(users)).toBe(1);
  expect(await database.db.$count(outbox)).toBe(0);
});

test('the first owner founds the works by a link, once', async () => {
  await database.db.insert(signInLinks).values({
    tokenHash: tokenHash('first'),
    purpose: 'first_owner',
    createdAt: someDay,
    expiresAt: minutesLater(60),
  });
  const about = { name: 'Quill', email: 'quill@works.example', worksName: 'Quiet Works' };
  const lacking = takeLink({ token: 'first', password }, callContext(database.db));
  await expect(lacking).rejects.toMatchObject({ code: 'invalid' });
  expect(await database.db.$count(works)).toBe(0);
  const withoutAddress = takeLink({ token: 'first', password, ...about }, callContext(database.db));
  await expect(withoutAddress).rejects.toMatchObject({
    fields: { addressLines: expect.any(String) as string },
  });
  const founding = { token: 'first', password, ...about, addressLines: ['1 Quiet Lane'] };
  const tries = await Promise.allSettled([
    takeLink(founding, callContext(database.db)),
    takeLink(founding, callContext(database.db)),
  ]);
  expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  expect(await database.db.$count(works)).toBe(1);
  expect(await database.db.$count(signingKeys)).toBe(1);
  expect(await database.db.select({ role: userRoles.role }).from(userRoles)).toEqual([{ role: 'owner' }]);
  expect(await database.db.$count(userProfiles)).toBe(1);
});

const change = (userId: number, roles: ('owner' | 'builder')[], more = {}) => ({
  userId,
  roles,
  disabled: false,
  version: 1,
  ...more,
});

test('the last owner can neither be demoted nor shut out', async () => {
  const owner = await seedPerson(database.db, { email: 'owner@works.example', roles: ['owner', 'builder'] });
  const former = await seedPerson(database.db, { email: 'former@works.example', roles: ['owner'] });
  await database.db.update(users).set({ disabledAt: someDay }).where(eq(users.id, former));
  for (const wanted of [change(owner, ['builder']), change(owner, ['owner'], { disabled: true })]) {
    await expect(changePerson(wanted, asOwner(owner))).rejects.toMatchObject({ code: 'conflict' });
  }
  await changePerson(change(owner, ['owner']), asOwner(owner));
});

test('of two owners who demote each other at once, one stays', async () => {
  const one = await seedPerson(database.db, { email: 'one@works.example', roles: ['owner'] });
  const two = await seedPerson(database.db, { email: 'two@works.example', roles: ['owner'] });
  const tries = await Promise.allSettled([
    changePerson(change(one, []), asOwner(two)),
    changePerson(change(two, []), asOwner(one)),
  ]);
  expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  expect(await database.db.$count(userRoles)).toBe(1);
});

test('a change of roles ends the sessions, tells from what to what, and takes one editor at a time', async () => {
  const owner = await seedPerson(database.db, { email: 'owner@works.example', roles: ['owner'] });
  const person = await seedPerson(database.db, { email: 'p@works.example', roles: ['builder'] });
  await database.db
    .insert(sessions)
    .values({ id: 'a'.repeat(64), userId: person, expiresAt: minutesLater(60) });
  await changePerson(change(person, ['owner']), asOwner(owner));
  expect(await database.db.$count(sessions)).toBe(0);
  const [entry] = await database.db.select().from(ledgerEntries);
  expect(entry).toMatchObject({
    action: 'person.change',
    actorUserId: owner,
    details: { roles: { from: ['builder'], to: ['owner'] }, disabled: { from: false, to: false } },
  });
  await expect(changePerson(change(person, []), asOwner(owner))).rejects.toMatchObject({ code: 'conflict' });
});
