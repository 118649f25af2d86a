import { z } from 'zod';
import { reworkEnd } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { closeRework } from '~/server/services/production/close-rework';

export const POST = door({
  rule: staff('builder', 'tester'),
  summary: 'End the rework of a unit with its remedy',
  params: z.object({ serial: z.string() }),
  input: reworkEnd,
  output: z.object({ reworkId: z.number().int(), serial: z.string(), stage: z.string() }),
  said: ({ serial, stage }) =>
    stage === 'final_test'
      ? `The rework of ${serial} is done; it goes back to the final test.`
      : `The rework of ${serial} is done.`,
  run: ({ params, input, ctx }) => closeRework({ ...input, serial: params.serial }, ctx),
});
