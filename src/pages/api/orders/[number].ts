import { orderNumberParam } from '~/schemas/order-payments';
import { orderReading } from '~/schemas/order-reading';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { readOrderFor } from '~/server/queries/orders/read-order-for';
import { signedIn } from '~/server/rules';

export const GET = door({
  rule: signedIn,
  summary: 'An order: a buyer’s own, or what the person’s roles open of any',
  params: orderNumberParam,
  output: orderReading,
  run: async ({ params, person, ctx }) => {
    const order = person === null ? null : await readOrderFor(ctx.db, params.number, person, ctx.now);
    if (order === null) throw new DomainError('not_found', 'There is no such order.');
    return order;
  },
});
