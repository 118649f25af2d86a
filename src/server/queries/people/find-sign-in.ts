import { eq, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { signInLinks, userProfiles, userRoles, users } from '~/server/db/schema';

/** What signing in by password needs; null where the address has no open account. */
export async function findSignIn(
  reader: Reader,
  email: string,
): Promise<{ userId: number; passwordHash: string | null; isStaff: boolean } | null> {
  const [row] = await reader
    .select({
      userId: users.id,
      passwordHash: users.passwordHash,
      disabledAt: users.disabledAt,
      roles: sql<number>`(select count(*) from ${userRoles} where ${userRoles.userId} = ${users.id})`,
    })
    .from(users)
    .innerJoin(userProfiles, eq(userProfiles.userId, users.id))
    .where(eq(userProfiles.email, email));
  return row === undefined || row.disabledAt !== null
    ? null
    : { userId: row.userId, passwordHash: row.passwordHash, isStaff: row.roles > 0 };
}

/** A one-time link by its token's hash, for the page that asks what it needs. Null where it is of no use. */
export async function findSignInLink(reader: Reader, hash: string, now: Date) {
  const [row] = await reader
    .select({
      id: signInLinks.id,
      purpose: signInLinks.purpose,
      expiresAt: signInLinks.expiresAt,
      usedAt: signInLinks.usedAt,
      name: userProfiles.name,
    })
    .from(signInLinks)
    .leftJoin(userProfiles, eq(userProfiles.userId, signInLinks.userId))
    .where(eq(signInLinks.tokenHash, hash));
  return row === undefined || row.usedAt !== null || row.expiresAt <= now ? null : row;
}
