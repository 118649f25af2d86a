import { z } from 'zod';
import { newHold } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { placeHold } from '~/server/services/production/place-hold';

export const POST = door({
  rule: staff('builder', 'tester', 'shipper'),
  summary: 'Place a hold on a unit',
  params: z.object({ serial: z.string() }),
  input: newHold,
  output: z.object({ holdId: z.number().int() }),
  said: () => 'The unit is on hold.',
  run: ({ params, input, ctx }) =>
    placeHold({ subject: { type: 'unit', number: params.serial }, reason: input.reason }, ctx),
});
