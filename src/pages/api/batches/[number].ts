import { batchChange, batchNumberParam, batchOpened } from '~/schemas/planning-batches';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { changeBatch } from '~/server/services/planning/change-batch';

export const POST = door({
  rule: staff(),
  summary: 'Change a batch’s places, price, date or state',
  params: batchNumberParam,
  input: batchChange,
  output: batchOpened,
  said: ({ number }) => `Batch ${number} is changed.`,
  run: ({ params, input, ctx }) => changeBatch({ ...input, number: params.number }, ctx),
});
