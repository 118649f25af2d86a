import { sql } from 'drizzle-orm';
import type { WorksUse } from '~/domain/people/stations';
import type { Reader } from '~/server/db/client';
import { batches, orders, parts } from '~/server/db/schema';

/** Which rooms of the works are in use, by what the books hold. */
export async function readWorksUse(reader: Reader): Promise<WorksUse> {
  const holds = (table: typeof parts | typeof batches | typeof orders) =>
    reader
      .select({ one: sql<number>`1` })
      .from(table)
      .limit(1);
  const [part, batch, order] = await Promise.all([holds(parts), holds(batches), holds(orders)]);
  return { hasPart: part.length > 0, hasBatch: batch.length > 0, hasOrder: order.length > 0 };
}
