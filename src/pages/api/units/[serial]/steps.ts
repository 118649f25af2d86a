import { z } from 'zod';
import { paths } from '~/lib/paths';
import { tick } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { tickStep } from '~/server/services/production/tick-step';

export const POST = door({
  rule: staff('builder'),
  summary: 'Tick a build step of a unit',
  params: z.object({ serial: z.string() }),
  input: tick,
  output: z.object({
    serial: z.string(),
    title: z.string(),
    round: z.number().int(),
    stage: z.string(),
  }),
  said: ({ title, stage }) =>
    stage === 'final_test' ? `“${title}” is done. The unit waits for its final test.` : `“${title}” is done.`,
  next: ({ serial }) => paths.unitBuild(serial),
  run: ({ params, input, ctx }) => tickStep({ ...input, serial: params.serial }, ctx),
});
