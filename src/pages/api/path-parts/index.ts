import { z } from 'zod';
import { paths } from '~/lib/paths';
import { MAX_LOSS_BYTES, newPathPart } from '~/schemas/bench-equipment';
import { door } from '~/server/door';
import { sentFile } from '~/lib/sent-file';
import { staff } from '~/server/rules';
import { createPathPart } from '~/server/services/bench/create-path-part';

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter a path part; its loss typed, or as a CSV or Touchstone file',
  input: newPathPart,
  maxBytes: MAX_LOSS_BYTES * 2,
  output: z.object({ pathPartId: z.number().int(), number: z.string(), note: z.string() }),
  said: ({ number, note }) => `${number} can be put into a path now. ${note}`.trim(),
  next: ({ number }) => paths.pathPart(number),
  run: async ({ input, ctx }) => createPathPart({ ...input, lossFile: await sentFile(input.lossFile) }, ctx),
});
