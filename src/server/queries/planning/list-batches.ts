import { and, asc, desc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { BatchState } from '~/domain/planning/batch-status';
import { freePlaces } from '~/domain/orders/checkout';
import type { UnitStage } from '~/domain/production/stages';
import { groupBy } from '~/lib/group-by';
import type { Reader } from '~/server/db/client';
import { batches, holds, models, units } from '~/server/db/schema';

export interface BatchRow {
  id: number;
  number: number;
  modelName: string;
  modelSlug: string;
  state: BatchState;
  places: number;
  taken: number;
  held: number;
  free: number;
  estimatedOn: string | null;
  /** Null for people who do not see prices. */
  price: { minor: number; currency: string } | null;
  /** Units by where they are, in the order of the tag's stubs. */
  stages: { stage: UnitStage; count: number }[];
  /** Open holds on it or on its units. */
  holds: number;
}

/** All batches, those that take orders first, then the newest. */
export async function listBatches(
  reader: Reader,
  { withPrices, limit }: { withPrices: boolean; limit: number },
): Promise<BatchRow[]> {
  const rows = await reader
    .select({
      id: batches.id,
      number: batches.number,
      modelName: models.name,
      modelSlug: models.slug,
      state: batches.state,
      places: batches.places,
      taken: batches.placesTaken,
      held: batches.placesHeld,
      estimatedOn: batches.estimatedOn,
      priceMinor: batches.priceMinor,
      currency: batches.currency,
    })
    .from(batches)
    .innerJoin(models, eq(models.id, batches.modelId))
    .orderBy(sql`field(${batches.state}, 'building', 'open', 'planned', 'closed')`, desc(batches.number))
    .limit(limit);
  if (rows.length === 0) return [];
  const counted = await reader
    .select({ batchId: units.batchId, stage: units.stage, count: sql<number>`count(*)` })
    .from(units)
    .where(sql`${units.batchId} is not null`)
    .groupBy(units.batchId, units.stage)
    .orderBy(asc(units.stage));
  const heldBatch = sql<
    number | null
  >`case when ${holds.subjectType} = 'batch' then ${holds.subjectId} else ${units.batchId} end`;
  const stopped = await reader
    .select({ batchId: heldBatch, count: sql<number>`count(*)` })
    .from(holds)
    .leftJoin(units, and(eq(holds.subjectType, 'unit'), eq(units.id, holds.subjectId)))
    .where(and(isNull(holds.endedAt), inArray(holds.subjectType, ['batch', 'unit'])))
    .groupBy(heldBatch);
  const stagesOf = groupBy(counted, ({ batchId }) => batchId);
  return rows.map(({ priceMinor, currency, ...row }) => ({
    ...row,
    free: freePlaces(row),
    price: withPrices ? { minor: priceMinor, currency } : null,
    stages: (stagesOf.get(row.id) ?? []).map(({ stage, count }) => ({ stage, count })),
    holds: stopped.find(({ batchId }) => batchId === row.id)?.count ?? 0,
  }));
}
