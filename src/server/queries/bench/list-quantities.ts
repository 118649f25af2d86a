import { asc, isNull } from 'drizzle-orm';
import { quantityBook } from '~/domain/bench/quantities';
import type { QuantityBook } from '~/domain/bench/quantities';
import { quantitySchema } from '~/schemas/bench-definitions';
import type { Reader } from '~/server/db/client';
import { quantityRevisions } from '~/server/db/schema';

/** All quantities of the works: those that ship and its own. */
export async function listQuantities(reader: Reader): Promise<QuantityBook> {
  const rows = await reader
    .select({ definition: quantityRevisions.definition })
    .from(quantityRevisions)
    .where(isNull(quantityRevisions.retiredAt))
    .orderBy(asc(quantityRevisions.key));
  return quantityBook(rows.map(({ definition }) => quantitySchema.parse(definition)));
}
