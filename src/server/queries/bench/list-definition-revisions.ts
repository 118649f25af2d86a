import { max } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { limitRuleRevisions, quantityRevisions } from '~/server/db/schema';

/** The newest revision of each quantity, or of each emission rule, of the works' own, by key; those that ship have none. */
export async function listDefinitionRevisions(
  reader: Reader,
  table: 'quantities' | 'limit_rules',
): Promise<ReadonlyMap<string, number>> {
  const of = table === 'quantities' ? quantityRevisions : limitRuleRevisions;
  const rows = await reader
    .select({ key: of.key, revision: max(of.revision) })
    .from(of)
    .groupBy(of.key);
  return new Map(rows.map(({ key, revision }) => [key, revision ?? 0]));
}
