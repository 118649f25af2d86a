import { balanceAsked } from '~/schemas/counter-orders';
import { orderNumberParam } from '~/schemas/order-payments';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { askForBalance } from '~/server/services/orders/ask-for-balance';

export const POST = door({
  rule: staff(),
  summary: 'Ask the buyer of an order for the balance, by mail',
  params: orderNumberParam,
  output: balanceAsked,
  said: () => 'The letter that asks for the balance is on its way.',
  run: ({ params, ctx }) => askForBalance({ orderNumber: params.number }, ctx),
});
