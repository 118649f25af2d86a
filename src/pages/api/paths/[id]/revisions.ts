import { z } from 'zod';
import { paths } from '~/lib/paths';
import { pathRevision } from '~/schemas/bench-equipment';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { revisePath } from '~/server/services/bench/revise-path';

export const POST = door({
  rule: staff('tester'),
  summary: 'Give a path its next revision',
  params: z.object({ id: z.coerce.number().int() }),
  input: pathRevision,
  output: z.object({
    pathId: z.number().int(),
    pathRevisionId: z.number().int(),
    number: z.string(),
    revision: z.number().int(),
  }),
  said: ({ revision }) => `Revision ${revision} applies from now on.`,
  next: ({ number }) => paths.signalPath(number),
  run: ({ params, input, ctx }) => revisePath({ ...input, pathId: params.id }, ctx),
});
