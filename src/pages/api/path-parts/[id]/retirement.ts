import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retirePathPart } from '~/server/services/bench/retire-path-part';

export const POST = door({
  rule: staff('tester'),
  summary: 'Take a path part out of use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ pathPartId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is out of use; what was read with it stays.`,
  next: ({ number }) => paths.pathPart(number),
  run: ({ params, ctx }) => retirePathPart({ pathPartId: params.id }, ctx),
});
