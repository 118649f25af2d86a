import { readFileSync } from 'node:fs';
import type { IncomingMessage, Server, ServerResponse } from 'node:http';
import { isLoopback } from './loopback';

/** What a handler answers; `serve` writes it. */
export interface Answer {
  status: number;
  body: string | Buffer;
  headers: Record<string, string>;
}

const css = readFileSync(new URL('./page.css', import.meta.url), 'utf8');

/** Text as it stands in HTML, in content and in double-quoted attributes. */
export function escapeHtml(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;');
}

interface Page {
  title: string;
  /** One line above everything that says that this is a stand-in. */
  notice: string;
  /** HTML, escaped by the caller. */
  main: string;
  /** Further directives of the content security policy. */
  policy?: string[];
  status?: number;
}

/** A whole page: no script, one style sheet of its own. */
export function page({ title, notice, main, policy = ["form-action 'self'"], status = 200 }: Page): Answer {
  const body = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title>
<link rel="icon" href="data:,">
<link rel="stylesheet" href="/page.css">
</head>
<body>
<header class="notice">${escapeHtml(notice)}</header>
<main>
${main}
</main>
</body>
</html>
`;
  const directives = [
    "default-src 'none'",
    "style-src 'self'",
    'img-src data:',
    "base-uri 'none'",
    "frame-ancestors 'none'",
    ...policy,
  ];
  return {
    status,
    body,
    headers: {
      'content-type': 'text/html; charset=utf-8',
      'content-security-policy': directives.join('; '),
    },
  };
}

export function json(status: number, value: unknown, headers: Record<string, string> = {}): Answer {
  return {
    status,
    body: JSON.stringify(value, null, 2),
    headers: { 'content-type': 'application/json; charset=utf-8', ...headers },
  };
}

export function redirect(location: string): Answer {
  return { status: 303, body: '', headers: { location } };
}

/** The style sheet that all stand-in pages share. */
export function styleSheet(): Answer {
  return { status: 200, body: css, headers: { 'content-type': 'text/css; charset=utf-8' } };
}

/** The whole body as text; a body over `limitBytes` is an error, not a cut. */
export async function readBody(request: IncomingMessage, limitBytes = 1_000_000): Promise<string> {
  const chunks: Buffer[] = [];
  let size = 0;
  const stream: AsyncIterable<Buffer> = request;
  for await (const bytes of stream) {
    size += bytes.length;
    if (size > limitBytes) throw new Error(`The request is longer than ${limitBytes} bytes`);
    chunks.push(bytes);
  }
  return Buffer.concat(chunks).toString('utf8');
}

/**
 * Whether a browser page of another site made this request: by a name that only points here (Host), or by a
 * form of its own (Origin).
 */
export function isForeign(request: IncomingMessage): boolean {
  const { host, origin } = request.headers;
  if (!host || !isLoopback(`http://${host}`)) return true;
  return origin !== undefined && origin !== `http://${host}`;
}

export function send(response: ServerResponse, answer: Answer): void {
  response.writeHead(answer.status, {
    'cache-control': 'no-store',
    'x-content-type-options': 'nosniff',
    // Not `no-referrer`: under it browsers send their forms with `Origin: null`, as if from another site.
    'referrer-policy': 'same-origin',
    ...answer.headers,
  });
  response.end(answer.body);
}

/** Listens on this machine only; port 0 takes a free one. Gives the base address without a slash at its end. */
export async function listen(server: Server, port: number): Promise<string> {
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject);
      resolve();
    });
  });
  const address = server.address();
  if (address === null || typeof address === 'string') throw new Error('The server has no port');
  return `http://127.0.0.1:${address.port}`;
}

/** Ends idle connections at once and waits for requests under way. */
export async function stop(server: Server): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    server.close((error) => {
      if (error) reject(error);
      else resolve();
    });
    server.closeIdleConnections();
  });
}
