import { checkoutWanted, orderTokenParam } from '~/schemas/order-payments';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { takePayment } from '~/server/payments/take-order';
import { findOrderByToken } from '~/server/queries/orders/find-order';
import { anyone } from '~/server/rules';

export const POST = door({
  rule: anyone,
  summary: 'Open a payment page for what the order of a secret link has to pay now',
  params: orderTokenParam,
  output: checkoutWanted,
  next: ({ payUrl }) => new URL(payUrl).pathname,
  run: async ({ params, ctx }) => {
    const order = await findOrderByToken(ctx.db, params.token);
    if (order === null) throw new DomainError('not_found', 'There is no such order.');
    return takePayment({ orderId: order.id }, ctx);
  },
});
