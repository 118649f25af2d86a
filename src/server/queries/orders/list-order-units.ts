import { and, asc, eq, inArray, isNull, max, or } from 'drizzle-orm';
import type { UnitStage, WorkStage } from '~/domain/production/stages';
import type { Reader } from '~/server/db/client';
import {
  buildSteps,
  certificates,
  holds,
  models,
  orderLines,
  reworks,
  shipments,
  shipmentUnits,
  stepRecords,
  testRuns,
  units,
} from '~/server/db/schema';
import { oldestFirst } from '~/server/queries/certificates/order';

/** A unit as its buyer sees it: how far it is, what was issued for it, and where it went. */
export interface OrderUnit {
  id: number;
  serial: string;
  modelName: string;
  stage: UnitStage;
  onHold: boolean;
  openRework: boolean;
  finishedAt: Partial<Record<WorkStage, Date>>;
  /** The newest one that was issued. */
  certificate: { code: string; number: string; letter: string; issuedAt: Date; hasPdf: boolean } | null;
  shipment: { carrier: string; trackingNumber: string | null; shippedAt: Date | null } | null;
}

/** The units of an order, in order of serial number. */
export async function listOrderUnits(reader: Reader, orderId: number): Promise<OrderUnit[]> {
  const rows = await reader
    .select({
      id: units.id,
      serial: units.serial,
      modelName: models.name,
      stage: units.stage,
      batchId: units.batchId,
    })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .innerJoin(models, eq(models.id, units.modelId))
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(units.id));
  if (rows.length === 0) return [];
  const ids = rows.map(({ id }) => id);
  const batchIds = rows.flatMap(({ batchId }) => (batchId === null ? [] : [batchId]));
  const steps = await reader
    .select({ unitId: stepRecords.unitId, stage: buildSteps.stage, at: max(stepRecords.doneAt) })
    .from(stepRecords)
    .innerJoin(buildSteps, eq(buildSteps.id, stepRecords.buildStepId))
    .where(inArray(stepRecords.unitId, ids))
    .groupBy(stepRecords.unitId, buildSteps.stage);
  const runs = await reader
    .select({ unitId: testRuns.unitId, at: max(testRuns.closedAt) })
    .from(testRuns)
    .where(and(inArray(testRuns.unitId, ids), eq(testRuns.state, 'closed')))
    .groupBy(testRuns.unitId);
  const issued = await reader
    .select({
      unitId: certificates.unitId,
      code: certificates.code,
      number: certificates.number,
      letter: certificates.letter,
      issuedAt: certificates.issuedAt,
      fileId: certificates.fileId,
    })
    .from(certificates)
    .where(inArray(certificates.unitId, ids))
    .orderBy(...oldestFirst);
  const parcels = await reader
    .select({
      unitId: shipmentUnits.unitId,
      carrier: shipments.carrier,
      trackingNumber: shipments.trackingNumber,
      packedAt: shipments.packedAt,
      shippedAt: shipments.shippedAt,
    })
    .from(shipmentUnits)
    .innerJoin(shipments, eq(shipments.id, shipmentUnits.shipmentId))
    .where(inArray(shipmentUnits.unitId, ids))
    .orderBy(asc(shipments.id));
  const stops = await reader
    .select({ type: holds.subjectType, id: holds.subjectId })
    .from(holds)
    .where(
      and(
        isNull(holds.endedAt),
        or(
          and(eq(holds.subjectType, 'unit'), inArray(holds.subjectId, ids)),
          and(eq(holds.subjectType, 'batch'), inArray(holds.subjectId, batchIds.length > 0 ? batchIds : [0])),
          and(eq(holds.subjectType, 'order'), eq(holds.subjectId, orderId)),
        ),
      ),
    );
  const open = await reader
    .select({ unitId: reworks.unitId })
    .from(reworks)
    .where(and(inArray(reworks.unitId, ids), isNull(reworks.closedAt)));

  return rows.map(({ batchId, ...unit }) => {
    const certificate = issued.findLast(({ unitId }) => unitId === unit.id);
    const parcel = parcels.findLast(({ unitId }) => unitId === unit.id);
    const finishedAt: Partial<Record<WorkStage, Date>> = {};
    for (const { unitId, stage, at } of steps) if (unitId === unit.id && at !== null) finishedAt[stage] = at;
    const tested = runs.find(({ unitId }) => unitId === unit.id)?.at ?? null;
    if (tested !== null) finishedAt.final_test = tested;
    if (parcel !== undefined) finishedAt.pack = parcel.packedAt;
    if (parcel?.shippedAt) finishedAt.ship = parcel.shippedAt;
    return {
      ...unit,
      onHold: stops.some(
        ({ type, id }) =>
          type === 'order' || (type === 'unit' && id === unit.id) || (type === 'batch' && id === batchId),
      ),
      openRework: open.some(({ unitId }) => unitId === unit.id),
      finishedAt,
      certificate:
        certificate === undefined
          ? null
          : {
              code: certificate.code,
              number: certificate.number,
              letter: certificate.letter,
              issuedAt: certificate.issuedAt,
              hasPdf: certificate.fileId !== null,
            },
      shipment:
        parcel === undefined
          ? null
          : { carrier: parcel.carrier, trackingNumber: parcel.trackingNumber, shippedAt: parcel.shippedAt },
    };
  });
}
