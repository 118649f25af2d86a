import { desc, eq, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { orderLines, orders } from '~/server/db/schema';

/** The orders of a buyer, newest first. */
export async function listOwnOrders(reader: Reader, buyerUserId: number) {
  return reader
    .select({
      number: orders.number,
      state: orders.state,
      placedAt: orders.placedAt,
      promisedOn: orders.promisedOn,
      totalMinor: orders.totalMinor,
      currency: orders.currency,
      what: sql<string>`group_concat(concat(${orderLines.quantity}, ' × ', ${orderLines.description}) order by ${orderLines.lineNo} separator ', ')`,
    })
    .from(orders)
    .innerJoin(orderLines, eq(orderLines.orderId, orders.id))
    .where(eq(orders.buyerUserId, buyerUserId))
    .groupBy(orders.id)
    .orderBy(desc(orders.id))
    .limit(200);
}
