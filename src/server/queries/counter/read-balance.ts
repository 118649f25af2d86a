import { and, eq, inArray, sql } from 'drizzle-orm';
import { balanceDueMinor } from '~/domain/orders/status';
import type { Reader } from '~/server/db/client';
import { contacts, orderLines, orders, units } from '~/server/db/schema';
import { sumPayments } from '~/server/queries/orders/sum-payments';

/** What an order has still to pay, to whom one would write, and how many of its units have passed; or null. */
export async function readBalance(reader: Reader, which: { id: number } | { number: number }) {
  const [order] = await reader
    .select({
      id: orders.id,
      number: orders.number,
      state: orders.state,
      currency: orders.currency,
      totalMinor: orders.totalMinor,
      email: contacts.email,
      erasedAt: contacts.erasedAt,
    })
    .from(orders)
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .where('id' in which ? eq(orders.id, which.id) : eq(orders.number, which.number));
  if (order === undefined) return null;
  const { erasedAt, ...rest } = order;
  const sums = await sumPayments(reader, order.id);
  const [passed] = await reader
    .select({ count: sql<number>`count(*)` })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(and(eq(orderLines.orderId, order.id), inArray(units.stage, ['pack', 'ship', 'gone'])));
  return {
    ...rest,
    ...sums,
    balanceMinor: balanceDueMinor({ ...order, ...sums }),
    isErased: erasedAt !== null,
    unitsPassed: passed?.count ?? 0,
  };
}
