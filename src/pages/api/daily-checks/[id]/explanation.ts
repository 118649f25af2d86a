import { z } from 'zod';
import { checkExplanation } from '~/schemas/bench-checks';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { explainDailyCheck } from '~/server/services/bench/explain-daily-check';

export const POST = door({
  rule: staff('tester'),
  summary: 'Explain a daily check that was outside its band',
  params: z.object({ id: z.coerce.number().int() }),
  input: checkExplanation,
  output: z.object({ dailyCheckId: z.number().int(), number: z.string() }),
  said: ({ number }) => `The check of ${number} is explained.`,
  run: ({ params, input, ctx }) => explainDailyCheck({ ...input, dailyCheckId: params.id }, ctx),
});
