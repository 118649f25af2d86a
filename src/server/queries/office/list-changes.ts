import { and, desc, eq, inArray, lt } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { ledgerEntries, ledgerSubjects, userProfiles } from '~/server/db/schema';

export interface Change {
  id: number;
  at: Date;
  actor: string;
  action: string;
  details: Record<string, unknown>;
  subjects: { type: string; id: number }[];
}

interface Wanted {
  /** Only what concerns this thing. */
  subject?: { type: string; id: number };
  /** Only older entries than this one, for the next page. */
  beforeId?: number;
  limit: number;
}

const others = {
  visitor: 'a visitor',
  provider: 'the payment provider',
  system: 'the program',
  user: 'somebody',
};

/** The ledger of changes, newest first. Names are looked up, so that an erased person's are gone here too. */
export async function listChanges(reader: Reader, { subject, beforeId, limit }: Wanted): Promise<Change[]> {
  const columns = {
    id: ledgerEntries.id,
    at: ledgerEntries.at,
    actorKind: ledgerEntries.actorKind,
    actorName: userProfiles.name,
    action: ledgerEntries.action,
    details: ledgerEntries.details,
  };
  const older = beforeId === undefined ? undefined : lt(ledgerEntries.id, beforeId);
  const rows =
    subject === undefined
      ? await reader
          .select(columns)
          .from(ledgerEntries)
          .leftJoin(userProfiles, eq(userProfiles.userId, ledgerEntries.actorUserId))
          .where(older)
          .orderBy(desc(ledgerEntries.id))
          .limit(limit)
      : await reader
          .select(columns)
          .from(ledgerSubjects)
          .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
          .leftJoin(userProfiles, eq(userProfiles.userId, ledgerEntries.actorUserId))
          .where(
            and(
              eq(ledgerSubjects.subjectType, subject.type),
              eq(ledgerSubjects.subjectId, subject.id),
              older,
            ),
          )
          .orderBy(desc(ledgerEntries.id))
          .limit(limit);
  const subjects = await subjectsOf(
    reader,
    rows.map(({ id }) => id),
  );
  return rows.map(({ actorKind, actorName, ...row }) => ({
    ...row,
    actor: actorName ?? others[actorKind],
    subjects: subjects.get(row.id) ?? [],
  }));
}

async function subjectsOf(reader: Reader, entryIds: number[]): Promise<Map<number, Change['subjects']>> {
  const found = new Map<number, Change['subjects']>();
  if (entryIds.length === 0) return found;
  const rows = await reader
    .select()
    .from(ledgerSubjects)
    .where(inArray(ledgerSubjects.ledgerEntryId, entryIds));
  for (const { ledgerEntryId, subjectType: type, subjectId: id } of rows) {
    found.set(ledgerEntryId, [...(found.get(ledgerEntryId) ?? []), { type, id }]);
  }
  return found;
}
