import { and, asc, eq, inArray } from 'drizzle-orm';
import { mayLeave } from '~/domain/dispatch/gate';
import type { Tx } from '~/server/db/client';
import { batches, contacts, orderLines, orders, payments, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readGateFacts } from '~/server/queries/dispatch/read-gate-facts';
import type { UnitGate } from '~/server/queries/dispatch/read-gate-facts';

/**
 * Locks an order and all that the rule of dispatch looks at, always in the same sequence: the order, its
 * address, its payments, its batches, its units. A hold, a run, a payment or a refund comes before or after.
 *
 * @throws DomainError `not_found`
 */
export async function lockOrderForDispatch(
  tx: Tx,
  which: { number: number } | { id: number },
): Promise<{ order: typeof orders.$inferSelect; gates: UnitGate[]; rigsOrdered: number }> {
  const [order] = await tx
    .select()
    .from(orders)
    .where('id' in which ? eq(orders.id, which.id) : eq(orders.number, which.number))
    .for('update');
  if (order === undefined) throw new DomainError('not_found', 'There is no such order.');
  await tx.select({ id: contacts.id }).from(contacts).where(eq(contacts.id, order.contactId)).for('update');
  await tx.select({ id: payments.id }).from(payments).where(eq(payments.orderId, order.id)).for('update');
  const lines = await tx
    .select({ id: orderLines.id, batchId: orderLines.batchId, quantity: orderLines.quantity })
    .from(orderLines)
    .where(and(eq(orderLines.orderId, order.id), eq(orderLines.kind, 'rig')));
  if (lines.length === 0) return { order, gates: [], rigsOrdered: 0 };
  const found = await tx
    .select({ batchId: units.batchId })
    .from(units)
    .where(
      inArray(
        units.orderLineId,
        lines.map(({ id }) => id),
      ),
    );
  const batchIds = [...new Set([...lines, ...found].flatMap(({ batchId }) => batchId ?? []))];
  if (batchIds.length > 0) {
    await tx
      .select({ id: batches.id })
      .from(batches)
      .where(inArray(batches.id, batchIds))
      .orderBy(asc(batches.id))
      .for('update');
  }
  const locked = await tx
    .select({ id: units.id })
    .from(units)
    .where(
      inArray(
        units.orderLineId,
        lines.map(({ id }) => id),
      ),
    )
    .orderBy(asc(units.id))
    .for('update');
  return {
    order,
    gates: await readGateFacts(
      tx,
      locked.map(({ id }) => id),
    ),
    rigsOrdered: lines.reduce((sum, { quantity }) => sum + quantity, 0),
  };
}

/**
 * Refuses with everything that stands against any of the units.
 *
 * @throws DomainError `conflict`
 */
export function mustMayLeave(gates: readonly UnitGate[]): void {
  const reasons = gates.flatMap(({ serial, facts }) => {
    const answer = mayLeave(facts);
    return answer.ok ? [] : [`${serial}: ${answer.reasons.join(' ')}`];
  });
  if (reasons.length > 0) throw new DomainError('conflict', reasons.join(' '));
}
