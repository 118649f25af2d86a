import { z } from 'zod';
import { reworkFinding } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { findCause } from '~/server/services/production/find-cause';

export const POST = door({
  rule: staff('builder', 'tester'),
  summary: 'Write down what was found behind a unit’s rework',
  params: z.object({ serial: z.string() }),
  input: reworkFinding,
  output: z.object({ reworkId: z.number().int(), serial: z.string(), foundCause: z.string() }),
  said: ({ foundCause }) => `Written down: ${foundCause}.`,
  run: ({ params, input, ctx }) => findCause({ ...input, serial: params.serial }, ctx),
});
