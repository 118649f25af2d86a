import { eq } from 'drizzle-orm';
import { canAskForBalance } from '~/domain/dispatch/parcel';
import { orderCan } from '~/domain/orders/status';
import { dayOf } from '~/lib/dates';
import { orders, outbox } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readBalance } from '~/server/queries/counter/read-balance';
import { getWorks } from '~/server/queries/office/get-works';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

/**
 * Asks a buyer who has paid a deposit for the rest, by mail, once a unit has passed its final test; once a
 * day at most. The payment page itself is wanted when the buyer comes to the order's page.
 *
 * @throws DomainError `not_found`, `conflict` where there is nothing to ask for, or it was asked today
 */
export async function askForBalance(
  input: { orderNumber: number },
  ctx: Ctx,
): Promise<{ orderId: number; balanceMinor: number }> {
  return write(ctx, async (w) => {
    await w.tx
      .select({ id: orders.id })
      .from(orders)
      .where(eq(orders.number, input.orderNumber))
      .for('update');
    const order = await readBalance(w.tx, { number: input.orderNumber });
    if (order === null) throw new DomainError('not_found', 'There is no such order.');
    for (const answer of [canAskForBalance(order), orderCan.payBalance(order.state)]) {
      if (!answer.ok) throw new DomainError('conflict', answer.reason);
    }
    const { timeZone } = await getWorks(w.tx);
    const key = `balance-due:${order.id}:${dayOf(w.now, timeZone)}`;
    const [asked] = await w.tx.select({ id: outbox.id }).from(outbox).where(eq(outbox.key, key));
    if (asked !== undefined) {
      throw new DomainError('conflict', 'The buyer was asked today already. Ask again tomorrow.');
    }
    await w.post({ kind: 'mail', key, payload: { letter: 'balance_due', orderId: order.id } });
    await w.record({
      action: 'order.ask_balance',
      subjects: [{ type: 'order', id: order.id }],
      details: { balanceMinor: order.balanceMinor, currency: order.currency },
    });
    return { orderId: order.id, balanceMinor: order.balanceMinor };
  });
}
