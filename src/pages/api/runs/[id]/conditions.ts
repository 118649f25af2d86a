import { z } from 'zod';
import { runConditions } from '~/schemas/bench-runs';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { setConditions } from '~/server/services/bench/set-conditions';

export const POST = door({
  rule: staff('tester'),
  summary: 'Write down the conditions of an open run, and firmware and alignment of its unit',
  params: z.object({ id: z.coerce.number().int() }),
  input: runConditions,
  output: z.object({ runId: z.number().int(), version: z.number().int() }),
  run: ({ params, input, ctx }) => setConditions({ ...input, runId: params.id }, ctx),
});
