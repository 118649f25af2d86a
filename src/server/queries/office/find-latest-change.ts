import { and, desc, eq, or } from 'drizzle-orm';
import type { LiveSubject } from '~/schemas/live';
import type { Reader } from '~/server/db/client';
import { ledgerEntries, ledgerSubjects } from '~/server/db/schema';

/** The newest entry of the ledger of changes about any of these things; null where there is none. */
export async function findLatestChange(
  reader: Reader,
  subjects: readonly LiveSubject[],
): Promise<{ id: number; at: Date } | null> {
  const [row] = await reader
    .select({ id: ledgerEntries.id, at: ledgerEntries.at })
    .from(ledgerSubjects)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
    .where(
      or(
        ...subjects.map(({ type, id }) =>
          and(
            eq(ledgerSubjects.subjectType, type),
            id === null ? undefined : eq(ledgerSubjects.subjectId, id),
          ),
        ),
      ),
    )
    .orderBy(desc(ledgerSubjects.ledgerEntryId))
    .limit(1);
  return row ?? null;
}
