import { z } from 'zod';
import { door } from '~/server/door';
import { readHealth } from '~/server/queries/office/read-health';
import { anyone } from '~/server/rules';

export const GET = door({
  rule: anyone,
  summary: 'The state of database and outbox',
  output: z.object({
    database: z.literal('up'),
    outbox: z.object({
      waiting: z.number().int(),
      gaveUp: z.number().int(),
      oldestSeconds: z.number().nullable(),
    }),
  }),
  run: ({ ctx }) => readHealth(ctx.db, ctx.now),
});
