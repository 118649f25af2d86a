import { z } from 'zod';
import { resultInWords } from '~/domain/bench/run-result';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { closeRun } from '~/server/services/bench/close-run';

export const POST = door({
  rule: staff('tester'),
  summary: 'Close a run with the result that its readings give',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({
    runId: z.number().int(),
    runNo: z.number().int(),
    serial: z.string(),
    result: z.enum(['passed', 'passed_by_concession', 'undecided', 'failed']),
  }),
  said: ({ runNo, result }) => `Run ${runNo} is closed: ${resultInWords(result).toLowerCase()}.`,
  run: ({ params, ctx }) => closeRun({ runId: params.id }, ctx),
});
