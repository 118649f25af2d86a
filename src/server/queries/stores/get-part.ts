import { asc, desc, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import {
  bins,
  bomLines,
  bomRevisions,
  lots,
  models,
  partAlternates,
  parts,
  storeEntries,
  suppliers,
  userProfiles,
} from '~/server/db/schema';
import { lotColumns } from './lot-columns';

/** A part with its lots, where it is used, what may stand in its place, and its newest store entries. */
export async function getPart(reader: Reader, number: string) {
  const [part] = await reader.select().from(parts).where(eq(parts.number, number));
  if (part === undefined) return null;
  const [ofPart, usedIn, alternates, entries] = await Promise.all([
    reader
      .select(lotColumns)
      .from(lots)
      .leftJoin(suppliers, eq(suppliers.id, lots.supplierId))
      .leftJoin(bins, eq(bins.id, lots.binId))
      .where(eq(lots.partId, part.id))
      .orderBy(asc(lots.receivedAt), asc(lots.id)),
    reader
      .select({
        model: models.name,
        slug: models.slug,
        letter: bomRevisions.letter,
        state: bomRevisions.state,
        quantity: bomLines.quantity,
        designators: bomLines.designators,
        condition: bomLines.condition,
      })
      .from(bomLines)
      .innerJoin(bomRevisions, eq(bomRevisions.id, bomLines.bomRevisionId))
      .innerJoin(models, eq(models.id, bomRevisions.modelId))
      .where(eq(bomLines.partId, part.id))
      .orderBy(asc(models.name), desc(bomRevisions.id), asc(bomLines.lineNo)),
    reader
      .select({
        number: parts.number,
        description: parts.description,
        rank: partAlternates.rank,
        model: models.name,
      })
      .from(partAlternates)
      .innerJoin(parts, eq(parts.id, partAlternates.alternatePartId))
      .leftJoin(models, eq(models.id, partAlternates.modelId))
      .where(eq(partAlternates.partId, part.id))
      .orderBy(asc(partAlternates.rank)),
    reader
      .select({
        id: storeEntries.id,
        lot: lots.number,
        kind: storeEntries.kind,
        quantity: storeEntries.quantity,
        reason: storeEntries.reason,
        at: storeEntries.at,
        by: userProfiles.name,
      })
      .from(storeEntries)
      .innerJoin(lots, eq(lots.id, storeEntries.lotId))
      .leftJoin(userProfiles, eq(userProfiles.userId, storeEntries.byUserId))
      .where(eq(lots.partId, part.id))
      .orderBy(desc(storeEntries.id))
      .limit(40),
  ]);
  return { part, lots: ofPart, usedIn, alternates, entries };
}
