import { z } from 'zod';
import { paths } from '~/lib/paths';
import { newPath } from '~/schemas/bench-equipment';
import { pathSpecSchema } from '~/schemas/bench-specs';
import { door } from '~/server/door';
import { listPaths } from '~/server/queries/bench/list-equipment';
import { staff } from '~/server/rules';
import { createPath } from '~/server/services/bench/create-path';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'Paths in use, each with its present revision',
  output: z.array(
    z.object({
      id: z.number().int(),
      revisionId: z.number().int(),
      number: z.string(),
      name: z.string(),
      revision: z.number().int(),
      spec: pathSpecSchema,
    }),
  ),
  run: ({ ctx }) => listPaths(ctx.db),
});

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter a new path, by its parts in order',
  input: newPath,
  output: z.object({ pathId: z.number().int(), pathRevisionId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} can be chosen at the bench now.`,
  next: ({ number }) => paths.signalPath(number),
  run: ({ input, ctx }) => createPath(input, ctx),
});
