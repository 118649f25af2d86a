import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { returnPathPart } from '~/server/services/bench/return-path-part';

export const POST = door({
  rule: staff('tester'),
  summary: 'Put a path part back in use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ pathPartId: z.number().int(), number: z.string(), revision: z.number().int() }),
  said: ({ number }) => `${number} is back in use.`,
  next: ({ number }) => paths.pathPart(number),
  run: ({ params, ctx }) => returnPathPart({ pathPartId: params.id }, ctx),
});
