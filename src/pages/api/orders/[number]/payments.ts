import { handPayment, handPaymentRecorded, orderNumberParam } from '~/schemas/order-payments';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { recordHandPayment } from '~/server/services/orders/record-hand-payment';

export const POST = door({
  rule: staff(),
  summary: 'Write down a payment by transfer or in cash',
  params: orderNumberParam,
  input: handPayment,
  output: handPaymentRecorded,
  said: ({ balanceMinor }) =>
    balanceMinor === 0
      ? 'The payment is written down; the order is paid in full.'
      : 'The payment is written down.',
  run: ({ params, input, ctx }) => recordHandPayment({ ...input, orderNumber: params.number }, ctx),
});
