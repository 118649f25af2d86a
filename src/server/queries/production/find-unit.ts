import { and, eq, isNull, or } from 'drizzle-orm';
import { normaliseScan } from '~/lib/serials';
import type { Reader } from '~/server/db/client';
import {
  batches,
  bomRevisions,
  buildSheetRevisions,
  contacts,
  holds,
  models,
  optionGroups,
  options,
  orderLines,
  orders,
  reworks,
  units,
  userProfiles,
} from '~/server/db/schema';
import { sumPayments } from '~/server/queries/orders/sum-payments';
import { balanceDueMinor } from '~/domain/orders/status';

export interface UnitHold {
  id: number;
  on: 'unit' | 'lot' | 'batch' | 'order';
  reason: string;
  owner: string;
  placedAt: Date;
}

export type FoundUnit = NonNullable<Awaited<ReturnType<typeof findUnit>>>;

/** A unit by its serial number as scanned or typed, with what its tag says; null where there is none. */
export async function findUnit(reader: Reader, serial: string) {
  const [found] = await reader
    .select({
      unit: units,
      modelName: models.name,
      modelSlug: models.slug,
      batchNumber: batches.number,
      bomLetter: bomRevisions.letter,
      buildSheetLetter: buildSheetRevisions.letter,
      orderId: orders.id,
      orderNumber: orders.number,
      orderTotalMinor: orders.totalMinor,
      promisedOn: orders.promisedOn,
      estimatedOn: batches.estimatedOn,
      callSign: contacts.callSign,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .leftJoin(bomRevisions, eq(bomRevisions.id, units.bomRevisionId))
    .leftJoin(buildSheetRevisions, eq(buildSheetRevisions.id, units.buildSheetRevisionId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(contacts, eq(contacts.id, orders.contactId))
    .where(eq(units.serial, normaliseScan(serial)));
  if (found === undefined) return null;
  const { unit, orderId, orderTotalMinor, ...rest } = found;
  const [openHolds, rework, labels, balanceDue] = await Promise.all([
    listOpenHolds(reader, { unitId: unit.id, batchId: unit.batchId, orderId }),
    reader
      .select({
        id: reworks.id,
        cause: reworks.cause,
        foundCause: reworks.foundCause,
        testRunId: reworks.testRunId,
      })
      .from(reworks)
      .where(and(eq(reworks.unitId, unit.id), isNull(reworks.closedAt))),
    readOptionLabels(reader, unit.modelId, unit.options),
    isBalanceDue(reader, orderId, orderTotalMinor),
  ]);
  return {
    ...unit,
    ...rest,
    holds: openHolds,
    openRework: rework[0] ?? null,
    optionLabels: labels,
    balanceDue,
    facts: { stage: unit.stage, holds: openHolds.length, openRework: rework.length > 0 },
  };
}

async function listOpenHolds(
  reader: Reader,
  { unitId, batchId, orderId }: { unitId: number; batchId: number | null; orderId: number | null },
): Promise<UnitHold[]> {
  const on = (type: 'unit' | 'batch' | 'order', id: number | null) =>
    id === null ? undefined : and(eq(holds.subjectType, type), eq(holds.subjectId, id));
  return reader
    .select({
      id: holds.id,
      on: holds.subjectType,
      reason: holds.reason,
      owner: userProfiles.name,
      placedAt: holds.placedAt,
    })
    .from(holds)
    .innerJoin(userProfiles, eq(userProfiles.userId, holds.ownerUserId))
    .where(and(isNull(holds.endedAt), or(on('unit', unitId), on('batch', batchId), on('order', orderId))))
    .orderBy(holds.id);
}

/** In the order of the panel, as the shop words them. */
async function readOptionLabels(reader: Reader, modelId: number, keys: readonly string[]): Promise<string[]> {
  const rows = await reader
    .select({ key: options.key, label: options.label })
    .from(options)
    .innerJoin(optionGroups, eq(optionGroups.id, options.optionGroupId))
    .where(eq(optionGroups.modelId, modelId))
    .orderBy(optionGroups.position, options.position);
  return rows.filter(({ key }) => keys.includes(key)).map(({ label }) => label);
}

async function isBalanceDue(
  reader: Reader,
  orderId: number | null,
  totalMinor: number | null,
): Promise<boolean> {
  if (orderId === null || totalMinor === null) return false;
  return balanceDueMinor({ totalMinor, ...(await sumPayments(reader, orderId)) }) > 0;
}
