import { asc, eq, isNull, or } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { partAlternates, parts } from '~/server/db/schema';

export interface Alternate {
  /** The part of the BOM. */
  partId: number;
  /** What may stand in its place. */
  alternatePartId: number;
  alternateNumber: string;
  rank: number;
}

/** The parts approved in place of others for a model, or everywhere, best first. */
export async function readAlternates(reader: Reader, modelId: number): Promise<Alternate[]> {
  return reader
    .select({
      partId: partAlternates.partId,
      alternatePartId: partAlternates.alternatePartId,
      alternateNumber: parts.number,
      rank: partAlternates.rank,
    })
    .from(partAlternates)
    .innerJoin(parts, eq(parts.id, partAlternates.alternatePartId))
    .where(or(eq(partAlternates.modelId, modelId), isNull(partAlternates.modelId)))
    .orderBy(asc(partAlternates.rank));
}
