import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retirePath } from '~/server/services/bench/retire-path';

export const POST = door({
  rule: staff('tester'),
  summary: 'Take a path out of use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ pathId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is out of use; what was read with it stays.`,
  next: ({ number }) => paths.signalPath(number),
  run: ({ params, ctx }) => retirePath({ pathId: params.id }, ctx),
});
