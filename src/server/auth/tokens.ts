import { createHash, createHmac, randomBytes } from 'node:crypto';

/** An unguessable token for a cookie: 32 random bytes, base64url. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

/** What is kept of a token: its SHA-256 in hex. */
export function tokenHash(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

/**
 * The token of a link that goes out by mail. It follows from the works' secret, so that the letter can be
 * written after the commit, and again, without the token being kept anywhere.
 *
 * @param secret the setting `RIGWRIGHT_SECRET`
 * @param id primary key of the order or of the row in `sign_in_links`
 */
export function linkToken(secret: string, purpose: 'order' | 'sign_in', id: number): string {
  return createHmac('sha256', secret).update(`${purpose}-link:${id}`).digest('base64url');
}
