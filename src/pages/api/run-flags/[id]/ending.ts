import { z } from 'zod';
import { flagEnding } from '~/schemas/bench-checks';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { endRunFlag } from '~/server/services/bench/end-run-flag';

export const POST = door({
  rule: staff(),
  summary: 'End the doubt that a bad daily check has cast on a closed run',
  params: z.object({ id: z.coerce.number().int() }),
  input: flagEnding,
  output: z.object({ runFlagId: z.number().int() }),
  said: () => 'The flag is ended; what was found stays with the run.',
  run: ({ params, input, ctx }) => endRunFlag({ ...input, runFlagId: params.id }, ctx),
});
