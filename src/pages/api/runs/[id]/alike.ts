import { z } from 'zod';
import { alikePoint } from '~/schemas/bench-alike';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { listAlike } from '~/server/queries/bench/list-alike';
import { staff } from '~/server/rules';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'The last 40 values like each point of a run: same model, quantity and band, the newest first',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ points: z.array(alikePoint) }),
  run: async ({ params, ctx }) => {
    const points = await listAlike(ctx.db, params.id);
    if (points === null) throw new DomainError('not_found', 'There is no such run.');
    return { points };
  },
});
