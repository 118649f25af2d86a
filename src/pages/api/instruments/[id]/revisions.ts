import { z } from 'zod';
import { instrumentRevision } from '~/schemas/bench-equipment';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { reviseInstrument } from '~/server/services/bench/revise-instrument';

export const POST = door({
  rule: staff('tester'),
  summary: 'Give an instrument its next revision',
  params: z.object({ id: z.coerce.number().int() }),
  input: instrumentRevision,
  output: z.object({
    instrumentId: z.number().int(),
    instrumentRevisionId: z.number().int(),
    revision: z.number().int(),
  }),
  said: ({ revision }) => `Revision ${revision} applies from now on.`,
  run: ({ params, input, ctx }) => reviseInstrument({ ...input, instrumentId: params.id }, ctx),
});
