import { request, type IncomingMessage, type RequestOptions, type ServerResponse } from 'node:http';
import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { connect, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { createWebServer, type WebServer } from './http-server';

let buildFolder = '';
let web: WebServer;
let port = 0;
let seen: IncomingMessage[] = [];
let release: () => void = () => undefined;
const noLog = { info: () => undefined, error: () => undefined };

async function application(incoming: IncomingMessage, response: ServerResponse): Promise<void> {
  seen.push(incoming);
  if (incoming.url === '/events') {
    response.writeHead(200, { 'Content-Type': 'text/event-stream' });
    response.write('data: first\n\n');
    return;
  }
  if (incoming.url === '/slow') await new Promise<void>((resolve) => (release = resolve));
  if (incoming.url === '/broken') throw new Error('broken');
  response.writeHead(200, { 'Content-Type': 'text/plain' });
  response.end('x'.repeat(5000));
}

async function start(baseUrl?: string): Promise<void> {
  web = await createWebServer({
    application,
    buildFolder,
    baseUrl: new URL(baseUrl ?? 'http://localhost:4321'),
    trustedProxies: new Set(['10.0.0.1']),
    log: noLog,
  });
  await new Promise<void>((resolve) => web.server.listen(0, '127.0.0.1', resolve));
  port = (web.server.address() as AddressInfo).port;
}

interface Answer {
  status: number | undefined;
  headers: IncomingMessage['headers'];
  body: string;
}

function ask(path: string, options: RequestOptions = {}, body = ''): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const asked = request(
      {
        port,
        host: '127.0.0.1',
        path,
        ...options,
        headers: { host: 'localhost:4321', ...(options.headers as Record<string, string>) },
      },
      (incoming) => {
        let text = '';
        incoming.setEncoding('latin1').on('data', (chunk: string) => (text += chunk));
        incoming.on('end', () =>
          resolve({ status: incoming.statusCode, headers: incoming.headers, body: text }),
        );
        incoming.on('error', reject);
      },
    );
    asked.once('error', reject);
    asked.end(body);
  });
}

beforeAll(async () => {
  buildFolder = await mkdtemp(join(tmpdir(), 'rigwright-http-'));
  await mkdir(join(buildFolder, 'client/_astro'), { recursive: true });
  await writeFile(join(buildFolder, 'client/_astro/page.Ab12.js'), 'export {};');
  await writeFile(join(buildFolder, 'client/icon.svg'), '<svg/>');
  await start();
});
beforeEach(() => {
  seen = [];
});
afterAll(async () => {
  await web.stop(100);
  await rm(buildFolder, { recursive: true });
});

test.each([
  ['//works', 400],
  ['/works//people', 400],
  ['/\\works', 400],
  ['/a%2Fb', 400],
  ['/a%5cb', 400],
  ['/.//works', 400],
  ['/a/../works', 400],
  ['/%2e%2e/works', 400],
  ['/%zz', 400],
  ['/a%00', 400],
  ['http://localhost:4321/works', 400],
  ['/_actions/anything', 404],
  ['/%5Factions/anything', 404],
  ['/_server-islands/Any', 404],
  ['/_image?href=x', 404],
])('%s is answered %i before the application sees it', async (path, status) => {
  expect((await ask(path)).status).toBe(status);
  expect(seen).toHaveLength(0);
});

test.each([
  ['localhost:4321', 200],
  ['127.0.0.1:4321', 200],
  ['[::1]:4321', 200],
  ['localhost:4322', 421],
  ['localhost', 421],
  ['shop.example', 421],
  ['localhost:4321@shop.example', 421],
])('host %s is answered %i', async (host, status) => {
  expect((await ask('/', { headers: { host } })).status).toBe(status);
});

test('a method that nothing serves is refused', async () => {
  expect((await ask('/', { method: 'TRACE' })).status).toBe(405);
});

test('bodies need a stated length under the cap', async () => {
  const chunked = { method: 'POST', headers: { 'transfer-encoding': 'chunked' } };
  expect((await ask('/', chunked, 'x')).status).toBe(411);
  const large = {
    method: 'POST',
    headers: { 'content-length': String(16 * 1024 * 1024 + 1), expect: '100-continue' },
  };
  const status = await new Promise((resolve, reject) => {
    const asked = request({
      port,
      host: '127.0.0.1',
      path: '/',
      ...large,
      headers: { host: 'localhost:4321', ...large.headers },
    });
    asked.once('response', (incoming) => resolve(incoming.statusCode));
    asked.once('continue', () => reject(new Error('asked for the body')));
    asked.once('error', reject);
    asked.flushHeaders();
  });
  expect(status).toBe(413);
  expect(seen).toHaveLength(0);
  expect((await ask('/', { method: 'POST', headers: { 'content-length': '1' } }, 'x')).status).toBe(200);
});

