import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { openRun } from '~/server/services/bench/open-run';

export const POST = door({
  rule: staff('tester'),
  summary: 'Open the next final test of a unit',
  params: z.object({ serial: z.string().max(40) }),
  output: z.object({ runId: z.number().int(), runNo: z.number().int(), serial: z.string() }),
  said: ({ runNo }) => `Run ${runNo} is open.`,
  next: ({ serial, runNo }) => paths.run(serial, runNo),
  run: ({ params, ctx }) => openRun(params, ctx),
});
