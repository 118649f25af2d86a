import { and, desc, eq, inArray, or, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { certificates, orderLines, outbox, shipments, units } from '~/server/db/schema';

export interface OrderMail {
  letter: string;
  askedAt: Date;
  sentAt: Date | null;
  gaveUpAt: Date | null;
  attempts: number;
}

/** The letters that were asked for about an order, its units' certificates and its parcels, newest first. */
export async function listOrderMail(reader: Reader, orderId: number): Promise<OrderMail[]> {
  const parcels = await reader
    .select({ id: shipments.id })
    .from(shipments)
    .where(eq(shipments.orderId, orderId));
  const issued = await reader
    .select({ id: certificates.id })
    .from(certificates)
    .innerJoin(units, eq(units.id, certificates.unitId))
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(eq(orderLines.orderId, orderId));
  const about = (name: string, ids: { id: number }[]) =>
    ids.length === 0
      ? undefined
      : inArray(
          sql`json_value(${outbox.payload}, ${`$.${name}`})`,
          ids.map(({ id }) => String(id)),
        );
  return reader
    .select({
      letter: sql<string>`coalesce(json_value(${outbox.payload}, '$.letter'), '')`,
      askedAt: outbox.createdAt,
      sentAt: outbox.doneAt,
      gaveUpAt: outbox.gaveUpAt,
      attempts: outbox.attempts,
    })
    .from(outbox)
    .where(
      and(
        eq(outbox.kind, 'mail'),
        or(about('orderId', [{ id: orderId }]), about('shipmentId', parcels), about('certificateId', issued)),
      ),
    )
    .orderBy(desc(outbox.id))
    .limit(50);
}
