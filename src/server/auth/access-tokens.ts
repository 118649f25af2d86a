import { and, eq, isNull, lt, or } from 'drizzle-orm';
import { knownScopes } from '~/domain/people/access-scopes';
import type { AccessScope } from '~/domain/people/access-scopes';
import { db } from '~/server/db/client';
import { accessTokens } from '~/server/db/schema';
import { letIn } from './sessions';
import type { SignedIn } from './sessions';
import { newToken, tokenHash } from './tokens';

/** What a request's bearer token stands for. */
export type Access =
  { ok: true; tokenId: number; scopes: AccessScope[]; person: SignedIn } | { ok: false; reason: string };

/** Tells a token of ours from any other string, in a log or a script that was left lying about. */
const prefix = 'rw_';
const usedEveryMs = 60_000;

/** A token for a script; the database keeps only its hash. */
export function newAccessToken(): string {
  return prefix + newToken();
}

/** The token of an `Authorization: Bearer …` header; null where there is none. Other schemes are a proxy's own. */
export function bearerOf(headers: Headers): string | null {
  const header = headers.get('authorization')?.trim() ?? '';
  return /^bearer(?=\s|$)/i.test(header) ? header.slice('bearer'.length).trim() : null;
}

/** The person and scopes behind a bearer token, or why it opens nothing. */
export async function accessOf(token: string, now: Date): Promise<Access> {
  const [row] = await db()
    .select()
    .from(accessTokens)
    .where(eq(accessTokens.tokenHash, tokenHash(token)));
  if (row === undefined || !token.startsWith(prefix)) {
    return { ok: false, reason: 'There is no such access token. Send it whole, as it was shown.' };
  }
  if (row.revokedAt !== null) return { ok: false, reason: 'This access token was revoked. Make another.' };
  if (row.expiresAt !== null && row.expiresAt <= now) {
    return { ok: false, reason: 'This access token has expired. Make another.' };
  }
  const person = await letIn(row.userId);
  if (person === null) return { ok: false, reason: 'The person of this access token is no longer let in.' };
  await noteUse(row.id, now);
  return { ok: true, tokenId: row.id, scopes: knownScopes(row.scopes), person };
}

/**
 * Keeps when a token was last used, at most once a minute. Like the prolonging of a session it changes nothing of
 * the works, so it stands outside of the ledger of changes.
 */
async function noteUse(tokenId: number, now: Date): Promise<void> {
  const since = new Date(now.getTime() - usedEveryMs);
  await db()
    .update(accessTokens)
    .set({ lastUsedAt: now })
    .where(
      and(
        eq(accessTokens.id, tokenId),
        or(isNull(accessTokens.lastUsedAt), lt(accessTokens.lastUsedAt, since)),
      ),
    );
}
