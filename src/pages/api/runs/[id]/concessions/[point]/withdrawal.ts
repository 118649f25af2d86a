import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { withdrawConcession } from '~/server/services/bench/withdraw-concession';

export const POST = door({
  rule: staff(),
  summary: 'Take back a concession of an open run',
  params: z.object({ id: z.coerce.number().int(), point: z.coerce.number().int() }),
  output: z.object({ testPointId: z.number().int() }),
  said: () => 'The concession is withdrawn: the point counts as it was read.',
  run: ({ params, ctx }) => withdrawConcession({ runId: params.id, testPointId: params.point }, ctx),
});
