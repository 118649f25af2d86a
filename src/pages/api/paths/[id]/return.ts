import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { returnPath } from '~/server/services/bench/return-path';

export const POST = door({
  rule: staff('tester'),
  summary: 'Put a path back in use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ pathId: z.number().int(), number: z.string(), revision: z.number().int() }),
  said: ({ number }) => `${number} is back in use.`,
  next: ({ number }) => paths.signalPath(number),
  run: ({ params, ctx }) => returnPath({ pathId: params.id }, ctx),
});
