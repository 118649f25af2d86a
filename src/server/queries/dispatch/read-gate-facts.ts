import { and, asc, eq, inArray, isNull, or } from 'drizzle-orm';
import type { GateFacts } from '~/domain/dispatch/gate';
import { addressGaps } from '~/domain/orders/address';
import { balanceDueMinor } from '~/domain/orders/status';
import { groupBy } from '~/lib/group-by';
import type { Reader } from '~/server/db/client';
import {
  certificates,
  contacts,
  holds,
  orderLines,
  orders,
  reworks,
  testRuns,
  units,
} from '~/server/db/schema';
import { oldestFirst } from '~/server/queries/certificates/order';
import { sumPayments } from '~/server/queries/orders/sum-payments';

/** What decides whether a unit may leave, with the certificate that would go with it. */
export interface UnitGate {
  unitId: number;
  serial: string;
  orderId: number | null;
  facts: GateFacts;
  /** The newest one, where one is issued. */
  certificate: { id: number; code: string; number: string } | null;
}

/**
 * Loads, for each unit, every fact of the rule of dispatch. Asked within a transaction whose locks are taken,
 * it sees what is true until that transaction ends.
 */
export async function readGateFacts(reader: Reader, unitIds: readonly number[]): Promise<UnitGate[]> {
  if (unitIds.length === 0) return [];
  const ids = [...unitIds];
  const rows = await reader
    .select({
      id: units.id,
      serial: units.serial,
      stage: units.stage,
      batchId: units.batchId,
      order: orders,
      contact: contacts,
    })
    .from(units)
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(contacts, eq(contacts.id, orders.contactId))
    .where(inArray(units.id, ids))
    .orderBy(asc(units.id));
  const orderById = new Map(rows.flatMap(({ order }) => (order === null ? [] : [[order.id, order]])));
  const paidInFull = new Map<number, boolean>();
  for (const order of orderById.values()) {
    const sums = await sumPayments(reader, order.id);
    paidInFull.set(order.id, balanceDueMinor({ ...order, ...sums }) === 0);
  }
  const stops = await listStops(reader, ids, rows);
  const open = new Set(
    (
      await reader
        .select({ unitId: reworks.unitId })
        .from(reworks)
        .where(and(inArray(reworks.unitId, ids), isNull(reworks.closedAt)))
    ).map(({ unitId }) => unitId),
  );
  const runs = groupBy(
    await reader
      .select({ id: testRuns.id, unitId: testRuns.unitId, state: testRuns.state, result: testRuns.result })
      .from(testRuns)
      .where(inArray(testRuns.unitId, ids))
      .orderBy(asc(testRuns.unitId), asc(testRuns.runNo)),
    ({ unitId }) => unitId,
  );
  const issued = groupBy(
    await reader
      .select({
        id: certificates.id,
        unitId: certificates.unitId,
        testRunId: certificates.testRunId,
        contactId: certificates.contactId,
        destination: certificates.destinationCountry,
        fileId: certificates.fileId,
        code: certificates.code,
        number: certificates.number,
        letter: certificates.letter,
      })
      .from(certificates)
      .where(inArray(certificates.unitId, ids))
      .orderBy(...oldestFirst),
    ({ unitId }) => unitId,
  );

  return rows.map(({ id, serial, stage, batchId, order, contact }) => {
    const run = runs.get(id)?.at(-1);
    const certificate = issued.get(id)?.at(-1);
    return {
      unitId: id,
      serial,
      orderId: order?.id ?? null,
      facts: {
        stage,
        holds: stops.filter(
          (stop) =>
            (stop.type === 'unit' && stop.id === id) ||
            (stop.type === 'batch' && stop.id === batchId) ||
            (stop.type === 'order' && stop.id === order?.id),
        ).length,
        openRework: open.has(id),
        newestRun: run === undefined ? null : { id: run.id, state: run.state, result: run.result },
        certificate:
          certificate === undefined
            ? null
            : {
                testRunId: certificate.testRunId,
                issued: true,
                buyerContactId: certificate.contactId,
                destination: certificate.destination,
                pdfReady: certificate.fileId !== null,
              },
        order:
          order === null
            ? null
            : {
                paidInFull: paidInFull.get(order.id) ?? false,
                contactId: order.contactId,
                destination: order.destinationCountry,
              },
        orderState: order?.state ?? null,
        addressGaps: contact === null ? [] : addressGaps(contact),
        addressCountry: contact?.country ?? null,
      },
      certificate:
        certificate === undefined
          ? null
          : { id: certificate.id, code: certificate.code, number: certificate.number + certificate.letter },
    };
  });
}

/** Open holds on the units, their batches and their orders. */
async function listStops(
  reader: Reader,
  unitIds: number[],
  rows: readonly { batchId: number | null; order: { id: number } | null }[],
) {
  const on = (type: 'unit' | 'batch' | 'order', ids: number[]) =>
    ids.length === 0 ? undefined : and(eq(holds.subjectType, type), inArray(holds.subjectId, ids));
  return reader
    .select({ type: holds.subjectType, id: holds.subjectId })
    .from(holds)
    .where(
      and(
        isNull(holds.endedAt),
        or(
          on('unit', unitIds),
          on(
            'batch',
            rows.flatMap(({ batchId }) => batchId ?? []),
          ),
          on(
            'order',
            rows.flatMap(({ order }) => order?.id ?? []),
          ),
        ),
      ),
    );
}
