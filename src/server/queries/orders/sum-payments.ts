import { eq, ne, and, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { payments, refunds } from '~/server/db/schema';

/** What was paid for an order and what of it went back or is on its way back, in minor units. */
export async function sumPayments(
  reader: Reader,
  orderId: number,
): Promise<{ paidMinor: number; refundedMinor: number }> {
  const [paid] = await reader
    .select({ sum: sql<string>`coalesce(sum(${payments.amountMinor}), 0)` })
    .from(payments)
    .where(eq(payments.orderId, orderId));
  const [refunded] = await reader
    .select({ sum: sql<string>`coalesce(sum(${refunds.amountMinor}), 0)` })
    .from(refunds)
    .innerJoin(payments, eq(payments.id, refunds.paymentId))
    .where(and(eq(payments.orderId, orderId), ne(refunds.state, 'refused')));
  return { paidMinor: Number(paid?.sum ?? 0), refundedMinor: Number(refunded?.sum ?? 0) };
}
