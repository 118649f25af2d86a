import { expect, test } from 'vitest';
import { z } from 'zod';
import { idempotencyKeys, formReturns, users } from '~/server/db/schema';
import { door, saidCookie } from '~/server/door';
import { DomainError, errorCodes } from '~/server/errors';
import { findForm, formReturnCookie } from '~/server/form-return';
import { anyone, everyStaff, signedIn, staff } from '~/server/rules';
import { write } from '~/server/write';
import { testDatabase } from '../../setup/database';
import { browser, callDoor, problemIn } from '../../setup/call-door';
import { someDay } from '../../factories/contexts';

const database = testDatabase();
const json = { 'content-type': 'application/json' };

const echo = door({
  rule: anyone,
  summary: 'Echo',
  params: z.object({ id: z.coerce.number().int() }).partial(),
  query: z.object({ tag: z.union([z.string(), z.array(z.string())]).optional() }),
  input: z.object({
    name: z.string({ required_error: 'Give a name.' }).min(2, 'Two letters at least.'),
    roles: z.array(z.string()).optional(),
    password: z.string().optional(),
    photo: z.unknown(),
  }),
  output: z.object({ name: z.string(), tag: z.unknown(), roles: z.array(z.string()).optional() }),
  maxBytes: 1000,
  said: ({ name }) => `${name} is here.`,
  run: ({ input, query }) => Promise.resolve({ name: input.name, tag: query.tag, roles: input.roles }),
});

/** A door that adds a user, and so can act once or twice. */
const add = door({
  rule: anyone,
  summary: 'Add',
  input: z.object({ name: z.string(), photo: z.unknown() }),
  output: z.object({ userId: z.number() }),
  next: ({ userId }) => `/people/${userId}`,
  run: ({ ctx }) =>
    write(ctx, async (w) => {
      const [{ insertId }] = await w.tx.insert(users).values({ createdAt: w.now });
      await w.record({ action: 'test.add', subjects: [] });
      return { userId: insertId };
    }),
});

test('a script gets JSON, with the query’s repeated names as a list', async () => {
  const { response } = await callDoor(echo, {
    path: '/api/tests?tag=a&tag=b',
    headers: json,
    body: JSON.stringify({ name: 'Quail', more: 1 }),
  });
  expect(response.status).toBe(200);
  expect(await response.json()).toEqual({ name: 'Quail', tag: ['a', 'b'] });
});

test('a form is told once what was done, and goes back to its page', async () => {
  const { response, cookies } = await callDoor(echo, {
    headers: browser,
    body: new URLSearchParams([
      ['name', 'Quail'],
      ['roles', 'builder'],
      ['roles', 'tester'],
    ]),
  });
  expect(response.status).toBe(303);
  expect(response.headers.get('location')).toBe('/works/people?page=2');
  expect(cookies.get(saidCookie)?.value).toBe('Quail is here.');
});

test.each([
  ['of another site', { ...browser, referer: 'http://elsewhere.example/works' }],
  ['that is no address', { ...browser, referer: 'works' }],
])('a form with a Referer %s goes on to the shop', async (_, headers) => {
  const { response } = await callDoor(echo, { headers, body: new URLSearchParams({ name: 'Quail' }) });
  expect(response.headers.get('location')).toBe('/');
});

test('a refused script gets a problem document with fields and the request id', async () => {
  const { response } = await callDoor(echo, { headers: json, body: '{"name":"Q"}' });
  expect(response.status).toBe(400);
  expect(await problemIn(response)).toEqual({
    type: 'urn:rigwright:problem:invalid',
    title: 'Not understood',
    status: 400,
    detail: 'What was sent cannot be used: Two letters at least.',
    instance: 'urn:rigwright:request:request-1',
    fields: { name: 'Two letters at least.' },
  });
});

test('a refused form’s values come back on its page once, without the password', async () => {
  const { response, cookies } = await callDoor(echo, {
    headers: browser,
    body: new URLSearchParams([
      ['name', 'Q'],
      ['roles', 'builder'],
      ['roles', 'tester'],
      ['password', 'open sesame'],
      ['_key', 'key-1'],
    ]),
  });
  expect(response.status).toBe(303);
  expect(response.headers.get('location')).toBe('/works/people?page=2');
  const token = cookies.get(formReturnCookie)?.value ?? '';
  const found = await findForm(database.db, token, '/works/people', someDay);
  expect(found).toEqual({
    values: { name: 'Q', roles: ['builder', 'tester'] },
    message: 'What was sent cannot be used: Two letters at least.',
    fields: { name: 'Two letters at least.' },
  });
  const kept = JSON.stringify(await database.db.select().from(formReturns));
  expect(kept).not.toContain('sesame');
  expect(kept).not.toContain(token);
  expect(await findForm(database.db, token, '/works/orders', someDay)).toBeNull();
  const later = new Date(someDay.getTime() + 31 * 60_000);
  expect(await findForm(database.db, token, '/works/people', later)).toBeNull();
});

test.each(['http://elsewhere.example', 'http://localhost:4322', 'null'])(
  'a change sent from %s is refused',
  async (origin) => {
    const { response } = await callDoor(echo, { headers: { ...json, origin }, body: '{"name":"Quail"}' });
    expect(response.status).toBe(403);
    expect(await problemIn(response)).toMatchObject({ type: 'urn:rigwright:problem:forbidden' });
  },
);

