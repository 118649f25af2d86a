import { asc, eq, inArray, max } from 'drizzle-orm';
import { mayLeave } from '~/domain/dispatch/gate';
import type { UnitStage } from '~/domain/production/stages';
import { groupBy } from '~/lib/group-by';
import type { Reader } from '~/server/db/client';
import {
  batches,
  contacts,
  models,
  orderLines,
  orders,
  shipments,
  shipmentUnits,
  units,
} from '~/server/db/schema';
import { readGateFacts } from './read-gate-facts';

export interface DispatchUnit {
  serial: string;
  modelName: string;
  options: string[];
  stage: UnitStage;
  /** It may be packed now. */
  isReady: boolean;
  /** The parcel in which it lies packed. */
  shipmentNumber: number | null;
  /** What is missing before it may leave, a sentence each. */
  missing: string[];
  certificate: { code: string; number: string } | null;
}

export interface DispatchOrder {
  id: number;
  number: number;
  callSign: string | null;
  destination: string;
  /** The date it was sold with, or else the batch's estimate. */
  dueOn: string | null;
  isLate: boolean;
  units: DispatchUnit[];
}

interface Wanted {
  /** In the works' zone, `YYYY-MM-DD`. */
  today: string;
  /** One order only, however far it is. */
  orderNumber?: number;
}

/**
 * Orders with a unit at dispatch, by the day they are due, with all units that are still here and what
 * each waits for.
 */
export async function listDispatch(reader: Reader, { today, orderNumber }: Wanted): Promise<DispatchOrder[]> {
  const atDispatch = reader
    .select({ id: orderLines.orderId })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(inArray(units.stage, ['pack', 'ship']));
  const rows = await reader
    .select({
      unitId: units.id,
      serial: units.serial,
      stage: units.stage,
      modelName: models.name,
      options: orderLines.options,
      orderId: orders.id,
      orderNumber: orders.number,
      callSign: contacts.callSign,
      destination: orders.destinationCountry,
      promisedOn: orders.promisedOn,
      estimatedOn: batches.estimatedOn,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .where(orderNumber === undefined ? inArray(orders.id, atDispatch) : eq(orders.number, orderNumber))
    .orderBy(asc(units.id));
  if (rows.length === 0) return [];
  const ids = rows.map(({ unitId }) => unitId);
  const gates = new Map((await readGateFacts(reader, ids)).map((gate) => [gate.unitId, gate]));
  const parcels = new Map(
    (
      await reader
        .select({ unitId: shipmentUnits.unitId, number: max(shipments.number) })
        .from(shipmentUnits)
        .innerJoin(shipments, eq(shipments.id, shipmentUnits.shipmentId))
        .where(inArray(shipmentUnits.unitId, ids))
        .groupBy(shipmentUnits.unitId)
    ).map(({ unitId, number }) => [unitId, number]),
  );
  return [...groupBy(rows, ({ orderId }) => orderId).values()]
    .flatMap((group): DispatchOrder[] => {
      const [first] = group;
      if (first === undefined) return [];
      const dueOn = first.promisedOn ?? first.estimatedOn;
      return [
        {
          id: first.orderId,
          number: first.orderNumber,
          callSign: first.callSign,
          destination: first.destination,
          dueOn,
          isLate: dueOn !== null && dueOn < today,
          units: group.map((row) =>
            dispatchUnit(row, gates.get(row.unitId), parcels.get(row.unitId) ?? null),
          ),
        },
      ];
    })
    .sort((a, b) => (a.dueOn ?? '9').localeCompare(b.dueOn ?? '9') || a.number - b.number);
}

type Gate = Awaited<ReturnType<typeof readGateFacts>>[number];

function dispatchUnit(
  row: { serial: string; modelName: string; options: { label: string }[]; stage: UnitStage },
  gate: Gate | undefined,
  shipmentNumber: number | null,
): DispatchUnit {
  const answer = gate === undefined ? { ok: false as const, reasons: [] } : mayLeave(gate.facts);
  return {
    serial: row.serial,
    modelName: row.modelName,
    options: row.options.map(({ label }) => label),
    stage: row.stage,
    isReady: answer.ok && row.stage === 'pack',
    shipmentNumber,
    missing: answer.ok ? [] : answer.reasons,
    certificate:
      gate?.certificate === undefined || gate.certificate === null
        ? null
        : { code: gate.certificate.code, number: gate.certificate.number },
  };
}
