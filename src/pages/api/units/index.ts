import { z } from 'zod';
import { paths } from '~/lib/paths';
import { newUnit } from '~/schemas/bench-alone';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { enterUnit } from '~/server/services/production/enter-unit';

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter a unit by its serial number, and open its first final test',
  input: newUnit,
  output: z.object({
    unitId: z.number().int(),
    serial: z.string(),
    runId: z.number().int(),
    runNo: z.number().int(),
  }),
  said: ({ serial, runNo }) => `${serial} is in the books, and run ${runNo} is open.`,
  next: ({ serial, runNo }) => paths.run(serial, runNo),
  run: ({ input, ctx }) => enterUnit(input, ctx),
});
