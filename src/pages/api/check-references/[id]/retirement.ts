import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retireCheckReference } from '~/server/services/bench/retire-check-reference';

export const POST = door({
  rule: staff('tester'),
  summary: 'Give a reference of the daily check up',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ checkReferenceId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is not asked for any more; its checks stay.`,
  run: ({ params, ctx }) => retireCheckReference({ checkReferenceId: params.id }, ctx),
});
