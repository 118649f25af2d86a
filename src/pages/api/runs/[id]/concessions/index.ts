import { z } from 'zod';
import { concessionEntry } from '~/schemas/bench-runs';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { grantConcession } from '~/server/services/bench/grant-concession';

export const POST = door({
  rule: staff(),
  summary: 'Let a point of an open run go by concession, with a reason that the certificate prints',
  params: z.object({ id: z.coerce.number().int() }),
  input: concessionEntry,
  output: z.object({ testPointId: z.number().int() }),
  said: () => 'The point is let go by concession.',
  run: ({ params, input, ctx }) => grantConcession({ ...input, runId: params.id }, ctx),
});
