import { desc, eq } from 'drizzle-orm';
import { knownScopes } from '~/domain/people/access-scopes';
import type { Reader } from '~/server/db/client';
import { accessTokens } from '~/server/db/schema';

/** A person's tokens, the newest first, the ones that open nothing any more among them. */
export async function listAccessTokens(reader: Reader, userId: number, now: Date) {
  const rows = await reader
    .select({
      id: accessTokens.id,
      name: accessTokens.name,
      scopes: accessTokens.scopes,
      createdAt: accessTokens.createdAt,
      expiresAt: accessTokens.expiresAt,
      lastUsedAt: accessTokens.lastUsedAt,
      revokedAt: accessTokens.revokedAt,
    })
    .from(accessTokens)
    .where(eq(accessTokens.userId, userId))
    .orderBy(desc(accessTokens.id));
  return rows.map(({ scopes, ...row }) => ({
    ...row,
    scopes: knownScopes(scopes),
    isOpen: row.revokedAt === null && (row.expiresAt === null || row.expiresAt > now),
  }));
}
