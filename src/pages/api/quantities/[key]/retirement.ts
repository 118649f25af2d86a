import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retireQuantity } from '~/server/services/bench/retire-quantity';

export const POST = door({
  rule: staff(),
  summary: 'Take a quantity of the works’ own out of use',
  params: z.object({ key: z.string().max(60) }),
  output: z.object({ key: z.string() }),
  said: ({ key }) => `${key} is out of use.`,
  run: ({ params, ctx }) => retireQuantity(params, ctx),
});
