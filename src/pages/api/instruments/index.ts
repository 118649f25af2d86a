import { z } from 'zod';
import { paths } from '~/lib/paths';
import { MAX_CALIBRATION_BYTES, newInstrument } from '~/schemas/bench-equipment';
import { instrumentSpecSchema } from '~/schemas/bench-specs';
import { door } from '~/server/door';
import { sentFile } from '~/lib/sent-file';
import { listInstruments } from '~/server/queries/bench/list-equipment';
import { staff } from '~/server/rules';
import { createInstrument } from '~/server/services/bench/create-instrument';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'Instruments in use, each with its present revision',
  output: z.array(
    z.object({
      id: z.number().int(),
      revisionId: z.number().int(),
      number: z.string(),
      name: z.string(),
      revision: z.number().int(),
      spec: instrumentSpecSchema,
    }),
  ),
  run: ({ ctx }) => listInstruments(ctx.db),
});

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter a new instrument with its first revision; the calibration certificate as a file',
  input: newInstrument,
  // A file over its own limit is told so beside its field.
  maxBytes: MAX_CALIBRATION_BYTES * 1.5,
  output: z.object({
    instrumentId: z.number().int(),
    instrumentRevisionId: z.number().int(),
    number: z.string(),
  }),
  said: ({ number }) => `${number} can be chosen at the bench now.`,
  next: ({ number }) => paths.instrument(number),
  run: async ({ input, ctx }) =>
    createInstrument({ ...input, certificateFile: await sentFile(input.certificateFile) }, ctx),
});
