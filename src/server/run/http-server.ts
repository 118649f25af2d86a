import { randomUUID } from 'node:crypto';
import {
  createServer,
  STATUS_CODES,
  type IncomingMessage,
  type Server,
  type ServerResponse,
} from 'node:http';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import compression from 'compression';
import type { Logger } from 'pino';
import { callerAddress, pathOf, refuseBody, refuseHost, refuseTarget, type Refusal } from './request-guards';
import { staticFiles } from './static-files';

/** What the built application exports for a server of our own. */
export type ApplicationHandler = (request: IncomingMessage, response: ServerResponse) => Promise<void>;

interface Options {
  application: ApplicationHandler;
  /** Folder of the build; its `client` folder is served as it is. */
  buildFolder: string;
  /** The address people use; decides the Host check, the protocol inside and HSTS. */
  baseUrl: URL;
  trustedProxies: ReadonlySet<string>;
  log: Pick<Logger, 'info' | 'error'>;
}

/** A server that takes requests, and the way to end it. */
export interface WebServer {
  server: Server;
  /** Ends streams, lets requests under way finish for at most so long, then closes what is left. */
  stop(graceMs: number): Promise<void>;
}

function setSecurityHeaders(response: ServerResponse, baseUrl: URL): void {
  response.setHeader('X-Content-Type-Options', 'nosniff');
  response.setHeader('X-Frame-Options', 'DENY');
  response.setHeader('Referrer-Policy', 'strict-origin-when-cross-origin');
  response.setHeader(
    'Permissions-Policy',
    'camera=(self), microphone=(), geolocation=(), payment=(), usb=()',
  );
  response.setHeader('Cross-Origin-Opener-Policy', 'same-origin');
  if (baseUrl.protocol === 'https:') {
    response.setHeader('Strict-Transport-Security', 'max-age=31536000; includeSubDomains');
  }
}

/** Replaces what a caller claims about itself by what this server knows. */
function setForwarded(
  request: IncomingMessage,
  requestId: string,
  { baseUrl, trustedProxies }: Options,
): void {
  const claimed = request.headers['x-forwarded-for'];
  const caller = callerAddress(
    request.socket.remoteAddress ?? '',
    Array.isArray(claimed) ? claimed.join(',') : claimed,
    trustedProxies,
  );
  for (const name of Object.keys(request.headers)) {
    if (name.startsWith('x-forwarded-') || name === 'forwarded')
      Reflect.deleteProperty(request.headers, name);
  }
  request.headers['x-forwarded-for'] = caller;
  request.headers['x-forwarded-proto'] = baseUrl.protocol.slice(0, -1);
  request.headers['x-request-id'] = requestId;
}

function refuse(response: ServerResponse, { status, reason }: Refusal, requestId: string): void {
  const body = JSON.stringify({
    type: 'about:blank',
    title: STATUS_CODES[status],
    status,
    detail: reason,
    instance: `urn:rigwright:request:${requestId}`,
  });
  // The body of a refused request is not read, so the connection cannot be used again.
  response.writeHead(status, {
    'Content-Type': 'application/problem+json',
    'Content-Length': Buffer.byteLength(body),
    'Cache-Control': 'no-store',
    Connection: 'close',
  });
  response.end(body);
}

function isStream(response: ServerResponse): boolean {
  return String(response.getHeader('content-type')).startsWith('text/event-stream');
}

// Typed for Express, made for node:http as well.
const compress = compression({
  // An event has to leave at once; a compressor would hold it back.
  filter: (request, response) => !isStream(response) && compression.filter(request, response),
}) as unknown as (request: IncomingMessage, response: ServerResponse, next: () => void) => void;

/** Makes the server; it does not listen yet. */
export async function createWebServer(options: Options): Promise<WebServer> {
  const serveStatic = await staticFiles(join(options.buildFolder, 'client'));
  const open = new Set<ServerResponse>();

  function handle(request: IncomingMessage, response: ServerResponse, beforeBody: () => void): void {
    const startedAt = performance.now();
    const requestId = randomUUID();
    open.add(response);
    response.once('close', () => {
      open.delete(response);
      // No query: it may hold a token.
      options.log.info(
        {
          requestId,
          method: request.method,
          path: pathOf(request.url ?? ''),
          status: response.statusCode,
          ms: Math.round(performance.now() - startedAt),
          ...(response.writableFinished ? {} : { cutOff: true }),
        },
        'request',
      );
    });
    response.setHeader('X-Request-Id', requestId);
    setSecurityHeaders(response, options.baseUrl);
    const refusal =
      refuseTarget(request.method, request.url) ??
      refuseHost(request.headers.host, options.baseUrl) ??
      refuseBody(request.headers);
    if (refusal) {
      refuse(response, refusal, requestId);
      return;
    }
    beforeBody();
    setForwarded(request, requestId, options);
    compress(request, response, () => {
      if (serveStatic(pathOf(request.url ?? ''), request, response)) return;
      options.application(request, response).catch((error: unknown) => {
        options.log.error({ requestId, err: error }, 'request failed');
        if (response.headersSent) response.destroy();
        else refuse(response, { status: 500, reason: 'Something went wrong here.' }, requestId);
      });
    });
  }

  const server = createServer({ requestTimeout: 60_000, headersTimeout: 15_000, keepAliveTimeout: 20_000 });
  server.on('request', (request, response) => handle(request, response, () => undefined));
  server.on('checkContinue', (request, response) =>
    handle(request, response, () => response.writeContinue()),
  );

  return {
    server,
    async stop(graceMs) {
      const closed = new Promise<true>((resolve) => server.close(() => resolve(true)));
      for (const response of open) {
        if (isStream(response)) response.destroy();
        else if (!response.headersSent) response.setHeader('Connection', 'close');
      }
      const until = performance.now() + graceMs;
      while (performance.now() < until) {
        server.closeIdleConnections();
        if (await Promise.race([closed, pause(50)])) return;
      }
      server.closeAllConnections();
      await closed;
    },
  };
}
