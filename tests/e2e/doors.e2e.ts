import { request as httpRequest } from 'node:http';
import { paths } from '~/lib/paths';
import { expect, setting, test } from './fixtures';

const base = new URL(setting('RIGWRIGHT_E2E_URL'));

interface Raw {
  path: string;
  method?: string;
  headers?: Record<string, string>;
  body?: string;
}

/** Sends a request target as it is written; a browser and fetch would tidy it first. */
function send({ path, method = 'GET', headers = {}, body = '' }: Raw): Promise<{
  status: number;
  headers: Record<string, string | string[] | undefined>;
  text: string;
}> {
  return new Promise((resolve, reject) => {
    const request = httpRequest(
      {
        host: base.hostname,
        port: base.port,
        path,
        method,
        headers: { host: base.host, ...(body === '' ? {} : { 'content-length': body.length }), ...headers },
      },
      (response) => {
        let text = '';
        response.on('data', (chunk: Buffer) => (text += chunk.toString()));
        response.once('end', () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
        );
      },
    );
    request.once('error', reject);
    request.end(body);
  });
}

const json = { 'content-type': 'application/json' };

test.describe('addresses that a router and a guard may read differently', () => {
  for (const path of [
    '//works',
    '/\\works',
    '/.//works',
    '/works//people',
    '/works%2fpeople',
    '/works%2Fpeople',
    '/works%5cpeople',
    '/./works',
    '/works/../works',
    '/%2e%2e/works',
    '/works%00',
  ]) {
    test(`${path} is not well formed`, async () => {
      expect((await send({ path })).status).toBe(400);
    });
  }

  for (const path of ['/_actions/x', '/_server-islands/x', '/_image?href=/mark.svg', '/_ACTIONS/x']) {
    for (const method of ['GET', 'POST']) {
      test(`${method} ${path} opens nothing`, async () => {
        expect((await send({ path, method, headers: { origin: base.origin } })).status).toBe(404);
      });
    }
  }

  test('an action by query opens nothing', async () => {
    const { status } = await send({
      path: '/?_action=anything',
      method: 'POST',
      headers: { origin: base.origin, 'content-type': 'application/x-www-form-urlencoded' },
    });
    expect(status).toBeGreaterThanOrEqual(400);
    expect(status).toBeLessThan(500);
  });
});

test.describe('who a request says that it is from', () => {
  test('another Host is refused', async () => {
    expect((await send({ path: '/', headers: { host: 'elsewhere.example' } })).status).toBe(421);
    expect((await send({ path: '/', headers: { host: `${base.hostname}:1` } })).status).toBe(421);
  });

  for (const origin of ['http://elsewhere.example', 'null', `${base.protocol}//${base.hostname}:1`]) {
    test(`a post from Origin ${origin} is refused, as JSON and as a form`, async () => {
      const before = await send({ path: paths.api.health() });
      expect(before.status).toBe(200);
      for (const headers of [json, { 'content-type': 'application/x-www-form-urlencoded' }]) {
        const { status } = await send({
          path: paths.api.signIn(),
          method: 'POST',
          headers: { ...headers, origin },
          body: '{}',
        });
        expect(status).toBe(403);
      }
    });
  }

  test('what a caller claims to be forwarded does not change the links', async () => {
    const { status, text } = await send({
      path: paths.signIn(),
      headers: { 'x-forwarded-host': 'elsewhere.example', 'x-forwarded-proto': 'https' },
    });
    expect(status).toBe(200);
    expect(text).not.toContain('elsewhere.example');
  });
});

test.describe('bodies', () => {
  test('over the cap of a door are refused unread', async () => {
    const { status } = await send({
      path: paths.api.signIn(),
      method: 'POST',
      headers: { ...json, origin: base.origin },
      body: JSON.stringify({ email: 'x'.repeat(70_000) }),
    });
    expect(status).toBe(413);
  });

  test('without a stated length are refused', async () => {
    const { status } = await send({
      path: paths.api.signIn(),
      method: 'POST',
      headers: { ...json, origin: base.origin, 'transfer-encoding': 'chunked' },
    });
    expect(status).toBe(411);
  });
});

test.describe('headers of a page', () => {
  for (const path of [paths.shop(), paths.signIn(), '/nothing/here']) {
    test(`${path} lets in no script and no style from a line of its own`, async () => {
      const { headers } = await send({ path });
      const policy = String(headers['content-security-policy']);
      expect(policy).toContain('script-src');
      expect(policy).not.toContain('unsafe-inline');
      expect(policy).not.toContain('unsafe-eval');
      expect(headers['x-content-type-options']).toBe('nosniff');
      expect(headers['x-frame-options']).toBe('DENY');
    });
  }
});

test.describe('who may enter', () => {
  test('a visitor is led to sign in, and from there to where they wanted', async ({ login }) => {
    const page = await login('visitor');
    await page.goto(paths.counter());
    await expect(page).toHaveURL(new RegExp(`${paths.signIn()}\\?next=`));
    expect((await send({ path: paths.api.works(), method: 'POST', headers: json, body: '{}' })).status).toBe(
      401,
    );
  });

  test('a builder is told that the office is closed to them', async ({ login }) => {
    const page = await login('builder');
    const answer = await page.request.get(paths.office());
    expect(answer.status()).toBe(403);
  });

  test('a buyer is not told what the works’ pages are', async ({ login }) => {
    const page = await login('buyer');
    expect((await page.request.get(paths.works())).status()).toBe(404);
    expect((await page.request.get(paths.office())).status()).toBe(404);
  });
});
