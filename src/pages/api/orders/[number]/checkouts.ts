import { checkoutWanted, orderNumberParam } from '~/schemas/order-payments';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { takePayment } from '~/server/payments/take-order';
import { findOwnOrder } from '~/server/queries/orders/find-order';
import { signedIn } from '~/server/rules';

export const POST = door({
  rule: signedIn,
  summary: 'Open a payment page for what one’s own order has to pay now',
  params: orderNumberParam,
  output: checkoutWanted,
  next: ({ payUrl }) => new URL(payUrl).pathname,
  run: async ({ params, person, ctx }) => {
    const order = person === null ? null : await findOwnOrder(ctx.db, params.number, person.id);
    if (order === null) throw new DomainError('not_found', 'There is no such order.');
    return takePayment({ orderId: order.id }, ctx);
  },
});
