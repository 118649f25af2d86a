import { sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { outbox } from '~/server/db/schema';

/** What the health door tells: that the database answers, and how far the outbox is behind. */
export async function readHealth(reader: Reader, now: Date) {
  const [row] = await reader
    .select({
      waiting: sql<string>`coalesce(sum(${outbox.doneAt} is null and ${outbox.gaveUpAt} is null), 0)`,
      gaveUp: sql<string>`coalesce(sum(${outbox.gaveUpAt} is not null), 0)`,
      oldest:
        sql<Date | null>`min(case when ${outbox.doneAt} is null and ${outbox.gaveUpAt} is null then ${outbox.createdAt} end)`.mapWith(
          outbox.createdAt,
        ),
    })
    .from(outbox);
  const oldest = row?.oldest ?? null;
  return {
    database: 'up' as const,
    outbox: {
      waiting: Number(row?.waiting ?? 0),
      gaveUp: Number(row?.gaveUp ?? 0),
      oldestSeconds:
        oldest === null ? null : Math.max(0, Math.round((now.getTime() - oldest.getTime()) / 1000)),
    },
  };
}
