import { desc, eq, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { orders, shipments, shipmentUnits, units } from '~/server/db/schema';

/** Parcels that wait for their carrier first, then those that left, the newest first. */
export async function listShipments(reader: Reader, limit: number) {
  const rows = await reader
    .select({
      number: shipments.number,
      state: shipments.state,
      orderNumber: orders.number,
      carrier: shipments.carrier,
      trackingNumber: shipments.trackingNumber,
      packedAt: shipments.packedAt,
      shippedAt: shipments.shippedAt,
      serials: sql<string>`coalesce(group_concat(${units.serial} order by ${units.serial} separator ','), '')`,
    })
    .from(shipments)
    .innerJoin(orders, eq(orders.id, shipments.orderId))
    .leftJoin(shipmentUnits, eq(shipmentUnits.shipmentId, shipments.id))
    .leftJoin(units, eq(units.id, shipmentUnits.unitId))
    .groupBy(shipments.id)
    .orderBy(sql`${shipments.state} = 'shipped'`, desc(shipments.id))
    .limit(limit);
  return rows.map(({ serials, ...row }) => ({ ...row, serials: serials === '' ? [] : serials.split(',') }));
}
