import { z } from 'zod';
import { quantityEdit } from '~/schemas/definitions-edit';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { reviseQuantity } from '~/server/services/bench/revise-quantity';

export const POST = door({
  rule: staff(),
  summary: 'Add a quantity of the works’ own, or make its next revision',
  input: quantityEdit,
  maxBytes: 256 * 1024,
  output: z.object({ key: z.string(), revision: z.number().int() }),
  said: ({ key, revision }) => `Revision ${revision} of ${key} counts from now on.`,
  run: ({ input, ctx }) => reviseQuantity(input, ctx),
});
