import { z } from 'zod';
import { paths } from '~/lib/paths';
import { instrumentRevision, MAX_CALIBRATION_BYTES } from '~/schemas/bench-equipment';
import { door } from '~/server/door';
import { sentFile } from '~/lib/sent-file';
import { staff } from '~/server/rules';
import { reviseInstrument } from '~/server/services/bench/revise-instrument';

export const POST = door({
  rule: staff('tester'),
  summary: 'Give an instrument its next revision; the calibration certificate as a file',
  params: z.object({ id: z.coerce.number().int() }),
  input: instrumentRevision,
  maxBytes: MAX_CALIBRATION_BYTES * 1.5,
  output: z.object({
    instrumentId: z.number().int(),
    instrumentRevisionId: z.number().int(),
    number: z.string(),
    revision: z.number().int(),
  }),
  said: ({ revision }) => `Revision ${revision} applies from now on.`,
  next: ({ number }) => paths.instrument(number),
  run: async ({ params, input, ctx }) =>
    reviseInstrument(
      { ...input, instrumentId: params.id, certificateFile: await sentFile(input.certificateFile) },
      ctx,
    ),
});