test('a change with a session cookie and no Origin is refused; without a cookie it is a script’s', async () => {
  const body = '{"name":"Quail"}';
  const refused = await callDoor(echo, { headers: { ...json, cookie: '__Host-session=abc' }, body });
  expect(refused.response.status).toBe(403);
  const own = { ...json, cookie: '__Host-session=abc', origin: 'http://localhost:4321' };
  expect((await callDoor(echo, { headers: own, body })).response.status).toBe(200);
  expect((await callDoor(echo, { headers: json, body })).response.status).toBe(200);
});

test('a body over the door’s cap is refused, announced or not', async () => {
  const body = JSON.stringify({ name: 'Q'.repeat(1000) });
  const announced = { ...json, 'content-length': String(body.length) };
  for (const headers of [announced, json]) {
    const { response } = await callDoor(echo, { headers, body });
    expect(response.status).toBe(413);
  }
});

test.each([
  ['text/plain', '{"name":"Quail"}', 'Send a form or application/json.'],
  ['application/json', '{"name":', 'The body is not JSON.'],
  ['multipart/form-data; boundary=x', 'no such thing', 'The form could not be read.'],
])('a body of %s that is not one is refused', async (type, body, detail) => {
  const { response } = await callDoor(echo, { headers: { 'content-type': type }, body });
  expect(response.status).toBe(400);
  expect(await problemIn(response)).toMatchObject({ detail });
});

const failing = (error: Error) =>
  door({ rule: anyone, summary: 'Fail', output: z.null(), run: () => Promise.reject(error) });

test.each(Object.entries(errorCodes))('a service’s %s answers its own status', async (code, { status }) => {
  const known = Object.keys(errorCodes).find((one): one is keyof typeof errorCodes => one === code);
  const { response } = await callDoor(failing(new DomainError(known ?? 'internal', 'A sentence.')));
  expect(response.status).toBe(status);
  expect(await problemIn(response)).toMatchObject({ status, detail: 'A sentence.' });
});

test('an unknown error tells nothing but the request id', async () => {
  const { response } = await callDoor(failing(new Error('select * from secrets')));
  expect(response.status).toBe(500);
  const problem = await problemIn(response);
  expect(JSON.stringify(problem)).not.toContain('secrets');
  expect(problem['detail']).toContain('request-1');
  expect(problem['instance']).toBe('urn:rigwright:request:request-1');
});

const personOf = (...roles: ('owner' | 'builder' | 'tester' | 'shipper' | 'bookkeeper')[]) => ({
  id: 1,
  name: 'Quill',
  email: 'quill@thistledown.example',
  callSign: null,
  roles,
});

test.each([
  ['anyone', anyone, null, 200],
  ['whoever is signed in', signedIn, null, 401],
  ['whoever is signed in', signedIn, personOf(), 200],
  ['testers', staff('tester'), null, 401],
  ['testers', staff('tester'), personOf(), 404],
  ['testers', staff('tester'), personOf('builder', 'shipper'), 403],
  ['testers', staff('tester'), personOf('builder', 'tester'), 200],
  ['testers', staff('tester'), personOf('owner'), 200],
  ['the owner', staff(), personOf('bookkeeper'), 403],
  ['the works', everyStaff, personOf('bookkeeper'), 200],
])('a door for %s (%#) answers as its rule says', async (_, rule, person, status) => {
  const one = door({ rule, summary: 'One', output: z.null(), run: () => Promise.resolve(null) });
  const { response } = await callDoor(one, { method: 'GET', person });
  expect(response.status).toBe(status);
});

test('a double click on a form acts once, with a file in it too', async () => {
  const send = () => {
    const body = new FormData();
    body.set('_key', 'key-1');
    body.set('name', 'Quail');
    body.set('photo', new File([new Uint8Array([1, 2, 3])], 'photo.png', { type: 'image/png' }));
    return callDoor(add, { headers: browser, body });
  };
  const sent = await Promise.all([send(), send()]);
  const locations = sent.map(({ response }) => response.headers.get('location'));
  expect(locations[0]).toMatch(/^\/people\/\d+$/);
  expect(locations[1]).toBe(locations[0]);
  expect(await database.db.$count(users)).toBe(1);
});

test('a key used for another body is refused, and what is kept of a body cannot be guessed from it', async () => {
  const send = (name: string) =>
    callDoor(add, {
      headers: { ...json, 'idempotency-key': 'key-1' },
      body: JSON.stringify({ name }),
    });
  expect((await send('Quail')).response.status).toBe(200);
  expect((await send('Quill')).response.status).toBe(409);
  const [kept] = await database.db.select().from(idempotencyKeys);
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode('{"name":"Quail"}'));
  expect(kept?.requestHash).toMatch(/^[0-9a-f]{64}$/);
  expect(kept?.requestHash).not.toBe(Buffer.from(digest).toString('hex'));
});

test.each(['', 'with blank', 'é', 'x'.repeat(201)])('the key “%s” is refused', async (key) => {
  const body = new URLSearchParams({ _key: key, name: 'Quail' });
  const { response } = await callDoor(add, { body });
  expect(response.status).toBe(400);
});

test('a file is answered with its type and name, and may run nothing', async () => {
  const file = door({
    rule: anyone,
    summary: 'File',
    output: 'file',
    run: () =>
      Promise.resolve({ bytes: new Uint8Array([1, 2]), mediaType: 'application/pdf', fileName: 'Ω 1.pdf' }),
  });
  const { response } = await callDoor(file, { method: 'GET' });
  expect(Object.fromEntries(response.headers)).toMatchObject({
    'content-type': 'application/pdf',
    'content-length': '2',
    'content-disposition': "attachment; filename*=UTF-8''%CE%A9%201.pdf",
    'x-content-type-options': 'nosniff',
    'content-security-policy': "default-src 'none'; sandbox",
  });
});
