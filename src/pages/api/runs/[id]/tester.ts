import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { takeOverRun } from '~/server/services/bench/take-over-run';

export const POST = door({
  rule: staff('tester'),
  summary: 'Take an open run over from the tester who has it',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ runId: z.number().int(), runNo: z.number().int() }),
  said: ({ runNo }) => `Run ${runNo} is yours.`,
  run: ({ params, ctx }) => takeOverRun({ runId: params.id }, ctx),
});
