import { z } from 'zod';
import { newInstrument } from '~/schemas/bench-equipment';
import { instrumentSpecSchema } from '~/schemas/bench-specs';
import { door } from '~/server/door';
import { listInstruments } from '~/server/queries/bench/list-equipment';
import { staff } from '~/server/rules';
import { createInstrument } from '~/server/services/bench/create-instrument';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'Instruments in use, each with its present revision',
  output: z.array(
    z.object({
      id: z.number().int(),
      revisionId: z.number().int(),
      number: z.string(),
      name: z.string(),
      revision: z.number().int(),
      spec: instrumentSpecSchema,
    }),
  ),
  run: ({ ctx }) => listInstruments(ctx.db),
});

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter a new instrument with its first revision',
  input: newInstrument,
  output: z.object({
    instrumentId: z.number().int(),
    instrumentRevisionId: z.number().int(),
    number: z.string(),
  }),
  said: ({ number }) => `${number} can be chosen at the bench now.`,
  run: ({ input, ctx }) => createInstrument(input, ctx),
});
