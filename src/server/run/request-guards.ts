import type { IncomingMessage } from 'node:http';
import { isIP } from 'node:net';

/** A request that is answered before the application sees it. */
export interface Refusal {
  status: number;
  reason: string;
}

/** The largest body that any route may ask for; routes set their own, lower caps. */
export const maxBodyBytes = 16 * 1024 * 1024;

const methods = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS']);
/** Doors that the framework opens by itself and this application does not use. */
const unusedDoors = ['/_server-islands', '/_actions', '/_image'];

/** Refuses request targets that a router and a guard may read differently. */
export function refuseTarget(method: string | undefined, url: string | undefined): Refusal | undefined {
  if (method === undefined || !methods.has(method))
    return { status: 405, reason: 'This method is not served.' };
  const path = pathOf(url ?? '');
  const odd = { status: 400, reason: 'This address is not well formed.' };
  if (!path.startsWith('/') || /\/\/|\\|%2f|%5c|%00|[^\x21-\x7e]/i.test(path)) return odd;
  let decoded: string;
  try {
    decoded = decodeURIComponent(path);
  } catch {
    return odd;
  }
  if (decoded.split('/').some((segment) => segment === '.' || segment === '..')) return odd;
  const lower = decoded.toLowerCase();
  if (unusedDoors.some((door) => lower === door || lower.startsWith(`${door}/`))) {
    return { status: 404, reason: 'There is nothing here.' };
  }
  return undefined;
}

/** The path of a request target, without query and fragment. */
export function pathOf(url: string): string {
  return url.split(/[?#]/, 1)[0] ?? '';
}

const loopbackNames = new Set(['localhost', '127.0.0.1', '[::1]']);

/** Whether the base address is this machine's own. */
export function isLoopback(baseUrl: URL): boolean {
  return loopbackNames.has(baseUrl.hostname);
}

/** The address to listen on for a base address of this machine. */
export function loopbackAddress(baseUrl: URL): string {
  return baseUrl.hostname === '[::1]' ? '::1' : '127.0.0.1';
}

/** Refuses a Host other than the base address's; on loopback its other names will do, with the same port. */
export function refuseHost(host: string | undefined, baseUrl: URL): Refusal | undefined {
  const refusal = { status: 421, reason: `This server answers for ${baseUrl.host} only.` };
  if (host === undefined || !/^[a-z0-9.\-:[\]]+$/i.test(host)) return refusal;
  if (!URL.canParse(`${baseUrl.protocol}//${host}`)) return refusal;
  const asked = new URL(`${baseUrl.protocol}//${host}`);
  if (asked.host === baseUrl.host) return undefined;
  const aliased = isLoopback(baseUrl) && loopbackNames.has(asked.hostname) && asked.port === baseUrl.port;
  return aliased ? undefined : refusal;
}

/** Refuses bodies without a stated length and bodies over the cap. */
export function refuseBody(headers: IncomingMessage['headers']): Refusal | undefined {
  if (headers['transfer-encoding'] !== undefined) {
    return { status: 411, reason: 'State the length of the body (Content-Length).' };
  }
  const length = headers['content-length'];
  if (length === undefined || Number(length) <= maxBodyBytes) return undefined;
  return { status: 413, reason: 'The body is too large.' };
}

/** An address as written in settings and as sockets give it: IPv4 in IPv6 clothes becomes plain IPv4. */
function plainAddress(address: string): string {
  return address.trim().replace(/^::ffff:(?=\d+\.)/i, '');
}

/**
 * The caller's own address: the peer's, or, where the peer is one of our proxies, the nearest address in
 * X-Forwarded-For that is not.
 *
 * @param trustedProxies addresses of the proxies in front of this server
 */
export function callerAddress(
  peer: string,
  forwardedFor: string | undefined,
  trustedProxies: ReadonlySet<string>,
): string {
  let address = plainAddress(peer);
  const hops = (forwardedFor ?? '').split(',').map(plainAddress);
  while (trustedProxies.has(address)) {
    const next = hops.pop();
    if (next === undefined || isIP(next) === 0) break;
    address = next;
  }
  return address;
}

/** Reads the setting that names the proxies: addresses with commas between them. */
export function parseProxies(setting: string | undefined): ReadonlySet<string> {
  return new Set(
    (setting ?? '')
      .split(',')
      .map(plainAddress)
      .filter((address) => isIP(address) !== 0),
  );
}
