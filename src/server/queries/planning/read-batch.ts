import { and, asc, eq, inArray, isNull, or, sql } from 'drizzle-orm';
import type { BatchState } from '~/domain/planning/batch-status';
import { freePlaces } from '~/domain/orders/checkout';
import type { UnitStage } from '~/domain/production/stages';
import type { Reader } from '~/server/db/client';
import {
  batches,
  bomRevisions,
  buildSheetRevisions,
  contacts,
  holds,
  models,
  orderLines,
  orders,
  reworks,
  testPlanRevisions,
  units,
  userProfiles,
} from '~/server/db/schema';

export interface BatchUnit {
  serial: string;
  stage: UnitStage;
  callSign: string | null;
  /** The date its order was sold with, or the batch's. */
  dueOn: string | null;
  isLate: boolean;
  onHold: boolean;
  openRework: boolean;
}

export interface BatchView {
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
  price: { minor: number; depositMinor: number | null; currency: string } | null;
  /** The revisions it is built to. */
  revisions: { bom: string; buildSheet: string; testPlan: string };
  createdAt: Date;
  closedAt: Date | null;
  version: number;
  holds: { on: string; reason: string; placedAt: Date; by: string }[];
  /** Late ones first, then by the day they are due. */
  units: BatchUnit[];
}

/**
 * A batch with its units; null where there is none.
 *
 * @param today in the works' zone, `YYYY-MM-DD`: what was due before it and is still here is late
 */
export async function readBatch(
  reader: Reader,
  number: number,
  { withPrices, today }: { withPrices: boolean; today: string },
): Promise<BatchView | null> {
  const [found] = await reader
    .select({
      batch: batches,
      modelName: models.name,
      modelSlug: models.slug,
      bom: bomRevisions.letter,
      buildSheet: buildSheetRevisions.letter,
      testPlan: testPlanRevisions.letter,
    })
    .from(batches)
    .innerJoin(models, eq(models.id, batches.modelId))
    .innerJoin(bomRevisions, eq(bomRevisions.id, batches.bomRevisionId))
    .innerJoin(buildSheetRevisions, eq(buildSheetRevisions.id, batches.buildSheetRevisionId))
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, batches.testPlanRevisionId))
    .where(eq(batches.number, number));
  if (found === undefined) return null;
  const { batch, modelName, modelSlug, bom, buildSheet, testPlan } = found;
  const { id, state, places, placesTaken: taken, placesHeld: held, estimatedOn, createdAt, closedAt } = batch;
  return {
    id,
    number: batch.number,
    modelName,
    modelSlug,
    state,
    places,
    taken,
    held,
    free: freePlaces({ places, taken, held }),
    estimatedOn,
    price: withPrices
      ? { minor: batch.priceMinor, depositMinor: batch.depositMinor, currency: batch.currency }
      : null,
    revisions: { bom, buildSheet, testPlan },
    createdAt,
    closedAt,
    version: batch.version,
    holds: await listHolds(reader, batch.id),
    units: await listUnits(reader, batch, today),
  };
}

async function listUnits(
  reader: Reader,
  batch: { id: number; estimatedOn: string | null },
  today: string,
): Promise<BatchUnit[]> {
  const rows = await reader
    .select({
      serial: units.serial,
      stage: units.stage,
      callSign: contacts.callSign,
      promisedOn: orders.promisedOn,
      onHold: sql<number>`exists (select 1 from ${holds} where ${holds.endedAt} is null and ((${holds.subjectType} = 'unit' and ${holds.subjectId} = ${units.id}) or (${holds.subjectType} = 'batch' and ${holds.subjectId} = ${units.batchId}) or (${holds.subjectType} = 'order' and ${holds.subjectId} = ${orders.id})))`,
      openRework: sql<number>`exists (select 1 from ${reworks} where ${reworks.unitId} = ${units.id} and ${reworks.closedAt} is null)`,
    })
    .from(units)
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(contacts, eq(contacts.id, orders.contactId))
    .where(eq(units.batchId, batch.id))
    .orderBy(asc(units.id));
  return rows
    .map(({ promisedOn, onHold, openRework, ...unit }) => {
      const dueOn = promisedOn ?? batch.estimatedOn;
      return {
        ...unit,
        dueOn,
        isLate: unit.stage !== 'gone' && dueOn !== null && dueOn < today,
        onHold: onHold === 1,
        openRework: openRework === 1,
      };
    })
    .sort((a, b) => Number(b.isLate) - Number(a.isLate) || (a.dueOn ?? '9').localeCompare(b.dueOn ?? '9'));
}

async function listHolds(reader: Reader, batchId: number): Promise<BatchView['holds']> {
  const unitIds = reader.select({ id: units.id }).from(units).where(eq(units.batchId, batchId));
  const rows = await reader
    .select({ serial: units.serial, reason: holds.reason, placedAt: holds.placedAt, by: userProfiles.name })
    .from(holds)
    .leftJoin(units, and(eq(holds.subjectType, 'unit'), eq(units.id, holds.subjectId)))
    .leftJoin(userProfiles, eq(userProfiles.userId, holds.ownerUserId))
    .where(
      and(
        isNull(holds.endedAt),
        or(
          and(eq(holds.subjectType, 'batch'), eq(holds.subjectId, batchId)),
          and(eq(holds.subjectType, 'unit'), inArray(holds.subjectId, unitIds)),
        ),
      ),
    )
    .orderBy(asc(holds.placedAt));
  return rows.map(({ serial, by, ...hold }) => ({
    ...hold,
    on: serial ?? 'the batch',
    by: by ?? 'somebody',
  }));
}
