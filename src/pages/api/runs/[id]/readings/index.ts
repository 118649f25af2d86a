import { z } from 'zod';
import { readingEntry } from '~/schemas/bench-runs';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { recordReading } from '~/server/services/bench/record-reading';

export const POST = door({
  rule: staff('tester'),
  summary: 'Record a reading of an open run, correct the newest one, or add another',
  params: z.object({ id: z.coerce.number().int() }),
  input: readingEntry,
  output: z.object({ readingId: z.number().int(), readingNo: z.number().int(), version: z.number().int() }),
  said: () => 'Recorded.',
  run: ({ params, input, ctx }) => recordReading({ ...input, runId: params.id }, ctx),
});
