import { and, asc, eq, gt, inArray } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { bins, lots, parts } from '~/server/db/schema';

export interface LotChoice {
  number: string;
  partId: number;
  partNumber: string;
  onHand: number;
  bin: string | null;
}

/** Usable lots of some parts that have anything left, oldest first. */
export async function listLotsToChoose(reader: Reader, partIds: readonly number[]): Promise<LotChoice[]> {
  if (partIds.length === 0) return [];
  return reader
    .select({
      number: lots.number,
      partId: lots.partId,
      partNumber: parts.number,
      onHand: lots.onHand,
      bin: bins.code,
    })
    .from(lots)
    .innerJoin(parts, eq(parts.id, lots.partId))
    .leftJoin(bins, eq(bins.id, lots.binId))
    .where(and(inArray(lots.partId, [...partIds]), eq(lots.state, 'usable'), gt(lots.onHand, 0)))
    .orderBy(asc(lots.receivedAt), asc(lots.id));
}
