import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import { balanceDueMinor, orderCan } from '~/domain/orders/status';
import type { handPayment } from '~/schemas/order-payments';
import { orders, payments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { sumPayments } from '~/server/queries/orders/sum-payments';
import type { Ctx } from '~/server/write';
import { actingUserId, write } from '~/server/write';
import { confirmOrder } from './confirm-order';

/**
 * Writes down money that came by transfer or in cash. The first that covers what is due makes the order
 * paid and spawns its units; later ones reduce its balance.
 *
 * @throws DomainError `not_found`, `conflict` where nothing is to be paid, `invalid` where it is more than
 * the balance, `taken` where its place has been given back and none is free
 */
export async function recordHandPayment(
  input: z.output<typeof handPayment> & { orderNumber: number },
  ctx: Ctx,
): Promise<{ paymentId: number; balanceMinor: number }> {
  const { orderNumber, kind, amountMinor } = input;
  return write(ctx, async (w) => {
    const [order] = await w.tx.select().from(orders).where(eq(orders.number, orderNumber)).for('update');
    if (order === undefined) throw new DomainError('not_found', 'There is no such order.');
    const sums = await sumPayments(w.tx, order.id);
    const before = balanceDueMinor({ ...order, ...sums });
    const isFirst = orderCan.pay(order.state).ok;
    const answer = isFirst ? orderCan.pay(order.state) : orderCan.payBalance(order.state);
    if (!answer.ok) throw new DomainError('conflict', answer.reason);
    if (before === 0) throw new DomainError('conflict', 'This order is paid in full.');
    if (amountMinor > before) {
      const sentence = 'This is more than the order has to pay.';
      throw new DomainError('invalid', sentence, { amountMinor: sentence });
    }
    const [{ insertId: paymentId }] = await w.tx.insert(payments).values({
      orderId: order.id,
      kind,
      amountMinor,
      currency: order.currency,
      paidAt: w.now,
      byUserId: actingUserId(w),
    });
    const covers = sums.paidMinor - sums.refundedMinor + amountMinor >= order.dueNowMinor;
    const confirmed = isFirst && covers ? await confirmOrder(w, order) : undefined;
    if (confirmed === null) {
      throw new DomainError(
        'taken',
        'The place of this order has been given back, and none is free in its batch.',
      );
    }
    const balanceMinor = before - amountMinor;
    await w.record({
      action: 'order.pay_by_hand',
      subjects: [{ type: 'order', id: order.id }],
      details: {
        paymentId,
        kind,
        amountMinor,
        currency: order.currency,
        balanceMinor: { from: before, to: balanceMinor },
        ...(confirmed === undefined ? {} : { unitIds: confirmed.unitIds }),
      },
    });
    return { paymentId, balanceMinor };
  });
}
