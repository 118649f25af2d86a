import { asc } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { bins, parts, suppliers } from '~/server/db/schema';

/** What the form for a receipt offers: parts, suppliers and bins of the books. */
export async function listReceiptChoices(reader: Reader) {
  const [ofParts, ofSuppliers, ofBins] = await Promise.all([
    reader
      .select({ number: parts.number, description: parts.description })
      .from(parts)
      .orderBy(asc(parts.number)),
    reader.select({ name: suppliers.name }).from(suppliers).orderBy(asc(suppliers.name)),
    reader.select({ code: bins.code }).from(bins).orderBy(asc(bins.code)),
  ]);
  return { parts: ofParts, suppliers: ofSuppliers, bins: ofBins };
}
