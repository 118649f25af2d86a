import { z } from 'zod';
import { readingVoiding } from '~/schemas/bench-runs';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { voidReading } from '~/server/services/bench/void-reading';

export const POST = door({
  rule: staff('tester'),
  summary: 'Leave a reading out of its verdict, with a cause',
  params: z.object({ id: z.coerce.number().int(), reading: z.coerce.number().int() }),
  input: readingVoiding,
  output: z.object({ readingId: z.number().int() }),
  said: () => 'The reading no longer counts.',
  run: ({ params, input, ctx }) =>
    voidReading({ runId: params.id, readingId: params.reading, reason: input.reason }, ctx),
});