/** Sends a body of 50 MB as fast as it goes, and says what came back and how much of it the server took in. */
async function upload(header: string): Promise<{ status: string; taken: number }> {
  let taken = 0;
  web.server.once('connection', (socket) => {
    socket.once('close', () => (taken = socket.bytesRead));
  });
  const status = await new Promise<string>((resolve, reject) => {
    const socket = connect(port, '127.0.0.1');
    let answer = '';
    let left = 50;
    const piece = Buffer.alloc(1024 * 1024, '7030000,-20.5\n');
    const send = (): void => {
      while (left > 0 && !socket.destroyed) {
        left -= 1;
        const framed = /chunked/.test(header)
          ? Buffer.concat([Buffer.from('100000\r\n'), piece, Buffer.from('\r\n')])
          : piece;
        if (!socket.write(framed)) return;
      }
    };
    socket.setEncoding('latin1').on('data', (text: string) => {
      answer += text;
      if (answer.includes('\r\n\r\n')) resolve(answer.slice(0, answer.indexOf('\r\n')));
    });
    socket.on('drain', send).on('error', () => resolve(answer.split('\r\n')[0] ?? ''));
    socket.on('close', () => reject(new Error('closed without an answer')));
    socket.write(`POST /api/runs/1/sweeps HTTP/1.1\r\nHost: localhost:4321\r\n${header}\r\n\r\n`, send);
  });
  await expect.poll(() => taken).toBeGreaterThan(0);
  return { status, taken };
}

test.each([
  ['that states its length', `Content-Length: ${50 * 1024 * 1024}`, 'HTTP/1.1 413 Payload Too Large'],
  ['that states none', 'Transfer-Encoding: chunked', 'HTTP/1.1 411 Length Required'],
])('an upload of 50 MB %s is refused before it is read whole', async (_name, header, expected) => {
  const { status, taken } = await upload(header);
  expect(status).toBe(expected);
  expect(taken).toBeLessThan(5 * 1024 * 1024);
  expect(seen).toHaveLength(0);
});

test('what a caller claims about itself does not reach the application', async () => {
  await ask('/', {
    headers: {
      'x-forwarded-for': '203.0.113.9',
      'x-forwarded-host': 'shop.example',
      'x-forwarded-proto': 'https',
      'x-request-id': 'mine',
      forwarded: 'for=203.0.113.9',
    },
  });
  const headers = seen[0]?.headers;
  expect(headers).toMatchObject({ 'x-forwarded-for': '127.0.0.1', 'x-forwarded-proto': 'http' });
  expect(headers?.['x-forwarded-host']).toBeUndefined();
  expect(headers?.forwarded).toBeUndefined();
  expect(headers?.['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
});

test('every answer bears the protective headers, and long ones are compressed', async () => {
  const { headers } = await ask('/', { headers: { 'accept-encoding': 'gzip' } });
  expect(headers).toMatchObject({
    'x-content-type-options': 'nosniff',
    'x-frame-options': 'DENY',
    'referrer-policy': 'strict-origin-when-cross-origin',
    'content-encoding': 'gzip',
  });
  expect(headers['strict-transport-security']).toBeUndefined();
});

test('files of the build: hashed names are kept for good, others are asked for again, nothing outside is served', async () => {
  const hashed = await ask('/_astro/page.Ab12.js');
  expect(hashed).toMatchObject({ status: 200, body: 'export {};' });
  expect(hashed.headers['cache-control']).toContain('immutable');
  const plain = await ask('/icon.svg');
  expect(plain.headers['cache-control']).toBe('public, no-cache');
  expect(plain.headers['content-type']).toBe('image/svg+xml');
  const again = await ask('/icon.svg', { headers: { 'if-none-match': plain.headers.etag ?? '' } });
  expect(again).toMatchObject({ status: 304, body: '' });
  expect(seen).toHaveLength(0);
});

test('an application that throws answers 500 without its reason', async () => {
  const answer = await ask('/broken');
  expect(answer.status).toBe(500);
  expect(answer.body).not.toContain('broken');
});

test('stopping lets a request under way finish and ends streams', async () => {
  const slow = ask('/slow');
  const events = ask('/events').catch((error: unknown) => error);
  await expect.poll(() => seen.length).toBe(2);
  const stopped = web.stop(5000);
  expect(await events).toBeInstanceOf(Error);
  release();
  expect((await slow).status).toBe(200);
  await stopped;
  await expect(ask('/')).rejects.toThrow('ECONNREFUSED');
  await start();
});

test('under an https address the protocol inside is https and browsers are told to stay on it', async () => {
  await web.stop(100);
  await start('https://shop.example');
  const { headers } = await ask('/', { headers: { host: 'shop.example' } });
  expect(headers['strict-transport-security']).toContain('max-age=');
  expect(seen[0]?.headers['x-forwarded-proto']).toBe('https');
  expect((await ask('/')).status).toBe(421);
});
