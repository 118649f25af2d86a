import { z } from 'zod';
import { newRework } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { openRework } from '~/server/services/production/open-rework';

export const POST = door({
  rule: staff('builder', 'tester'),
  summary: 'Put a unit into rework',
  params: z.object({ serial: z.string() }),
  input: newRework,
  output: z.object({ reworkId: z.number().int(), serial: z.string() }),
  said: ({ serial }) => `${serial} is in rework.`,
  run: ({ params, input, ctx }) => openRework({ ...input, serial: params.serial }, ctx),
});
