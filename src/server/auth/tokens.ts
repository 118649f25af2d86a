import { createHash, randomBytes } from 'node:crypto';

/** An unguessable token for a cookie or a link: 32 random bytes, base64url. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

/** What is kept of a token: its SHA-256 in hex. */
export function tokenHash(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}
