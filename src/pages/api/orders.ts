import { orderPlaced, orderPlacing } from '~/schemas/order-placing';
import { door } from '~/server/door';
import { takeOrder } from '~/server/payments/take-order';
import { anyone } from '~/server/rules';

export const POST = door({
  rule: anyone,
  summary: 'Take places in a batch and open the payment page',
  input: orderPlacing,
  output: orderPlaced,
  next: ({ payUrl }) => new URL(payUrl).pathname,
  run: ({ input, ctx }) => takeOrder(input, ctx),
});
