import { and, eq, desc } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { ledgerEntries, ledgerSubjects, signInLinks, userProfiles, userRoles } from '~/server/db/schema';

/** What the letter that carries a one-time link needs; null where the link or its person is gone. */
export async function readLinkLetter(reader: Reader, signInLinkId: number) {
  const [link] = await reader
    .select({
      id: signInLinks.id,
      userId: userProfiles.userId,
      email: userProfiles.email,
      createdAt: signInLinks.createdAt,
      expiresAt: signInLinks.expiresAt,
      usedAt: signInLinks.usedAt,
    })
    .from(signInLinks)
    .innerJoin(userProfiles, eq(userProfiles.userId, signInLinks.userId))
    .where(eq(signInLinks.id, signInLinkId));
  if (link === undefined || link.usedAt !== null) return null;
  const roles = await reader
    .select({ role: userRoles.role })
    .from(userRoles)
    .where(eq(userRoles.userId, link.userId));
  const [inviter] = await reader
    .select({ name: userProfiles.name })
    .from(ledgerSubjects)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
    .innerJoin(userProfiles, eq(userProfiles.userId, ledgerEntries.actorUserId))
    .where(
      and(
        eq(ledgerSubjects.subjectType, 'user'),
        eq(ledgerSubjects.subjectId, link.userId),
        eq(ledgerEntries.action, 'person.invite'),
      ),
    )
    .orderBy(desc(ledgerEntries.id))
    .limit(1);
  return { ...link, roles: roles.map(({ role }) => role), invitedBy: inviter?.name ?? null };
}
